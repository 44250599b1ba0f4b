// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <array>
#include <optional>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

#include "base/matrix.hpp"
#include "base/options.hpp"
#include "spectra/axis.hpp"

namespace bandwright {

/// What the ordinates of a spectrum are.
enum class Ordinate { Absorbance, Transmittance, PercentTransmittance, Reflectance };

template <>
struct EnumTexts<Ordinate> {
  static constexpr std::array entries{
      std::pair{Ordinate::Absorbance, std::string_view{"absorbance"}},
      std::pair{Ordinate::Transmittance, std::string_view{"transmittance"}},
      std::pair{Ordinate::PercentTransmittance, std::string_view{"percent-transmittance"}},
      std::pair{Ordinate::Reflectance, std::string_view{"reflectance"}}};
};

/// Where a spectrum or a table row came from, for messages.
struct Origin {
  std::string file;
  std::size_t line = 0;  ///< 1-based; 0 = the whole file
};

/// n spectra on one axis. Row i of `values` is the spectrum `ids[i]`.
struct SpectraSet {
  Axis axis;
  std::optional<Ordinate> ordinate;  ///< empty while nobody has said what it is
  std::vector<std::string> ids;      ///< n, unique
  std::vector<Origin> origins;       ///< n
  Matrix values;                     ///< n x p, finite

  [[nodiscard]] Index size() const { return values.rows(); }
  [[nodiscard]] Index points() const { return axis.size(); }
};

/// One set out of several read from different files, in their order.
/// Throws Error(Input), naming file and line, when an id comes twice, or axis or ordinate differ
/// from those of the first set.
[[nodiscard]] SpectraSet joined(std::vector<SpectraSet> parts);

/// The spectra at `rows`, in that order.
[[nodiscard]] SpectraSet subset(const SpectraSet& spectra, const std::vector<Index>& rows);

/// The sample a spectrum belongs to: the id up to the last `mark` that is followed by nothing but
/// digits and preceded by something ("S07-r2" with mark "-r" is sample "S07"); the id itself if
/// there is no such mark or `mark` is empty.
[[nodiscard]] std::string sample_of(std::string_view spectrum_id, std::string_view mark);

}  // namespace bandwright
