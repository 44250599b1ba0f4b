// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <array>
#include <concepts>
#include <limits>
#include <optional>
#include <span>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

#include "base/error.hpp"
#include "base/matrix.hpp"

/// One description per options struct drives the plan reader, the checks, the help and the table
/// in the documentation:
///
///     struct SavitzkyGolay {
///       Index points = 11;  ///< width of the moving window, odd
///       template <class Visitor>
///       static void describe(Visitor&& visit) {
///         visit("points", &SavitzkyGolay::points, between(3, 201), "width of the moving window, odd");
///       }
///     };
///
/// A member may be of type bool, Index, double, std::string, an enum with EnumTexts, an optional
/// or a vector of these, or a type for which the plan reader has a `read` of its own.

namespace bandwright {

/// The range a number must lie in. For a vector it holds for every entry.
struct Bounds {
  double low = -std::numeric_limits<double>::infinity();
  double high = std::numeric_limits<double>::infinity();
  bool low_excluded = false;
  bool high_excluded = false;

  [[nodiscard]] bool contain(double value) const {
    return (low_excluded ? value > low : value >= low) && (high_excluded ? value < high : value <= high);
  }
  /// "between 3 and 201", "more than 0", "" when there is no rule.
  [[nodiscard]] std::string text() const;
};

[[nodiscard]] constexpr Bounds any_value() { return {}; }
[[nodiscard]] constexpr Bounds between(double low, double high) { return {low, high, false, false}; }
[[nodiscard]] constexpr Bounds strictly_between(double low, double high) { return {low, high, true, true}; }
[[nodiscard]] constexpr Bounds at_least(double low) {
  return {low, std::numeric_limits<double>::infinity(), false, false};
}
[[nodiscard]] constexpr Bounds more_than(double low) {
  return {low, std::numeric_limits<double>::infinity(), true, false};
}

/// Specialise with `static constexpr std::array entries{std::pair{E::A, std::string_view{"a"}}, ...}`
/// to give an enum its words in plans, models and JSON.
template <class E>
struct EnumTexts;

template <class E>
concept NamedEnum = requires { EnumTexts<E>::entries; };

template <NamedEnum E>
[[nodiscard]] constexpr std::string_view text_of(E value) {
  for (const auto& [entry, text] : EnumTexts<E>::entries)
    if (entry == value) return text;
  return "?";
}

template <NamedEnum E>
[[nodiscard]] constexpr std::optional<E> enum_from_text(std::string_view text) {
  for (const auto& [entry, name] : EnumTexts<E>::entries)
    if (name == text) return entry;
  return std::nullopt;
}

/// The words of an enum, in their order.
template <NamedEnum E>
[[nodiscard]] std::vector<std::string> enum_words() {
  std::vector<std::string> words;
  for (const auto& [entry, text] : EnumTexts<E>::entries) words.emplace_back(text);
  return words;
}

/// The candidate closest to `word` by edit distance (Levenshtein, a swap of neighbours counts one),
/// if it is close enough to be a slip of the pen; else empty.
[[nodiscard]] std::string nearest_word(std::string_view word, std::span<const std::string> candidates);

/// `"a" | "b" | "c"`, for messages and help.
[[nodiscard]] std::string alternatives_text(std::span<const std::string> words);

namespace options_detail {

template <class T>
struct is_optional : std::false_type {};
template <class T>
struct is_optional<std::optional<T>> : std::true_type {};
template <class T>
struct is_vector : std::false_type {};
template <class T>
struct is_vector<std::vector<T>> : std::true_type {};

[[noreturn]] void throw_out_of_bounds(std::string_view field, double value, const Bounds& bounds);

template <class T>
void check_value(std::string_view field, const T& value, const Bounds& bounds) {
  if constexpr (is_optional<T>::value) {
    if (value) check_value(field, *value, bounds);
  } else if constexpr (is_vector<T>::value) {
    for (const auto& entry : value) check_value(field, entry, bounds);
  } else if constexpr (std::is_arithmetic_v<T> && !std::same_as<T, bool>) {
    if (!bounds.contain(static_cast<double>(value)))
      throw_out_of_bounds(field, static_cast<double>(value), bounds);
  }
}

}  // namespace options_detail

/// Walks `describe` and checks each number against its bounds.
/// Throws Error(Usage) that names the field, its value and the bound it broke.
template <class Options>
void check_options(const Options& options) {
  Options::describe([&](std::string_view name, auto member, const Bounds& bounds, std::string_view) {
    options_detail::check_value(name, options.*member, bounds);
  });
}

/// A line of the documentation table of an options struct.
struct OptionLine {
  std::string name;
  std::string kind;           ///< "number", "whole number", "text", `"a" | "b"`, "list of ..."
  std::string default_value;  ///< as it would be written in a plan; empty = must be given or off
  std::string rule;
  std::string help;
};

}  // namespace bandwright
