// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <gtest/gtest.h>

#include "base/matrix.hpp"

namespace bandwright {

/// got agrees with want when |got - want| <= absolute + relative * |want|.
struct Tolerance {
  double relative = 0.0;
  double absolute = 0.0;
};

/// Element by element; the message names the 1-based position, both values and the error.
::testing::AssertionResult expect_close(double got, double want, Tolerance tolerance);
::testing::AssertionResult expect_close(const VectorView& got, const VectorView& want, Tolerance tolerance);

/// ||got - want|| <= relative * ||want|| + absolute: for vectors whose single small entries carry no
/// digits of their own (coefficients).
::testing::AssertionResult expect_close_in_norm(const VectorView& got, const VectorView& want,
                                                Tolerance tolerance);

}  // namespace bandwright
