// SPDX-License-Identifier: Apache-2.0
#include "numerics/linear_algebra.hpp"

#include <gtest/gtest.h>

#include <thread>
#include <vector>

#include "numerics/decompositions.hpp"
#include "numerics/products.hpp"
#include "support/random_data.hpp"

namespace bandwright {
namespace {

TEST(LinearAlgebra, SelfTestPassesOnTheLibraryWeLink) {
  EXPECT_NO_THROW(check_linear_algebra());
  EXPECT_NO_THROW(check_linear_algebra());  // and again: it leaves nothing behind
}

TEST(LinearAlgebra, TellsWhichLibraryRuns) {
  const LinearAlgebraInfo info = linear_algebra_info();
  EXPECT_EQ(info.library.rfind("OpenBLAS ", 0), 0u) << info.library;
  EXPECT_FALSE(info.kernel.empty());
  EXPECT_TRUE(info.many_callers);
}

// Some builds of OpenBLAS answer wrongly when several threads call at once.
TEST(LinearAlgebra, SeveralCallersGetTheSameBits) {
  const Matrix X = random_matrix(1, 120, 90);
  const Vector v = random_vector(2, 90);
  const Vector product = multiply(X, v);
  const Matrix gram = smaller_gram(X);
  const Vector values = singular_values(X);
  std::vector<int> right(4);
  {
    std::vector<std::jthread> callers;
    for (int& count : right)
      callers.emplace_back([&] {
        for (int run = 0; run < 20; ++run)
          if (multiply(X, v) == product && smaller_gram(X) == gram && singular_values(X) == values) ++count;
      });
  }
  for (const int count : right) EXPECT_EQ(count, 20);
}

}  // namespace
}  // namespace bandwright
