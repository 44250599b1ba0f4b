// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <functional>
#include <string>

#include "base/worker_pool.hpp"
#include "model/model.hpp"
#include "model/recipe.hpp"
#include "spectra/reference_table.hpp"
#include "spectra/spectra_set.hpp"

namespace bandwright {

/// Called now and then, from any worker, with the component at work and its folds done so far.
using BuildProgress = std::function<void(const std::string& component, std::size_t done, std::size_t total)>;

/// Builds one calibration a component from standards: cross-validates every number of factors, chooses
/// one, fits, and takes the limits. Provenance is left to the caller.
///
/// `spectra`: all on one axis; `reference`: holds the columns that the recipe names. A spectrum
/// belongs to sample_of(id, recipe.replicate_mark). Rows of the table without spectra, and spectra
/// without a row, take no part and are named in a warning.
/// Throws Error(Usage) if windows, steps or folds do not fit the data or an excluded sample or spectrum
/// does not exist, Error(Input) if too few standards are left, Error(Numerical) if a fit is impossible;
/// the field names the component, the window, the exclusion, or the spectrum that cannot be pretreated.
/// Results do not depend on the number of workers, bit for bit.
[[nodiscard]] Model build_model(const Recipe& recipe, const SpectraSet& spectra,
                                const ReferenceTable& reference, WorkerPool& pool,
                                const BuildProgress& progress = {});

/// The chain that a recipe asks for one component on this axis, defaults and overrides resolved.
[[nodiscard]] CalibrationRecipe resolve(const Recipe& recipe, const ComponentRecipe& component,
                                        const Axis& axis);

}  // namespace bandwright
