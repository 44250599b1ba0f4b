// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <string>

namespace bandwright {

/// Puts OpenBLAS on one thread a call, once for the process. Every function of this room that
/// calls it does so first, so a program that only uses the library need not think of it.
void use_one_blas_thread();

/// Which linear algebra the process runs on, for `--version` and the record of a run.
struct LinearAlgebraInfo {
  std::string library;  ///< name and version
  std::string kernel;   ///< processor type that the library chose its loops for
  bool many_callers;    ///< built so that several threads may call it at once
};
[[nodiscard]] LinearAlgebraInfo linear_algebra_info();

/// Compares a few small products and decompositions of OpenBLAS with Eigen's and checks which
/// build was loaded. Some builds return wrong numbers under threads or on newer processors: a wrong
/// library must not compute a composition. Takes under 2 ms.
/// Throws Error(Internal) that says what was wrong and how to select a working library.
void check_linear_algebra();

}  // namespace bandwright
