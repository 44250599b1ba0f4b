// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <Eigen/Core>

namespace bandwright {

/// Counts and positions, 0-based in code and 1-based in messages to people.
using Index = Eigen::Index;

/// Spectra are rows: n samples x p variables, row-major, so that a spectrum is contiguous.
using Matrix = Eigen::Matrix<double, Eigen::Dynamic, Eigen::Dynamic, Eigen::RowMajor>;
using Vector = Eigen::VectorXd;

/// Read-only views. A row range of a Matrix binds without a copy.
using MatrixView = Eigen::Ref<const Matrix, 0, Eigen::OuterStride<>>;
using VectorView = Eigen::Ref<const Vector>;

}  // namespace bandwright
