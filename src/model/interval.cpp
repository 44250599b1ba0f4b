// SPDX-License-Identifier: Apache-2.0
#include "model/interval.hpp"

#include <algorithm>
#include <cmath>

#include "numerics/distributions.hpp"

namespace bandwright {

ErrorScale error_scale(const ComponentModel& component) {
  const CalibrationStatistics& s = component.statistics;
  if (component.validation && component.validation->sep > s.sec) {
    return {.value = component.validation->sep,
            .degrees_of_freedom = static_cast<double>(component.validation->samples - 1),
            .basis = ErrorBasis::Validation};
  }
  return {.value = s.sec, .degrees_of_freedom = s.sec_df, .basis = ErrorBasis::Calibration};
}

double reference_error(const LabError& lab_error, double value) {
  return std::hypot(lab_error.absolute, lab_error.relative * value);
}

Uncertainty uncertainty_of(const ComponentModel& component, const Recipe& recipe, double value,
                           double leverage) {
  const ErrorScale scale = error_scale(component);
  const bool centred = component.recipe.scaling != Scaling::None;
  const double of_mean = centred ? 1.0 / static_cast<double>(component.statistics.samples) : 0.0;
  double variance = (1.0 + leverage + of_mean) * scale.value * scale.value;
  Uncertainty out;
  if (recipe.interval.about == IntervalAbout::True) {
    const double lab = reference_error(recipe.component(component.name).lab_error, value);
    out.floored = variance < lab * lab;
    variance = std::max(0.0, variance - lab * lab);
  }
  out.standard_error = std::sqrt(variance);
  out.degrees_of_freedom = scale.degrees_of_freedom;
  out.half_width = t_two_sided(recipe.interval.level, scale.degrees_of_freedom) * out.standard_error;
  return out;
}

}  // namespace bandwright
