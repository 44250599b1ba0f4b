// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <optional>
#include <string>
#include <string_view>

#include "spectra/axis.hpp"
#include "spectra/spectra_set.hpp"

namespace bandwright {

/// What the label in the corner of a CSV file of spectra says besides being a label.
struct HeadingLabel {
  std::optional<AxisUnit> unit;      ///< "wavenumber [cm-1]", "nm", "1/cm", ...
  std::optional<Ordinate> ordinate;  ///< "absorbance", "%T", ...
  bool heads_spectrum_ids = false;   ///< "spectrum id ...": the first column holds ids, beyond doubt
};

/// Reads the words of the label; words it does not know mean nothing.
/// Throws Error(Input) if it names two units or ordinates, or a unit other than cm-1 and nm.
[[nodiscard]] HeadingLabel read_heading_label(std::string_view label);

/// The label from which read_heading_label() takes the same unit and ordinate.
[[nodiscard]] std::string heading_label_text(std::optional<AxisUnit> unit, std::optional<Ordinate> ordinate);

}  // namespace bandwright
