// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <string>
#include <vector>

namespace bandwright::cli {

enum class Align { Left, Right };

/// A table for people: headings, rows, columns two blanks apart. Cells are made printable.
class TextTable {
 public:
  void add_column(std::string heading, Align align = Align::Right);
  /// One cell a column, in their order.
  void add_row(std::vector<std::string> cells);
  [[nodiscard]] bool empty() const { return rows_.empty(); }
  /// Each line begins with `indent` blanks and ends without any.
  [[nodiscard]] std::string text(std::size_t indent = 0) const;

 private:
  struct Column {
    std::string heading;
    Align align;
  };
  std::vector<Column> columns_;
  std::vector<std::vector<std::string>> rows_;
};

}  // namespace bandwright::cli
