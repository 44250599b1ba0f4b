// SPDX-License-Identifier: Apache-2.0
#include "base/number_text.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <charconv>
#include <cmath>
#include <system_error>

namespace bandwright {
namespace {

constexpr std::string_view kDash = "-";

std::string_view trimmed(std::string_view text) {
  constexpr std::string_view kBlanks = " \t";
  const auto first = text.find_first_not_of(kBlanks);
  if (first == std::string_view::npos) return {};
  return text.substr(first, text.find_last_not_of(kBlanks) - first + 1);
}

/// "-0.00" confuses people: a value that rounds to zero has no sign.
std::string without_negative_zero(std::string text) {
  const bool zero = text.find_first_not_of("-0.") == std::string::npos;
  if (zero && text.front() == '-') text.erase(0, 1);
  return text;
}

}  // namespace

std::optional<double> parse_number(std::string_view text) {
  text = trimmed(text);
  if (text.starts_with('+')) {
    text.remove_prefix(1);
    if (text.starts_with('+') || text.starts_with('-')) return std::nullopt;
  }
  double value = 0.0;
  const auto [end, fault] = std::from_chars(text.data(), text.data() + text.size(), value);
  if (fault != std::errc{} || end != text.data() + text.size() || !std::isfinite(value)) return std::nullopt;
  return value;
}

std::string exact_text(double value) { return fmt::format("{}", value); }

std::string rounded_text(double value, int decimals) {
  if (!std::isfinite(value)) return std::string{kDash};
  return without_negative_zero(fmt::format("{:.{}f}", value, std::max(decimals, 0)));
}

std::string significant_text(double value, int digits) {
  if (!std::isfinite(value)) return std::string{kDash};
  if (value == 0.0) return "0";
  // The exponent is that of the rounded value: 9.999 with three digits is 10.0, not 10.00.
  std::string scientific = fmt::format("{:.{}e}", value, digits - 1);
  const std::size_t mark = scientific.find('e') + 1;
  const std::size_t sign = scientific[mark] == '+' ? 1 : 0;  // from_chars takes no plus
  int exponent = 0;
  std::from_chars(scientific.data() + mark + sign, scientific.data() + scientific.size(), exponent);
  if (exponent < -4 || exponent >= 6) return scientific;
  return rounded_text(value, digits - 1 - exponent);
}

std::string counted(std::ptrdiff_t count, std::string_view one, std::string_view several) {
  return fmt::format("{} {}", count, count == 1 ? one : several);
}

int decimals_for_error(double error) {
  constexpr int kSignificantDigits = 3;
  constexpr int kMostDecimals = 10;
  if (!std::isfinite(error) || error <= 0.0) return kSignificantDigits;
  const int exponent = static_cast<int>(std::floor(std::log10(error)));
  return std::clamp(kSignificantDigits - 1 - exponent, 0, kMostDecimals);
}

}  // namespace bandwright
