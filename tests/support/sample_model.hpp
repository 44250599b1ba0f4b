// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <string_view>

#include "model/model.hpp"
#include "spectra/reference_table.hpp"
#include "spectra/spectra_set.hpp"

/// Models built from beerlambert4 for tests of what stores and applies models.

namespace bandwright {

/// Two components, two windows with an exception, a derivative and SNV, unit variance for one component.
extern const std::string_view kSamplePlan;
[[nodiscard]] const Model& sample_model();
/// The same, built again.
[[nodiscard]] Model build_sample_model();

/// One component, one factor, six of ten points, eight standards: a short file.
[[nodiscard]] const Model& tiny_model();

/// A model built by the plan, with provenance of made-up files.
[[nodiscard]] Model model_of(std::string_view plan_text, const SpectraSet& spectra,
                             const ReferenceTable& reference);

}  // namespace bandwright
