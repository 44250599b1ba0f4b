// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "base/error.hpp"
#include "formats/csv_spectra.hpp"
#include "model/model.hpp"
#include "records/plan.hpp"
#include "spectra/reference_table.hpp"
#include "spectra/spectra_set.hpp"

/// Files -> data, with the digest of every file read.

namespace bandwright::cli {

struct LoadedSpectra {
  SpectraSet spectra;
  std::vector<RefusedSpectrum> refused;
  std::vector<InputDigest> inputs;
  std::vector<Warning> warnings;
};

struct LoadedSet {
  SpectraSet spectra;
  ReferenceTable reference;
  std::vector<InputDigest> inputs;  ///< spectra files, then the reference table
  std::vector<Warning> warnings;
};

/// Reads a plan file.
[[nodiscard]] Plan load_plan(const std::string& path);

/// The text of a model file, byte for byte.
[[nodiscard]] std::string read_model_text(const std::string& path);

/// Reads a model file.
[[nodiscard]] Model load_model(const std::string& path);

/// The folder that paths of a plan or a model are relative to; empty for standard input.
[[nodiscard]] std::string folder_of(const std::string& path);

/// Spectra and reference values of one set; `base` is the folder its paths are relative to.
[[nodiscard]] LoadedSet load_set(const SetFiles& files, const std::string& base, const Recipe& recipe);

/// Spectra of the files that `patterns` stand for, all of them or none.
[[nodiscard]] LoadedSpectra load_spectra(const std::vector<std::string>& patterns, const std::string& base,
                                         std::optional<AxisUnit> axis, std::optional<Ordinate> ordinate);

/// As above for spectra to be predicted: what cannot be read, or contradicts the model, becomes a
/// refused record, and the others go on.
[[nodiscard]] LoadedSpectra load_spectra_for(const Model& model, const std::vector<std::string>& patterns);

}  // namespace bandwright::cli
