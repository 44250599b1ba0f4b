// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <string>
#include <vector>

#include "base/error.hpp"
#include "base/matrix.hpp"
#include "model/recipe.hpp"
#include "resampling/held_out.hpp"
#include "spectra/reference_table.hpp"
#include "spectra/spectra_set.hpp"

namespace bandwright {

/// Standards with spectra matched to reference rows. Samples are numbered in the order of the
/// reference table, excluded ones and those without spectra left out.
struct MatchedStandards {
  std::vector<Index> spectrum_rows;       ///< rows of the spectra set that are used, rising
  std::vector<Index> sample_of_spectrum;  ///< one a used spectrum, sample number
  std::vector<Index> table_rows;          ///< one a sample, row of the reference table
  std::vector<std::string> groups;        ///< one a sample, or empty
  std::vector<Warning> warnings;

  [[nodiscard]] Index samples() const { return static_cast<Index>(table_rows.size()); }
};

/// Matches spectra to rows by sample name, after exclusions.
/// Throws Error(Usage) if an exclusion names nothing that exists, Error(Input) if no spectrum has a row.
[[nodiscard]] MatchedStandards match_standards(const Recipe& recipe, const SpectraSet& spectra,
                                               const ReferenceTable& reference);

/// The used spectra of the samples that have a value in `column`, with weights 1/r. `rows` gets
/// their positions among the used spectra.
[[nodiscard]] TrainingData training_data(const MatchedStandards& matched, const SpectraSet& spectra,
                                         const ReferenceColumn& column, std::vector<Index>& rows);

}  // namespace bandwright
