// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <span>
#include <string>
#include <string_view>

namespace bandwright {

/// What kind of number a statistic is; decides its unit and digits for people.
enum class Quantity {
  ComponentUnit,  ///< in the unit of the component, with the decimals of its error
  SquaredUnit,    ///< in the square of that unit
  Ratio,          ///< without unit, four decimals
  Count,          ///< whole number
  FreeScale,      ///< no unit or an inner one, four significant digits
};

/// One statistic that users see: the one place for its name, digits, definition and source.
struct Statistic {
  std::string_view key;    ///< in JSON and model files
  std::string_view label;  ///< in tables and reports
  Quantity quantity;
  std::string_view definition;  ///< plain words and formula
  std::string_view source;      ///< of the formula
};

/// All statistics, in the order in which tables show them.
[[nodiscard]] std::span<const Statistic> catalogue();

/// The statistic of that key. Throws Error(Internal) for a key not in the catalogue.
[[nodiscard]] const Statistic& statistic(std::string_view key);

/// The value as people see it: `decimals` are those of the component (see component_decimals).
[[nodiscard]] std::string shown(const Statistic& statistic, double value, int decimals);

/// Decimals for values in the unit of a component whose prediction error is `error`: three
/// significant digits of the error.
[[nodiscard]] int component_decimals(double error);

}  // namespace bandwright
