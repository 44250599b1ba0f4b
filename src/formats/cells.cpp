// SPDX-License-Identifier: Apache-2.0
#include "formats/cells.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <cctype>
#include <charconv>
#include <cmath>
#include <cstdint>
#include <system_error>

#include "base/error.hpp"
#include "base/number_text.hpp"

namespace bandwright {
namespace {

constexpr std::string_view kFormulaStarts = "=+-@\t\r\n";

ErrorContext place(std::size_t line, std::size_t field, std::string hint = {}) {
  return {.file = {}, .line = line, .field = fmt::format("field {}", field), .hint = std::move(hint)};
}

/// As parse_number(), whose care for blanks and signs costs more than reading the number: cells come
/// without blanks, and few have a sign in front.
std::optional<double> quick_number(std::string_view cell) {
  double value = 0.0;
  const auto [end, fault] = std::from_chars(cell.data(), cell.data() + cell.size(), value);
  if (fault == std::errc{} && end == cell.data() + cell.size() && std::isfinite(value)) return value;
  return parse_number(cell);
}

struct DecimalSigns {
  bool comma = false;
  bool point = false;
};

DecimalSigns decimal_signs(std::string_view cell) {
  DecimalSigns found;
  for (const char c : cell) {
    found.comma = found.comma || c == ',';
    found.point = found.point || c == '.';
  }
  return found;
}

/// Numbers of usual length need no memory of their own.
std::optional<double> number_with_comma(std::string_view cell) {
  constexpr std::size_t kUsual = 64;
  if (cell.size() > kUsual) {
    std::string text(cell);
    std::replace(text.begin(), text.end(), ',', '.');
    return quick_number(text);
  }
  std::array<char, kUsual> text{};
  std::replace_copy(cell.begin(), cell.end(), text.begin(), ',', '.');
  return quick_number({text.data(), cell.size()});
}

bool looks_not_finite(std::string_view cell) {
  std::string word;
  for (const char c : cell.substr(0, 10))
    word.push_back(static_cast<char>(std::tolower(static_cast<unsigned char>(c))));
  if (word.starts_with('+') || word.starts_with('-')) word.erase(0, 1);
  return word == "inf" || word == "infinity" || word == "nan";
}

/// Digits, signs, a point and an exponent, but no double: the number is too large or too small.
bool looks_out_of_range(std::string_view cell) {
  return cell.find_first_of("eE") != std::string_view::npos &&
         cell.find_first_not_of("+-.0123456789eE") == std::string_view::npos &&
         parse_number(cell.substr(0, cell.find_first_of("eE"))) &&
         parse_number(cell.substr(cell.find_first_of("eE") + 1));
}

[[noreturn]] void refuse_number(std::string_view cell, bool comma_possible, std::size_t line,
                                std::size_t field) {
  if (cell.empty())
    throw Error(ErrorKind::Input, "the field is empty where a number is expected", place(line, field));
  const std::string shown = cell_text(cell);
  if (looks_not_finite(cell))
    throw Error(ErrorKind::Input, shown + " is not a finite number", place(line, field));
  if (looks_out_of_range(cell))
    throw Error(ErrorKind::Input, shown + " is outside the range of double-precision numbers",
                place(line, field));
  std::string hint;
  if (!comma_possible && cell.find(',') != std::string_view::npos)
    hint = "a decimal comma needs semicolons or tabs between the fields";
  throw Error(ErrorKind::Input, shown + " is not a number", place(line, field, std::move(hint)));
}

bool is_guarded(std::string_view text) {
  const auto first = text.find_first_not_of('\'');
  return first != std::string_view::npos && kFormulaStarts.find(text[first]) != std::string_view::npos;
}

bool can_be_read_back(std::string_view name) {
  return !is_blank(name) && is_utf8(name) && std::none_of(name.begin(), name.end(), [](char c) {
    return static_cast<std::uint8_t>(c) < 0x20U && c != '\t' && c != '\r' && c != '\n';
  });
}

}  // namespace

std::optional<double> NumberCells::if_number(std::string_view cell) const {
  if (!comma_possible_) return quick_number(cell);
  const DecimalSigns signs = decimal_signs(cell);
  if (signs.comma && signs.point) return std::nullopt;
  return signs.comma ? number_with_comma(cell) : quick_number(cell);
}

double NumberCells::read(std::string_view cell, std::size_t line, std::size_t field) {
  const DecimalSigns signs = comma_possible_ ? decimal_signs(cell) : DecimalSigns{};
  if (signs.comma && signs.point) {
    throw Error(ErrorKind::Input, cell_text(cell) + " holds both a point and a comma",
                place(line, field, "write numbers without thousands separators"));
  }
  const std::optional<double> value = signs.comma ? number_with_comma(cell) : quick_number(cell);
  if (!value) refuse_number(cell, comma_possible_, line, field);
  // Only now: remarks such as "n.d." say nothing about decimal signs.
  if (signs.comma || signs.point) note_decimal_sign(signs.comma, cell, line, field);
  return *value;
}

void NumberCells::note_decimal_sign(bool comma, std::string_view cell, std::size_t line, std::size_t field) {
  const Place& other = comma ? first_point_ : first_comma_;
  if (other.line != 0) {
    throw Error(ErrorKind::Input,
                fmt::format("{} has a decimal {}, but line {}, field {} has a decimal {}", cell_text(cell),
                            comma ? "comma" : "point", other.line, other.field, comma ? "point" : "comma"),
                place(line, field, "one file uses one decimal sign"));
  }
  Place& own = comma ? first_comma_ : first_point_;
  if (own.line == 0) own = {line, field};
}

std::string cell_text(std::string_view cell) {
  constexpr std::size_t kLongestShown = 40;
  if (cell.size() <= kLongestShown) return fmt::format("\"{}\"", printable(cell));
  std::size_t cut = kLongestShown;
  while (cut > 0 && (static_cast<std::uint8_t>(cell[cut]) & 0xC0U) == 0x80U) --cut;  // not inside a character
  return fmt::format("\"{}...\"", printable(cell.substr(0, cut)));
}

std::string cell_of_name(std::string_view name) {
  if (!can_be_read_back(name)) {
    throw Error(
        ErrorKind::Output,
        fmt::format(
            "the name {} cannot be written to a CSV file: it is blank or holds bytes that are not text",
            cell_text(name)));
  }
  std::string text = is_guarded(name) ? "'" : "";
  text += name;
  const bool outer_blanks = text.front() == ' ' || text.back() == ' ';
  if (!outer_blanks && text.find_first_of(";,\"\t\r\n") == std::string::npos) return text;
  std::string quoted = "\"";
  for (const char c : text) {
    if (c == '"') quoted.push_back('"');
    quoted.push_back(c);
  }
  quoted.push_back('"');
  return quoted;
}

std::string_view name_of_cell(std::string_view cell) {
  if (cell.starts_with('\'') && is_guarded(cell)) cell.remove_prefix(1);
  return cell;
}

bool is_blank(std::string_view text) {
  return std::all_of(text.begin(), text.end(),
                     [](char c) { return c == ' ' || c == '\t' || c == '\r' || c == '\n'; });
}

}  // namespace bandwright
