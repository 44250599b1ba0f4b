// SPDX-License-Identifier: Apache-2.0
#include "numerics/products.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <vector>

#include "support/close.hpp"
#include "support/random_data.hpp"

namespace bandwright {
namespace {

struct Shape {
  Index rows;
  Index columns;
};
const std::vector<Shape> kShapes{{1, 1}, {1, 7}, {7, 1},   {2, 3},   {3, 3},
                                 {9, 4}, {4, 9}, {33, 65}, {65, 33}, {40, 40}};
const std::vector<Shape> kEmptyShapes{{0, 0}, {0, 3}, {3, 0}};

/// Half a unit in the last place for each of n terms of size 1, twice.
Tolerance rounding_of(Index terms) { return {.absolute = 2.3e-16 * static_cast<double>(terms)}; }

Vector flat(const Matrix& X) { return Eigen::Map<const Vector>(X.data(), X.size()); }

// The oracle is Eigen's coefficient-based product, which has no code in common with BLAS.
TEST(Products, AgreeWithEigen) {
  for (const auto& [n, p] : kShapes) {
    SCOPED_TRACE(std::to_string(n) + " x " + std::to_string(p));
    const Matrix X = random_matrix(1, n, p);
    const Vector v = random_vector(2, p);
    const Vector u = random_vector(3, n);
    EXPECT_TRUE(expect_close(multiply(X, v), X.lazyProduct(v), rounding_of(p)));
    EXPECT_TRUE(expect_close(multiply_transposed(X, u), X.transpose().lazyProduct(u), rounding_of(n)));
    const Matrix gram = smaller_gram(X);
    const Matrix want = n <= p ? Matrix(X.lazyProduct(X.transpose())) : Matrix(X.transpose().lazyProduct(X));
    EXPECT_TRUE(expect_close(flat(gram), flat(want), rounding_of(std::max(n, p))));
    EXPECT_TRUE(gram == gram.transpose());
  }
}

TEST(Products, EmptyMatricesGiveZeros) {
  for (const auto& [n, p] : kEmptyShapes) {
    const Matrix X(n, p);
    EXPECT_TRUE(multiply(X, Vector::Ones(p)) == Vector::Zero(n));
    EXPECT_TRUE(multiply_transposed(X, Vector::Ones(n)) == Vector::Zero(p));
    EXPECT_TRUE(smaller_gram(X) == Matrix::Zero(std::min(n, p), std::min(n, p)));
  }
}

TEST(Products, PartsOfAMatrixNeedNoCopy) {
  const Matrix X = random_matrix(4, 12, 10);
  const Matrix part = X.block(3, 2, 5, 6);
  const Vector v = random_vector(5, 6);
  EXPECT_TRUE(expect_close(multiply(X.block(3, 2, 5, 6), v), part.lazyProduct(v), rounding_of(6)));
  EXPECT_TRUE(expect_close(multiply_transposed(X.middleRows(3, 5), Vector::Ones(5)),
                           X.middleRows(3, 5).colwise().sum().transpose(), rounding_of(5)));
  EXPECT_TRUE(multiply_transposed(X.topRows(0), Vector(0)) == Vector::Zero(10));
  EXPECT_TRUE(expect_close(flat(smaller_gram(X.block(3, 2, 5, 6))), flat(part.lazyProduct(part.transpose())),
                           rounding_of(6)));
}

// A spectrum must not change its last digit with its place in memory. Allocations begin at multiples of 16
// bytes, two doubles; the SSE loops of OpenBLAS (Core2 and its like) treat other addresses differently.
TEST(Products, SameBitsInEveryAllocation) {
  for (const auto& [n, p] : kShapes) {
    SCOPED_TRACE(std::to_string(n) + " x " + std::to_string(p));
    const Matrix X = random_matrix(6, n, p);
    const Vector v = random_vector(7, p);
    const Vector u = random_vector(8, n);
    const Vector want = multiply(X, v);
    const Vector want_transposed = multiply_transposed(X, u);
    const Matrix want_gram = smaller_gram(X);
    std::vector<double> room(static_cast<std::size_t>(n * p) + 8);
    std::vector<double> v_room(static_cast<std::size_t>(p) + 8);
    std::vector<double> u_room(static_cast<std::size_t>(n) + 8);
    for (Index by = 0; by < 8; by += 2) {
      Eigen::Map<Matrix> moved(room.data() + by, n, p);
      Eigen::Map<Vector> v_moved(v_room.data() + (3 * by) % 8, p);
      Eigen::Map<Vector> u_moved(u_room.data() + (5 * by) % 8, n);
      moved = X;
      v_moved = v;
      u_moved = u;
      EXPECT_TRUE(multiply(moved, v_moved) == want);
      EXPECT_TRUE(multiply_transposed(moved, u_moved) == want_transposed);
      EXPECT_TRUE(smaller_gram(moved) == want_gram);
    }
  }
}

TEST(Products, NotANumberComesThrough) {
  Matrix X = Matrix::Ones(3, 2);
  X(1, 0) = std::nan("");
  const Vector product = multiply(X, Vector::Zero(2));
  EXPECT_EQ(product[0], 0.0);
  EXPECT_TRUE(std::isnan(product[1]));
}

}  // namespace
}  // namespace bandwright
