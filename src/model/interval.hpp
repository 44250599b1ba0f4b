// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <string_view>

#include "model/model.hpp"

namespace bandwright {

/// Where the error behind an interval was measured.
enum class ErrorBasis {
  Calibration,  ///< SEC
  Validation,   ///< SEP of an independent set, where it is larger than SEC
};

/// Uncertainty of one estimated value, in the unit of the component.
struct Uncertainty {
  double standard_error = 0.0;
  double degrees_of_freedom = 0.0;
  double half_width = 0.0;  ///< of the interval at the asked level
  bool floored = false;     ///< the reference method's error explained more than all: set to 0
};

/// The standard deviation behind a component's intervals: max(SEC, SEP) once an independent set
/// exists, else SEC; with its degrees of freedom (n - k - 1, or n_v - 1).
struct ErrorScale {
  double value = 0.0;
  double degrees_of_freedom = 0.0;
  ErrorBasis basis = ErrorBasis::Calibration;
};
[[nodiscard]] ErrorScale error_scale(const ComponentModel& component);

/// Standard error and interval of an estimate `value` with leverage h (without 1/n; 1/n is added here).
///   about the reference value: s = S sqrt(1 + h + 1/n)              [formula of ASTM E1655, from memory]
///   about the true value:      s = sqrt((1 + h + 1/n) S^2 - s_ref^2)  [Faber and Bro, Chemom. Intell.
///                              Lab. Syst. 61 (2002) 133]; s_ref from the plan's lab_error; floored at 0
/// half_width = t(level, two-sided; df) s. Leverage 0 of 1/n when nothing is centred.
[[nodiscard]] Uncertainty uncertainty_of(const ComponentModel& component, const Recipe& recipe, double value,
                                         double leverage);

/// Standard deviation of the reference value of this size by the component's lab_error; 0 if none.
[[nodiscard]] double reference_error(const LabError& lab_error, double value);

}  // namespace bandwright
