// SPDX-License-Identifier: Apache-2.0
#include "support/close.hpp"

#include <fmt/format.h>

#include <cmath>

namespace bandwright {

::testing::AssertionResult expect_close(double got, double want, Tolerance tolerance) {
  const double error = std::abs(got - want);
  if (error <= tolerance.absolute + tolerance.relative * std::abs(want)) return ::testing::AssertionSuccess();
  return ::testing::AssertionFailure() << fmt::format("got {}, want {}, error {:.3g} (relative {:.3g})", got,
                                                      want, error, error / std::abs(want));
}

::testing::AssertionResult expect_close(const VectorView& got, const VectorView& want, Tolerance tolerance) {
  if (got.size() != want.size())
    return ::testing::AssertionFailure() << fmt::format("got {} values, want {}", got.size(), want.size());
  for (Index i = 0; i < got.size(); ++i) {
    const auto one = expect_close(got[i], want[i], tolerance);
    if (!one) return ::testing::AssertionFailure() << "value " << i + 1 << ": " << one.message();
  }
  return ::testing::AssertionSuccess();
}

::testing::AssertionResult expect_close_in_norm(const VectorView& got, const VectorView& want,
                                                Tolerance tolerance) {
  if (got.size() != want.size())
    return ::testing::AssertionFailure() << fmt::format("got {} values, want {}", got.size(), want.size());
  const double error = (got - want).norm();
  if (error <= tolerance.absolute + tolerance.relative * want.norm()) return ::testing::AssertionSuccess();
  return ::testing::AssertionFailure()
         << fmt::format("norm of the difference {:.3g}, norm wanted {:.6g}, relative {:.3g}", error,
                        want.norm(), error / want.norm());
}

}  // namespace bandwright
