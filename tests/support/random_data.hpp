// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <Eigen/QR>
#include <Eigen/SVD>
#include <cstdint>

#include "base/matrix.hpp"
#include "base/random.hpp"

namespace bandwright {

/// Entries uniform over [-1, 1), the same for the same seed.
inline Matrix random_matrix(std::uint64_t seed, Index rows, Index columns) {
  Random random(seed);
  Matrix out(rows, columns);
  for (Index i = 0; i < rows; ++i)
    for (Index j = 0; j < columns; ++j) out(i, j) = static_cast<double>(random.next() >> 11U) * 0x1p-52 - 1.0;
  return out;
}

inline Vector random_vector(std::uint64_t seed, Index size) { return random_matrix(seed, size, 1).col(0); }

inline Matrix centred(const Matrix& X) { return X.rowwise() - X.colwise().mean(); }
inline Vector centred(const Vector& y) { return y.array() - y.mean(); }

/// A square matrix with orthonormal rows.
inline Matrix random_rotation(std::uint64_t seed, Index size) {
  const Eigen::MatrixXd square = random_matrix(seed, size, size);
  const Eigen::MatrixXd Q = Eigen::HouseholderQR<Eigen::MatrixXd>(square).householderQ();
  return Q;
}

/// Largest over rank-th singular value.
inline double condition(const Matrix& X, Index rank) {
  const Vector values = Eigen::JacobiSVD<Eigen::MatrixXd>(X).singularValues();
  return values[0] / values[rank - 1];
}

}  // namespace bandwright
