// SPDX-License-Identifier: Apache-2.0
#include "cli/text_table.hpp"

#include <algorithm>
#include <string_view>

#include "base/error.hpp"

namespace bandwright::cli {
namespace {

/// Code points, which is close enough to columns for the names that laboratories use.
std::size_t width_of(std::string_view text) {
  return static_cast<std::size_t>(std::count_if(
      text.begin(), text.end(), [](char c) { return (static_cast<unsigned char>(c) & 0xC0U) != 0x80U; }));
}

}  // namespace

void TextTable::add_column(std::string heading, Align align) {
  columns_.push_back({std::move(heading), align});
}

void TextTable::add_row(std::vector<std::string> cells) {
  if (cells.size() != columns_.size())
    throw Error(ErrorKind::Internal, "a table row has the wrong number of cells");
  for (std::string& cell : cells) cell = printable(cell);
  rows_.push_back(std::move(cells));
}

std::string TextTable::text(std::size_t indent) const {
  std::vector<std::size_t> widths;
  for (std::size_t c = 0; c < columns_.size(); ++c) {
    std::size_t width = width_of(columns_[c].heading);
    for (const auto& row : rows_) width = std::max(width, width_of(row[c]));
    widths.push_back(width);
  }
  std::string out;
  const auto add_line = [&](auto&& cell_of) {
    std::string line(indent, ' ');
    for (std::size_t c = 0; c < columns_.size(); ++c) {
      const std::string& cell = cell_of(c);
      const std::string padding(widths[c] - width_of(cell), ' ');
      if (c > 0) line += "  ";
      line += columns_[c].align == Align::Left ? cell + padding : padding + cell;
    }
    line.erase(line.find_last_not_of(' ') + 1);
    out += line + "\n";
  };
  add_line([&](std::size_t c) -> const std::string& { return columns_[c].heading; });
  for (const auto& row : rows_) add_line([&](std::size_t c) -> const std::string& { return row[c]; });
  return out;
}

}  // namespace bandwright::cli
