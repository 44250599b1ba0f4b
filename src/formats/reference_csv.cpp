// SPDX-License-Identifier: Apache-2.0
#include "formats/reference_csv.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <limits>
#include <optional>
#include <unordered_map>
#include <utility>

#include "base/options.hpp"
#include "formats/cells.hpp"
#include "formats/delimited_text.hpp"

namespace bandwright {
namespace {

std::string_view without_blanks(std::string_view text) {
  constexpr std::string_view kBlanks = " \t\r\n";
  const auto first = text.find_first_not_of(kBlanks);
  if (first == std::string_view::npos) return {};
  return text.substr(first, text.find_last_not_of(kBlanks) - first + 1);
}

ReferenceHeading split_heading(std::string_view cell) {
  const std::string_view text = without_blanks(name_of_cell(cell));
  const auto bracket = text.rfind('[');
  if (!text.ends_with(']') || bracket == std::string_view::npos) return {std::string(text), {}};
  const std::string_view name = without_blanks(text.substr(0, bracket));
  if (name.empty()) return {std::string(text), {}};
  return {std::string(name),
          std::string(without_blanks(text.substr(bracket + 1, text.size() - bracket - 2)))};
}

/// A name that ends in brackets of its own gets empty ones behind, so that they are not its unit.
std::string heading_cell(const std::string& name, const std::string& unit) {
  if (unit.empty() && !name.ends_with(']')) return cell_of_name(name);
  return cell_of_name(fmt::format("{} [{}]", name, unit));
}

struct Headings {
  std::size_t line = 0;
  std::vector<ReferenceHeading> columns;  ///< columns[j] heads field j + 2
};

Headings read_headings(RecordReader& records) {
  if (!records.next()) throw Error(ErrorKind::Input, "the file is empty");
  Headings headings;
  headings.line = records.line();
  std::unordered_map<std::string, std::size_t> field_of_name;
  for (std::size_t j = 1; j < records.fields().size(); ++j) {
    ReferenceHeading heading = split_heading(records.fields()[j]);
    if (!heading.name.empty()) {
      const auto [earlier, is_new] = field_of_name.emplace(heading.name, j + 1);
      if (!is_new) {
        throw Error(
            ErrorKind::Input,
            fmt::format("the heading {} is already at field {}", cell_text(heading.name), earlier->second),
            {.file = {}, .line = headings.line, .field = fmt::format("field {}", j + 1), .hint = {}});
      }
    }
    headings.columns.push_back(std::move(heading));
  }
  return headings;
}

std::string listed(const std::vector<std::string>& names) {
  constexpr std::size_t kMostListed = 12;
  std::string text;
  for (std::size_t i = 0; i < std::min(names.size(), kMostListed); ++i)
    text += (text.empty() ? "" : ", ") + cell_text(names[i]);
  if (names.size() > kMostListed) text += fmt::format(" and {} more", names.size() - kMostListed);
  return text.empty() ? "there are no columns besides the sample ids" : "columns: " + text;
}

/// 0-based position of the field. Column names come from the plan, so the user may have misspelt
/// them, or written the unit with them.
std::size_t field_of(const Headings& headings, const std::string& wanted) {
  std::vector<std::string> names;
  for (std::size_t j = 0; j < headings.columns.size(); ++j) {
    if (headings.columns[j].name == wanted) return j + 1;
    if (!headings.columns[j].name.empty()) names.push_back(headings.columns[j].name);
  }
  const std::string bare = split_heading(wanted).name;
  const bool has_bare = std::find(names.begin(), names.end(), bare) != names.end();
  const std::string nearest = has_bare ? bare : nearest_word(wanted, names);
  std::string hint = listed(names);
  if (!nearest.empty()) hint = fmt::format("did you mean {}? {}", cell_text(nearest), hint);
  throw Error(ErrorKind::Input, fmt::format("there is no column {}", cell_text(wanted)),
              {.file = {}, .line = headings.line, .field = {}, .hint = std::move(hint)});
}

struct NumericColumn {
  std::size_t field = 0;  ///< 0-based
  std::vector<double> values;
};

/// Reads the table row by row.
class TableReader {
 public:
  TableReader(const DelimitedText& csv, const ReferenceColumns& wanted)
      : csv_(csv), records_(csv), numbers_(csv), headings_(read_headings(records_)) {
    for (const auto* names : {&wanted.components, &wanted.further})
      for (const std::string& name : *names) add_column(name);
    if (!wanted.group.empty()) group_field_ = field_of(headings_, wanted.group);
  }

