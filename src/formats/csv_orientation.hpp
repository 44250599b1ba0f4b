// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <vector>

#include "base/error.hpp"
#include "formats/delimited_text.hpp"

namespace bandwright {

/// How spectra lie in a CSV file.
enum class Orientation {
  Rows,     ///< the heading holds the axis, every further row is a spectrum
  Columns,  ///< the first column holds the axis, every further column is a spectrum
};

/// Neither wavenumbers in cm-1 nor wavelengths in nm below this are infrared: numbers from 1 on
/// are more likely ids.
inline constexpr double kLowestInfrared = 10.0;

/// Finds the axis: the heading behind its label, or the first column below it. The rule for files
/// in which both could be one stands in csv_spectra.hpp; a label "spectrum id" settles it for rows.
/// Throws Error(Input) with line, field and hint if neither is an axis, if the label itself is a
/// number (a file without heading), or if the two cannot be told apart.
[[nodiscard]] Orientation orientation_of(const DelimitedText& csv, std::vector<Warning>& warnings);

}  // namespace bandwright
