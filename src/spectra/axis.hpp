// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <array>
#include <optional>
#include <string_view>
#include <utility>

#include "base/matrix.hpp"
#include "base/options.hpp"

namespace bandwright {

enum class AxisUnit { Wavenumber, Nanometre };

template <>
struct EnumTexts<AxisUnit> {
  static constexpr std::array entries{std::pair{AxisUnit::Wavenumber, std::string_view{"cm-1"}},
                                      std::pair{AxisUnit::Nanometre, std::string_view{"nm"}}};
};

/// The positions of the p points of a spectrum, strictly rising or strictly falling.
class Axis {
 public:
  Axis() = default;
  /// Throws Error(Input) if a value is not finite or not positive, or the order is not strict; the
  /// message names the 1-based position. `unit` is empty while nobody has said what it is.
  Axis(Vector positions, std::optional<AxisUnit> unit);

  [[nodiscard]] Index size() const { return positions_.size(); }
  [[nodiscard]] double operator[](Index i) const { return positions_[i]; }
  [[nodiscard]] const Vector& positions() const { return positions_; }
  [[nodiscard]] std::optional<AxisUnit> unit() const { return unit_; }
  [[nodiscard]] bool falling() const { return size() > 1 && positions_[1] < positions_[0]; }
  [[nodiscard]] double lowest() const { return falling() ? positions_[size() - 1] : positions_[0]; }
  [[nodiscard]] double highest() const { return falling() ? positions_[0] : positions_[size() - 1]; }

  /// The step from point to point over [first, first + count), signed, when it is constant within
  /// one part in 100 of itself (files round their axes); empty when the points are uneven.
  [[nodiscard]] std::optional<double> even_step(Index first, Index count) const;

  /// The same positions, each within 1e-3 of the spacing there, and no contradiction of units.
  [[nodiscard]] bool matches(const Axis& other) const;

 private:
  Vector positions_;
  std::optional<AxisUnit> unit_;
};

}  // namespace bandwright
