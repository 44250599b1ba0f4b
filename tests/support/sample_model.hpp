// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <string_view>

#include "model/model.hpp"

/// Models built from beerlambert4 for tests of what stores and applies models.

namespace bandwright {

/// Two components, two windows with an exception, a derivative and SNV, unit variance for one component.
extern const std::string_view kSamplePlan;
[[nodiscard]] const Model& sample_model();

/// One component, one factor, six points, eight standards: a short file.
[[nodiscard]] const Model& tiny_model();

/// A model of the plan on the first training samples of beerlambert4, with provenance.
[[nodiscard]] Model model_of_plan(std::string_view plan_text, std::size_t standards = 25);

}  // namespace bandwright
