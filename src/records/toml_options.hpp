// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <algorithm>
#include <array>
#include <cstddef>
#include <optional>
#include <span>
#include <string>
#include <string_view>
#include <vector>

#include "base/matrix.hpp"
#include "base/options.hpp"
#include "records/toml_wrapper.hpp"

/// Fills options structs from TOML tables by their `describe`. Includes toml++: for .cpp files only.
///
/// The type of a member decides how its value is read: an overload of
///     void read_value(const TomlValue& value, const Bounds& bounds, T& out)
/// either one of those below or one for a type of the plan (plan_values.hpp).

namespace bandwright {

/// A table of a TOML file, and how messages call it.
struct TomlTable {
  std::string_view path;  ///< of the file
  const toml::table& keys;
  std::string name;       ///< "regression": where its words are looked up in the not_available list
  std::string heading;    ///< `[regression]`, `[[component]] 2 "water"`; empty = the top level
  bool numbered = false;  ///< an entry of a list: its keys are written after a colon

  [[nodiscard]] const toml::node* find(std::string_view key) const { return keys.get(key); }
  [[nodiscard]] bool has(std::string_view key) const { return find(key) != nullptr; }
  /// `[regression] kind`, `[[component]] 2 "water": windows`.
  [[nodiscard]] std::string field(std::string_view key) const;
  /// 1-based line of the table's heading.
  [[nodiscard]] std::size_t line() const;

  /// Throws Error(Usage) at the heading of the table.
  [[noreturn]] void refuse(std::string message, std::string hint = {}) const;
  /// Throws Error(Usage) at the value of `key`, or at the heading if the key is not there.
  [[noreturn]] void refuse_key(std::string_view key, std::string message, std::string hint = {}) const;
};

/// The value of a key, or an entry of a list.
struct TomlValue {
  const TomlTable& table;
  std::string_view key;
  std::string field;  ///< the whole path, for messages
  const toml::node& node;

  [[nodiscard]] TomlValue entry(std::size_t i, const toml::node& entry_node) const;
  /// Throws Error(Usage) at the line of this very value.
  [[noreturn]] void refuse(std::string message, std::string hint = {}) const;
  /// "must be `expected`, not 2.5".
  [[noreturn]] void refuse_type(std::string_view expected, std::string hint = {}) const;
};

/// A text in quotes for a message, cut when it is very long.
[[nodiscard]] std::string quoted(std::string_view text);

/// `did you mean "kind"?` or, without a near candidate, `known: a, b, c`.
[[nodiscard]] std::string suggestion(std::string_view word, std::span<const std::string> candidates);

/// 1-based line where the node begins.
[[nodiscard]] std::size_t line_of(const toml::node& node);

void read_value(const TomlValue& value, const Bounds& bounds, bool& out);
void read_value(const TomlValue& value, const Bounds& bounds, Index& out);        ///< refuses 2.5 and 2.0
void read_value(const TomlValue& value, const Bounds& bounds, double& out);       ///< refuses inf and nan
void read_value(const TomlValue& value, const Bounds& bounds, std::string& out);  ///< no control characters

/// A text that must be one of `words`; a word of the not_available list is refused by name.
[[nodiscard]] std::string read_word(const TomlValue& value, const std::vector<std::string>& words);

/// The list behind a value, or a refusal.
[[nodiscard]] const toml::array& read_list(const TomlValue& value);

template <NamedEnum E>
void read_value(const TomlValue& value, const Bounds&, E& out) {
  out = enum_from_text<E>(read_word(value, enum_words<E>())).value_or(out);  // the word is one of them
}

template <class T>
void read_value(const TomlValue& value, const Bounds& bounds, std::optional<T>& out) {
  read_value(value, bounds, out.emplace());
}

template <class T>
void read_value(const TomlValue& value, const Bounds& bounds, std::vector<T>& out) {
  out.clear();
  for (const toml::node& node : read_list(value)) {
    const TomlValue entry = value.entry(out.size(), node);
    read_value(entry, bounds, out.emplace_back());
  }
}

/// Keys of an options struct without which its table means nothing. Specialised in plan_values.hpp.
template <class Options>
inline constexpr std::array<std::string_view, 0> kRequiredKeys{};

template <class Options>
[[nodiscard]] constexpr bool is_required(std::string_view key) {
  const auto& keys = kRequiredKeys<Options>;
  return std::find(keys.begin(), keys.end(), key) != keys.end();
}

/// The keys that a struct describes.
template <class Options>
[[nodiscard]] std::vector<std::string> described_keys() {
  std::vector<std::string> keys;
  Options::describe(
      [&](std::string_view name, auto, const Bounds&, std::string_view) { keys.emplace_back(name); });
  return keys;
}

/// Refuses, in the order of the file, the first key that is not known.
void refuse_unknown_keys(const TomlTable& table, std::span<const std::string> known);

/// Fills `options` from the table. What the table does not hold keeps its value; `read_elsewhere`
/// are keys that the caller reads.
/// Throws Error(Usage) for an unknown key, a missing required one, a value of the wrong type or out of
/// bounds.
template <class Options>
void read_options(const TomlTable& table, Options& options,
                  const std::vector<std::string>& read_elsewhere = {}) {
  std::vector<std::string> known = described_keys<Options>();
  known.insert(known.end(), read_elsewhere.begin(), read_elsewhere.end());
  refuse_unknown_keys(table, known);
  Options::describe([&](std::string_view name, auto member, const Bounds& bounds, std::string_view help) {
    if (const toml::node* node = table.find(name))
      read_value(TomlValue{table, name, table.field(name), *node}, bounds, options.*member);
    else if (is_required<Options>(name))
      table.refuse_key(name, "missing", std::string(help));
  });
}

}  // namespace bandwright
