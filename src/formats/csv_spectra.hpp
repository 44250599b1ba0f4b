// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "base/error.hpp"
#include "spectra/spectra_set.hpp"

/// Spectra in CSV files, in either of two forms:
///
///     sample,4000,3998,...        wavenumber [cm-1];S01;S02;...
///     S01,0.0123,0.0125,...       4000;0,0123;0,0119;...
///     S02,0.0119,0.0120,...       3998;0,0125;0,0120;...
///
/// rows are spectra (left), or columns are (right). Which one it is follows from where the axis
/// stands. When the first row and the first column could both be an axis, the one that is no
/// infrared axis, because it holds a value below 10, is taken for the ids, with a warning; when
/// that does not tell them apart, the file is refused.

namespace bandwright {

/// What becomes of a spectrum that cannot be used.
enum class BadSpectrum {
  Refuse,   ///< throw: nothing is read
  Collect,  ///< it goes to `refused`, the others are read
};

struct CsvSpectraOptions {
  std::optional<AxisUnit> axis = {};      ///< what the plan says; the file may say it too, not otherwise
  std::optional<Ordinate> ordinate = {};  ///< likewise
  BadSpectrum bad_spectrum = BadSpectrum::Refuse;
};

/// A spectrum that was not read, and why.
struct RefusedSpectrum {
  std::string id;      ///< empty if that is what is wrong
  Origin origin;       ///< the line at fault
  std::string reason;  ///< one printable line without the place
};

struct CsvSpectra {
  SpectraSet spectra;
  std::vector<RefusedSpectrum> refused;  ///< in the order of the file; empty under Refuse
  std::vector<Warning> warnings;
};

/// Reads the spectra of one CSV text; `file` names it in messages and origins.
///
/// Ensures: unique ids that are not blank, finite values, a strict axis. Under Collect the set may
/// have no spectra when all were refused; an id that comes twice refuses every spectrum of that
/// name, since nobody can tell which is meant.
/// Throws Error(Input) with file, line, field and hint if the text is no CSV file of spectra, holds
/// none, or contradicts the options; under Refuse also for any bad spectrum. Cost is linear.
[[nodiscard]] CsvSpectra parse_csv_spectra(std::string_view text, std::string_view file,
                                           const CsvSpectraOptions& options = {});

/// The set as comma-separated rows, from which parse_csv_spectra() reads the same set, bit for bit.
/// Requires at least one spectrum. Throws Error(Output) if an id cannot be written (cell_of_name()).
[[nodiscard]] std::string format_csv_spectra(const SpectraSet& spectra);

}  // namespace bandwright
