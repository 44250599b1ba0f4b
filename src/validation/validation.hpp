// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "base/error.hpp"
#include "base/matrix.hpp"
#include "base/worker_pool.hpp"
#include "model/model.hpp"
#include "prediction/prediction.hpp"
#include "spectra/reference_table.hpp"
#include "spectra/spectra_set.hpp"
#include "validation/error_statistics.hpp"

namespace bandwright {

/// One criterion of [validation.accept] and whether it is met.
struct CriterionOutcome {
  std::string key;        ///< of the plan, "sep_max"
  std::string statistic;  ///< key in the catalogue of what was compared
  double value = 0.0;
  double limit = 0.0;
  bool met = false;
};

/// How one component did on the independent set.
struct ComponentValidation {
  std::string name;
  std::string unit;
  std::vector<std::string> samples;  ///< with a reference value, in the order of the reference table
  Vector reference;
  Vector predicted;  ///< mean of the sample's replicates
  ErrorStatistics errors;
  double sep_limit = 0.0;  ///< unexplained-error limit
  double coverage = 0.0;
  double range_share = 0.0;               ///< range of the set / calibrated range
  std::optional<double> equivalence_p;    ///< when the plan has a bias margin
  std::optional<double> rmsep_corrected;  ///< without the reference method's error, when lab_error is given
  Index flagged = 0;                      ///< samples with a flag; they are counted in, not left out
  std::vector<CriterionOutcome> criteria;

  /// All criteria met; empty when there is none.
  [[nodiscard]] std::optional<bool> passed() const;
};

struct Validation {
  std::vector<ComponentValidation> components;
  Prediction prediction;
  std::vector<Warning> warnings;

  /// Every criterion of every component met; empty when the plan has no criterion at all.
  [[nodiscard]] std::optional<bool> passed() const;
};

/// RMSEP less the error of the reference method: sqrt(RMSEP^2 - mean s_ref^2), 0 if that is negative.
/// Source: Faber and Kowalski, Appl. Spectrosc. 51 (1997) 660 (principle).
[[nodiscard]] double corrected_rmsep(double rmsep, const VectorView& reference_errors);

/// Tests a model on samples that had no part in it. Statistics are over samples (means of
/// replicates).
/// Throws Error(Input) if a sample is among the standards, a spectrum is refused, no spectrum has a
/// row, or a component has fewer than two samples with a reference value.
[[nodiscard]] Validation validate(const Model& model, const SpectraSet& spectra,
                                  const ReferenceTable& reference, WorkerPool& pool);

/// What the model keeps of a validation for its intervals.
[[nodiscard]] IndependentError independent_error(const ComponentValidation& component,
                                                 std::string set_digest);

}  // namespace bandwright
