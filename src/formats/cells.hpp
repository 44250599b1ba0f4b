// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <cstddef>
#include <optional>
#include <string>
#include <string_view>

#include "formats/delimited_text.hpp"

/// The cells of a CSV file: numbers read under the file's own decimal sign, names written so that
/// neither a comma nor a spreadsheet can change them.

namespace bandwright {

/// Reads the numbers of one text. A decimal comma is possible only where the separator is not a
/// comma, and only one of the two decimal signs may occur in a text: `1.234` beside `0,5` may mean
/// a thousand, and nothing here guesses.
class NumberCells {
 public:
  explicit NumberCells(const DelimitedText& text) : comma_possible_(text.separator() != ',') {}

  /// The number in the cell, or empty if it is none; remembers nothing.
  [[nodiscard]] std::optional<double> if_number(std::string_view cell) const;

  /// The number in the cell. Throws Error(Input) with line and field if it is empty, no number, not
  /// finite, outside the range of a double, or written with the other decimal sign.
  [[nodiscard]] double read(std::string_view cell, std::size_t line, std::size_t field);

 private:
  struct Place {
    std::size_t line = 0;  ///< 0 = not seen yet
    std::size_t field = 0;
  };
  void note_decimal_sign(bool comma, std::string_view cell, std::size_t line, std::size_t field);

  bool comma_possible_;
  Place first_point_;
  Place first_comma_;
};

/// The cell for a message: in quotes, printable, cut after some forty bytes.
[[nodiscard]] std::string cell_text(std::string_view cell);

/// A name as a cell of a comma-separated file, quoted when it holds separators, quotes, line ends
/// or outer blanks. A name that begins with = + - @, a tab or a line end would run as a formula in
/// spreadsheet programs: it gets an apostrophe in front, and so does a name that already looks like
/// the outcome of that, so that name_of_cell() undoes it exactly.
/// Throws Error(Output) if a reader could not take the name back: blank, not UTF-8, or with other
/// control characters.
[[nodiscard]] std::string cell_of_name(std::string_view name);

/// The name in a cell: one apostrophe is cut from `'=...`, `''=...` and so on; `'tis` stays.
[[nodiscard]] std::string_view name_of_cell(std::string_view cell);

/// True if the text has nothing but blanks.
[[nodiscard]] bool is_blank(std::string_view text);

}  // namespace bandwright