  ReferenceTable read() {
    while (records_.next()) read_row();
    if (table_.samples.empty()) {
      throw Error(ErrorKind::Input, "no samples below the heading",
                  {.file = {}, .line = headings_.line, .field = {}, .hint = {}});
    }
    for (std::size_t k = 0; k < columns_.size(); ++k) {
      const std::vector<double>& values = columns_[k].values;
      table_.columns[k].values = Eigen::Map<const Vector>(values.data(), static_cast<Index>(values.size()));
    }
    return std::move(table_);
  }

 private:
  void add_column(const std::string& name) {
    const auto same = [&](const ReferenceColumn& column) { return column.name == name; };
    if (std::any_of(table_.columns.begin(), table_.columns.end(), same)) return;
    const std::size_t field = field_of(headings_, name);
    table_.columns.push_back({name, headings_.columns[field - 1].unit, {}});
    columns_.push_back({field, {}});
  }

  ErrorContext here(std::string field, std::string hint = {}) const {
    return {.file = {}, .line = records_.line(), .field = std::move(field), .hint = std::move(hint)};
  }

  std::string column_text(std::size_t field) const {
    return fmt::format("column {}", cell_text(headings_.columns[field - 1].name));
  }

  void read_row() {
    const std::vector<std::string_view>& fields = records_.fields();
    if (fields.size() != headings_.columns.size() + 1) {
      throw Error(ErrorKind::Input,
                  fmt::format("the line has {} fields, the heading has {}", fields.size(),
                              headings_.columns.size() + 1),
                  here({}));
    }
    note_sample(std::string(name_of_cell(fields.front())));
    for (NumericColumn& column : columns_) column.values.push_back(read_value(column.field));
    if (group_field_) table_.groups.push_back(read_group(*group_field_));
  }

  void note_sample(std::string sample) {
    if (is_blank(sample)) throw Error(ErrorKind::Input, "the sample has no id", here("field 1"));
    const auto [earlier, is_new] = line_of_sample_.emplace(sample, records_.line());
    if (!is_new) {
      throw Error(ErrorKind::Input,
                  fmt::format("the sample {} is already at line {}", cell_text(sample), earlier->second),
                  here("field 1", "one row a sample"));
    }
    table_.samples.push_back(std::move(sample));
    table_.origins.push_back({csv_.file(), records_.line()});
  }

  double read_value(std::size_t field) {
    const std::string_view cell = records_.fields()[field];
    if (is_blank(cell)) return std::numeric_limits<double>::quiet_NaN();
    try {
      return numbers_.read(cell, records_.line(), field + 1);
    } catch (const Error& error) {
      throw Error(error.kind(), error.message(), here(column_text(field), error.context().hint))
          .within({.file = {},
                   .line = 0,
                   .field = {},
                   .hint = "leave the cell empty if the value was not determined"});
    }
  }

  std::string read_group(std::size_t field) const {
    const std::string_view cell = name_of_cell(records_.fields()[field]);
    if (is_blank(cell)) {
      throw Error(ErrorKind::Input, "the group of the sample is missing",
                  here(column_text(field), "every sample needs a group; one of its own will do"));
    }
    return std::string(cell);
  }

  const DelimitedText& csv_;
  RecordReader records_;
  NumberCells numbers_;
  Headings headings_;
  std::vector<NumericColumn> columns_;  // one a column of the table
  std::optional<std::size_t> group_field_;
  std::unordered_map<std::string, std::size_t> line_of_sample_;
  ReferenceTable table_;
};

ErrorContext in_file(std::string_view file) {
  return {.file = std::string(file), .line = 0, .field = {}, .hint = {}};
}

}  // namespace

ReferenceCsv parse_reference_table(std::string_view text, std::string_view file,
                                   const ReferenceColumns& wanted) {
  try {
    const DelimitedText csv(text, file);
    return {TableReader(csv, wanted).read(), csv.warnings()};
  } catch (const Error& error) {
    throw error.within(in_file(file));
  }
}

std::vector<ReferenceHeading> reference_headings(std::string_view text, std::string_view file) {
  try {
    const DelimitedText csv(text, file);
    RecordReader records(csv);
    return read_headings(records).columns;
  } catch (const Error& error) {
    throw error.within(in_file(file));
  }
}

std::string format_reference_table(const ReferenceTable& table, std::string_view group_name) {
  std::string out = "sample";
  for (const ReferenceColumn& column : table.columns) out += "," + heading_cell(column.name, column.unit);
  if (!table.groups.empty()) out += "," + heading_cell(std::string(group_name), {});
  out += "\n";
  for (std::size_t i = 0; i < table.samples.size(); ++i) {
    out += cell_of_name(table.samples[i]);
    for (const ReferenceColumn& column : table.columns) {
      const double value = column.values[static_cast<Index>(i)];
      out += std::isnan(value) ? "," : fmt::format(",{}", value);
    }
    if (!table.groups.empty()) out += "," + cell_of_name(table.groups[i]);
    out += "\n";
  }
  return out;
}

}  // namespace bandwright
