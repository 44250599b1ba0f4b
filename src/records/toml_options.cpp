// SPDX-License-Identifier: Apache-2.0
#include "records/toml_options.hpp"

#include <fmt/format.h>

#include <cmath>
#include <cstdint>
#include <utility>

#include "base/error.hpp"
#include "base/number_text.hpp"
#include "records/not_available.hpp"

namespace bandwright {
namespace {

constexpr std::size_t kLongestShown = 80;  // bytes; a message is one line that a person reads

[[noreturn]] void refuse_at(std::string_view path, std::size_t line, std::string field, std::string message,
                            std::string hint) {
  throw Error(ErrorKind::Usage, std::move(message),
              {.file = std::string(path), .line = line, .field = std::move(field), .hint = std::move(hint)});
}

/// A float as it may stand in a plan: never without a point, so that 2.0 is not shown as 2.
std::string float_text(double value) {
  std::string text = exact_text(value);
  if (std::isfinite(value) && text.find_first_of(".e") == std::string::npos) text += ".0";
  return text;
}

/// What stands there, for "must be ..., not ...".
std::string found_text(const toml::node& node) {
  switch (node.type()) {
    case toml::node_type::string:
      return quoted(node.as_string()->get());
    case toml::node_type::integer:
      return fmt::format("{}", node.as_integer()->get());
    case toml::node_type::floating_point:
      return float_text(node.as_floating_point()->get());
    case toml::node_type::boolean:
      return node.as_boolean()->get() ? "true" : "false";
    case toml::node_type::array:
      return "a list";
    case toml::node_type::table:
      return "a table";
    default:
      return "a date or time";
  }
}

/// Edit distance sees six slips between "SNV" and "snv"; a person sees none.
std::string lower_ascii(std::string_view text) {
  std::string lower(text);
  for (char& c : lower)
    if (c >= 'A' && c <= 'Z') c = static_cast<char>(c - 'A' + 'a');
  return lower;
}

std::vector<std::string> without_not_available(const TomlValue& value,
                                               const std::vector<std::string>& words) {
  std::vector<std::string> available;
  for (const std::string& word : words)
    if (find_not_available(value.table.name, value.key, word) == nullptr) available.push_back(word);
  return available;
}

std::string use_text(const std::vector<std::string>& available) {
  return fmt::format("{} {}", available.size() == 1 ? "use" : "available:", alternatives_text(available));
}

/// The bounds of base/options.hpp, with the place of this value added to the message.
void check_bounds(const TomlValue& value, const Bounds& bounds, double number) {
  try {
    options_detail::check_value(value.field, number, bounds);
  } catch (const Error& error) {
    throw error.within(
        {.file = std::string(value.table.path), .line = line_of(value.node), .field = {}, .hint = {}});
  }
}

}  // namespace

std::string TomlTable::field(std::string_view key) const {
  if (heading.empty()) return std::string(key);
  return fmt::format("{}{} {}", heading, numbered ? ":" : "", key);
}

std::size_t TomlTable::line() const { return line_of(keys); }

void TomlTable::refuse(std::string message, std::string hint) const {
  refuse_at(path, line(), heading, std::move(message), std::move(hint));
}

void TomlTable::refuse_key(std::string_view key, std::string message, std::string hint) const {
  const toml::node* node = find(key);
  refuse_at(path, node != nullptr ? line_of(*node) : line(), field(key), std::move(message), std::move(hint));
}

TomlValue TomlValue::entry(std::size_t i, const toml::node& entry_node) const {
  return {table, key, fmt::format("{} {}", field, i + 1), entry_node};
}

void TomlValue::refuse(std::string message, std::string hint) const {
  refuse_at(table.path, line_of(node), field, std::move(message), std::move(hint));
}

void TomlValue::refuse_type(std::string_view expected, std::string hint) const {
  refuse(fmt::format("must be {}, not {}", expected, found_text(node)), std::move(hint));
}

std::string quoted(std::string_view text) {
  if (text.size() <= kLongestShown) return fmt::format("\"{}\"", text);
  std::size_t cut = kLongestShown;
  while (cut > 0 && (static_cast<std::uint8_t>(text[cut]) & 0xC0U) == 0x80U) --cut;  // not inside a character
  return fmt::format("\"{}...\"", text.substr(0, cut));
}

std::string suggestion(std::string_view word, std::span<const std::string> candidates) {
  // Among words of two letters everything is near: "um" is no slip for "nm".
  const std::string nearest = word.size() > 2 ? nearest_word(lower_ascii(word), candidates) : std::string{};
  if (!nearest.empty()) return fmt::format("did you mean \"{}\"?", nearest);
  constexpr std::size_t kMostShown = 20;
  std::string text;
  for (std::size_t i = 0; i < std::min(candidates.size(), kMostShown); ++i)
    text += fmt::format("{}{}", text.empty() ? "" : ", ", quoted(candidates[i]));
  return "known: " + text + (candidates.size() > kMostShown ? ", ..." : "");
}

std::size_t line_of(const toml::node& node) { return node.source().begin.line; }

void read_value(const TomlValue& value, const Bounds&, bool& out) {
  const auto* found = value.node.as_boolean();
  if (found == nullptr) value.refuse_type("true or false");
  out = found->get();
}

void read_value(const TomlValue& value, const Bounds& bounds, Index& out) {
  const auto* found = value.node.as_integer();
  if (found == nullptr) {
    const auto* real = value.node.as_floating_point();
    const bool only_written_so =
        real != nullptr && std::isfinite(real->get()) && real->get() == std::rint(real->get());
    value.refuse_type("a whole number", only_written_so ? "write it without a point or an exponent" : "");
  }
  check_bounds(value, bounds, static_cast<double>(found->get()));
  out = static_cast<Index>(found->get());
}

void read_value(const TomlValue& value, const Bounds& bounds, double& out) {
  std::optional<double> found;
  if (const auto* real = value.node.as_floating_point()) found = real->get();
  if (const auto* whole = value.node.as_integer()) found = static_cast<double>(whole->get());
  if (!found) value.refuse_type("a number", value.node.is_string() ? "write it without quotes" : "");
  if (!std::isfinite(*found)) value.refuse_type("a finite number");
  check_bounds(value, bounds, *found);
  out = *found;
}

void read_value(const TomlValue& value, const Bounds&, std::string& out) {
  const auto* found = value.node.as_string();
  if (found == nullptr) value.refuse_type("text", value.node.is_value() ? "write it in quotes" : "");
  if (printable(found->get()) != found->get())
    value.refuse(fmt::format("{} holds a control character", quoted(found->get())),
                 "write it as plain text on one line");
  out = found->get();
}

std::string read_word(const TomlValue& value, const std::vector<std::string>& words) {
  std::string word;
  if (!value.node.is_string())
    value.refuse_type("one of " + alternatives_text(without_not_available(value, words)));
  read_value(value, any_value(), word);
  if (const NotAvailable* entry = find_not_available(value.table.name, value.key, word);
      entry && !word.empty()) {
    value.refuse(
        fmt::format("{} is not available in this version", quoted(word)),
        entry->remedy.empty() ? use_text(without_not_available(value, words)) : std::string(entry->remedy));
  }
  if (std::find(words.begin(), words.end(), word) == words.end())
    value.refuse(fmt::format("{} is not known", quoted(word)),
                 suggestion(word, without_not_available(value, words)));
  return word;
}

const toml::array& read_list(const TomlValue& value) {
  const toml::array* list = value.node.as_array();
  if (list == nullptr) value.refuse_type("a list", "write it in square brackets");
  return *list;
}

void refuse_unknown_keys(const TomlTable& table, std::span<const std::string> known) {
  // toml++ keeps keys in alphabetic order: the first of the file is looked for.
  const toml::key* first = nullptr;
  for (auto&& [key, node] : table.keys) {
    if (std::find(known.begin(), known.end(), key.str()) != known.end()) continue;
    if (first == nullptr || key.source().begin < first->source().begin) first = &key;
  }
  if (first == nullptr) return;
  const std::string key(first->str());
  const std::string shown = key.size() <= kLongestShown ? key : quoted(key);
  const std::size_t line = first->source().begin.line;
  const toml::node& node = *table.find(key);
  const bool top_table = table.heading.empty() && (node.is_table() || node.is_array_of_tables());
  const std::string field = !top_table        ? table.field(shown)
                            : node.is_table() ? fmt::format("[{}]", shown)
                                              : fmt::format("[[{}]]", shown);
  if (const NotAvailable* entry = find_not_available(table.name, key))
    refuse_at(table.path, line, field, "not available in this version", std::string(entry->remedy));
  refuse_at(table.path, line, field, top_table ? "unknown table" : "unknown key", suggestion(key, known));
}

}  // namespace bandwright
