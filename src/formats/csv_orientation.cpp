// SPDX-License-Identifier: Apache-2.0
#include "formats/csv_orientation.hpp"

#include <fmt/format.h>

#include <optional>
#include <string>
#include <string_view>

#include "formats/cells.hpp"
#include "formats/heading_label.hpp"

namespace bandwright {
namespace {

constexpr std::string_view kFormHint =
    "the first row is a label, then the axis values; every further row an id, then the ordinates";

/// Watches whether cells could be an axis: positive numbers, strictly rising or falling.
class AxisProbe {
 public:
  void see(std::optional<double> value) {
    ++cells_;
    if (!value) return;
    ++numbers_;
    if (*value < lowest_ || numbers_ == 1) lowest_ = *value;
    if (numbers_ == 2) falling_ = *value < last_;
    if (numbers_ > 1 && !(falling_ ? *value < last_ : *value > last_)) strict_ = false;
    last_ = *value;
  }

  [[nodiscard]] bool any_number() const { return numbers_ > 0; }
  [[nodiscard]] bool mostly_numbers() const { return 2 * numbers_ > cells_; }
  [[nodiscard]] bool all_numbers() const { return cells_ > 0 && numbers_ == cells_; }
  [[nodiscard]] bool is_axis() const { return all_numbers() && strict_ && lowest_ > 0.0; }
  [[nodiscard]] bool is_infrared_axis() const { return is_axis() && lowest_ >= kLowestInfrared; }
  [[nodiscard]] bool below_infrared() const { return numbers_ > 0 && lowest_ < kLowestInfrared; }
  [[nodiscard]] bool could_still_be_axis() const { return numbers_ == cells_ && strict_; }

 private:
  std::size_t cells_ = 0;
  std::size_t numbers_ = 0;
  double lowest_ = 0.0;
  double last_ = 0.0;
  bool falling_ = false;
  bool strict_ = true;
};

AxisProbe probe_heading(const RecordReader& heading, const NumberCells& numbers) {
  AxisProbe probe;
  for (std::size_t j = 1; j < heading.fields().size(); ++j) probe.see(numbers.if_number(heading.fields()[j]));
  return probe;
}

/// Stops where the column ceases to be an axis, in most files of rows at the first id.
AxisProbe probe_column(RecordReader& below_heading, const NumberCells& numbers) {
  AxisProbe probe;
  while (probe.could_still_be_axis() && below_heading.next())
    probe.see(numbers.if_number(below_heading.fields().front()));
  return probe;
}

void check_heading(const RecordReader& heading, const NumberCells& numbers, const DelimitedText& csv) {
  if (heading.fields().size() < 2) {
    throw Error(ErrorKind::Input, "the heading has one field only, so there is no axis",
                {.file = {},
                 .line = heading.line(),
                 .field = {},
                 .hint = "fields are separated by comma, semicolon or tab"});
  }
  if (numbers.if_number(heading.fields().front())) {
    throw Error(
        ErrorKind::Input,
        fmt::format("the heading begins with the number {} where a label is expected ({} between the fields)",
                    cell_text(heading.fields().front()), csv.separator_name()),
        {.file = {}, .line = heading.line(), .field = "field 1", .hint = std::string(kFormHint)});
  }
}

Orientation warned(Orientation orientation, const DelimitedText& csv, std::vector<Warning>& warnings) {
  const bool rows = orientation == Orientation::Rows;
  warnings.push_back(
      {fmt::format("the first row and the first column are both numbers; the {} was read as the axis and "
                   "the {} as ids, because an infrared axis has no value below {}",
                   rows ? "row" : "column", rows ? "column" : "row", kLowestInfrared),
       csv.file(), 0});
  return orientation;
}

[[noreturn]] void refuse_both(const RecordReader& heading) {
  throw Error(ErrorKind::Input, "the first row and the first column could both be the axis",
              {.file = {},
               .line = heading.line(),
               .field = {},
               .hint = "give the spectra ids that are not numbers, such as S101"});
}

/// The heading is mostly numbers, yet no axis: the reader for rows will name the cell at fault.
Orientation rows_with_fault() { return Orientation::Rows; }

}  // namespace

Orientation orientation_of(const DelimitedText& csv, std::vector<Warning>& warnings) {
  const NumberCells numbers(csv);
  RecordReader heading(csv);
  heading.next();
  check_heading(heading, numbers, csv);
  const AxisProbe row = probe_heading(heading, numbers);
  RecordReader below(csv);
  below.next();
  const AxisProbe column = probe_column(below, numbers);

  if (row.is_axis()) {
    if (!column.is_axis()) return Orientation::Rows;
    if (read_heading_label(heading.fields().front()).heads_spectrum_ids) return Orientation::Rows;
    if (row.is_infrared_axis() == column.is_infrared_axis()) refuse_both(heading);
    return warned(row.is_infrared_axis() ? Orientation::Rows : Orientation::Columns, csv, warnings);
  }
  if (row.all_numbers() && row.below_infrared() && column.is_infrared_axis())
    return warned(Orientation::Columns, csv, warnings);  // ids such as 17, 3, 9
  if (row.mostly_numbers()) return rows_with_fault();
  if (column.could_still_be_axis() || column.any_number())
    return Orientation::Columns;  // its reader names faults
  throw Error(ErrorKind::Input, "neither the first row nor the first column holds an axis",
              {.file = {}, .line = heading.line(), .field = {}, .hint = std::string(kFormHint)});
}

}  // namespace bandwright
