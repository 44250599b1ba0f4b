// SPDX-License-Identifier: Apache-2.0
#include "formats/csv_spectra.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <limits>
#include <unordered_map>
#include <utility>

#include "formats/cells.hpp"
#include "formats/csv_orientation.hpp"
#include "formats/delimited_text.hpp"
#include "formats/heading_label.hpp"

namespace bandwright {
namespace {

ErrorContext at_field(std::size_t line, std::size_t field, std::string hint = {}) {
  return {.file = {}, .line = line, .field = fmt::format("field {}", field), .hint = std::move(hint)};
}

/// What the error says besides the place.
std::string reason_of(const Error& error) {
  const ErrorContext& context = error.context();
  return Error(error.kind(), error.message(),
               {.file = {}, .line = 0, .field = context.field, .hint = context.hint})
      .what();
}

/// A spectrum on its way into the set.
struct Entry {
  std::string id;
  Origin origin;
  std::string fault;  ///< empty = good
  Index slot = -1;    ///< row of the values; -1 = none
};

/// Reads the body of the file below a heading whose orientation is known.
class BodyReader {
 public:
  BodyReader(const DelimitedText& csv, const CsvSpectraOptions& options)
      : csv_(csv), options_(options), records_(csv), numbers_(csv) {
    records_.next();
    heading_line_ = records_.line();
    heading_.assign(records_.fields().begin(), records_.fields().end());
  }

  CsvSpectra read_rows(std::optional<AxisUnit> unit) {
    spectra_.axis = axis_at(heading_line_, axis_of_heading(), unit);
    const Index points = spectra_.axis.size();
    spectra_.values.resize(most_rows(2 * points + 2), points);  // id, separators, digits, line end
    Index filled = 0;
    while (records_.next()) {
      Entry entry{std::string(name_of_cell(records_.fields().front())), here(), {}, -1};
      try {
        read_row(entry, filled);
        entry.slot = filled++;
      } catch (const Error& error) {
        give_up(entry, error);
      }
      entries_.push_back(std::move(entry));
    }
    if (entries_.empty()) refuse_empty("no spectra below the heading");
    return finish();
  }

  CsvSpectra read_columns(std::optional<AxisUnit> unit) {
    for (std::size_t j = 1; j < heading_.size(); ++j) add_column(j);
    const auto count = static_cast<Index>(entries_.size());
    Matrix points(most_rows(count + 2), count);  // p x n, as in the file; refused cells may be empty
    std::vector<double> axis;
    while (records_.next()) {
      check_width();
      axis.push_back(axis_value_of_row());
      read_point(points, static_cast<Index>(axis.size()) - 1);
    }
    if (axis.empty()) refuse_empty("no points below the heading");
    const auto size = static_cast<Index>(axis.size());
    spectra_.axis = axis_at(0, Eigen::Map<const Vector>(axis.data(), size), unit);
    spectra_.values = points.topRows(size).transpose();
    return finish();
  }

 private:
  Origin here() const { return {csv_.file(), records_.line()}; }

  /// At least the number of records, each of which takes `least_bytes` or more. Bounds the memory by
  /// the size of the text, whatever its heading promises.
  Index most_rows(Index least_bytes) const {
    const std::size_t by_size = csv_.text().size() / static_cast<std::size_t>(least_bytes) + 2;
    return static_cast<Index>(std::min(by_size, csv_.most_records()));
  }

  Vector axis_of_heading() try {
    Vector positions(static_cast<Index>(heading_.size()) - 1);
    for (std::size_t j = 1; j < heading_.size(); ++j)
      positions[static_cast<Index>(j) - 1] = numbers_.read(heading_[j], heading_line_, j + 1);
    return positions;
  } catch (const Error& error) {
    throw error.within({.file = {},
                        .line = 0,
                        .field = {},
                        .hint = "most fields of the heading are numbers, so it is read as the axis"});
  }

  double axis_value_of_row() try {
    return numbers_.read(records_.fields().front(), records_.line(), 1);
  } catch (const Error& error) {
    throw error.within({.file = {},
                        .line = 0,
                        .field = {},
                        .hint = "the heading is no axis, so the first column is read as the axis"});
  }

  static Axis axis_at(std::size_t line, Vector positions, std::optional<AxisUnit> unit) try {
    return {std::move(positions), unit};
  } catch (const Error& error) {
    throw error.within({.file = {}, .line = line, .field = {}, .hint = {}});
  }

  void check_width() const {
    const std::size_t found = records_.fields().size();
    const std::size_t expected = heading_.size();
    if (found == expected) return;
    std::string hint;
    if (csv_.separator() == ',' && found + 1 == 2 * expected)
      hint = "a decimal comma needs semicolons or tabs between the fields";
    throw Error(ErrorKind::Input, fmt::format("the line has {} fields, the heading has {}", found, expected),
                {.file = {}, .line = records_.line(), .field = {}, .hint = std::move(hint)});
  }

  void read_row(const Entry& entry, Index row) {
    note_id(entry.id, records_.line(), 1, fmt::format("line {}", records_.line()));
    check_width();
    const std::vector<std::string_view>& fields = records_.fields();
    double* const values = spectra_.values.row(row).data();
    for (std::size_t j = 1; j < fields.size(); ++j)
      values[j - 1] = numbers_.read(fields[j], records_.line(), j + 1);
  }

  void add_column(std::size_t j) {
    Entry entry{
        std::string(name_of_cell(heading_[j])), {csv_.file(), heading_line_}, {}, static_cast<Index>(j) - 1};
    try {
      note_id(entry.id, heading_line_, j + 1, fmt::format("field {}", j + 1));
    } catch (const Error& error) {
      give_up(entry, error);
    }
    entries_.push_back(std::move(entry));
  }

  void read_point(Matrix& points, Index row) {
    for (std::size_t j = 0; j < entries_.size(); ++j) {
      if (!entries_[j].fault.empty()) continue;
      try {
        points(row, static_cast<Index>(j)) = numbers_.read(records_.fields()[j + 1], records_.line(), j + 2);
      } catch (const Error& error) {
        give_up(entries_[j], error);
        entries_[j].origin = here();
      }
    }
  }

  /// Under Collect the spectrum is put aside, else the error goes on.
  void give_up(Entry& entry, const Error& error) const {
    if (options_.bad_spectrum == BadSpectrum::Refuse) throw error;
    entry.fault = reason_of(error);
  }

  void note_id(const std::string& id, std::size_t line, std::size_t field, const std::string& place) {
    if (is_blank(id)) throw Error(ErrorKind::Input, "the spectrum has no id", at_field(line, field));
    const auto [earlier, is_new] = places_of_ids_.emplace(id, std::pair{entries_.size(), place});
    if (is_new) return;
    const auto& [index, earlier_place] = earlier->second;
    const std::string shown = cell_text(id);
    if (entries_[index].fault.empty())
      entries_[index].fault = fmt::format("the id {} comes again at {}", shown, place);
    throw Error(ErrorKind::Input, fmt::format("the id {} is already at {}", shown, earlier_place),
                at_field(line, field, "ids must be unique"));
  }

  [[noreturn]] void refuse_empty(std::string message) const {
    throw Error(ErrorKind::Input, std::move(message),
                {.file = {}, .line = heading_line_, .field = {}, .hint = {}});
  }

  /// Moves the good spectra to the front and takes the others out.
  CsvSpectra finish() {
    CsvSpectra result;
    std::vector<Index> kept;
    for (Entry& entry : entries_) {
      if (!entry.fault.empty()) {
        result.refused.push_back({std::move(entry.id), std::move(entry.origin), std::move(entry.fault)});
        continue;
      }
      const auto row = static_cast<Index>(kept.size());
      if (row != entry.slot) spectra_.values.row(row) = spectra_.values.row(entry.slot);
      kept.push_back(entry.slot);
      spectra_.ids.push_back(std::move(entry.id));
      spectra_.origins.push_back(std::move(entry.origin));
    }
    spectra_.values.conservativeResize(static_cast<Index>(kept.size()), spectra_.points());
    result.spectra = std::move(spectra_);
    return result;
  }

  const DelimitedText& csv_;
  const CsvSpectraOptions& options_;
  RecordReader records_;
  NumberCells numbers_;
  std::vector<std::string> heading_;
  std::size_t heading_line_ = 0;
  std::vector<Entry> entries_;
  std::unordered_map<std::string, std::pair<std::size_t, std::string>> places_of_ids_;  // entry, place
  SpectraSet spectra_;
};

template <class Value>
std::optional<Value> agreed(std::optional<Value> in_file, std::optional<Value> asked, std::size_t line,
                            std::string_view what) {
  if (in_file && asked && *in_file != *asked) {
    throw Error(ErrorKind::Input,
                fmt::format("the heading says the {} is {}, but {} was asked for", what, text_of(*in_file),
                            text_of(*asked)),
                {.file = {}, .line = line, .field = "field 1", .hint = {}});
  }
  return in_file ? in_file : asked;
}

void warn_of_low_axis(const Axis& axis, std::string_view file, std::vector<Warning>& warnings) {
  if (axis.lowest() >= kLowestInfrared) return;
  warnings.push_back(
      {fmt::format("the axis goes down to {}, where neither cm-1 nor nm is infrared; is it in micrometres?",
                   axis.lowest()),
       std::string(file), 0});
}

CsvSpectra parse(const DelimitedText& csv, const CsvSpectraOptions& options) {
  RecordReader records(csv);
  if (!records.next()) throw Error(ErrorKind::Input, "the file is empty");
  const std::size_t heading_line = records.line();
  std::vector<Warning> warnings = csv.warnings();
  const Orientation orientation = orientation_of(csv, warnings);
  HeadingLabel label;
  try {
    label = read_heading_label(records.fields().front());
  } catch (const Error& error) {
    throw error.within(at_field(heading_line, 1));
  }
  const auto unit = agreed(label.unit, options.axis, heading_line, "axis unit");
  const auto ordinate = agreed(label.ordinate, options.ordinate, heading_line, "ordinate");

  BodyReader body(csv, options);
  CsvSpectra result = orientation == Orientation::Rows ? body.read_rows(unit) : body.read_columns(unit);
  result.spectra.ordinate = ordinate;
  warn_of_low_axis(result.spectra.axis, csv.file(), warnings);
  result.warnings = std::move(warnings);
  return result;
}

}  // namespace

CsvSpectra parse_csv_spectra(std::string_view text, std::string_view file, const CsvSpectraOptions& options) {
  try {
    return parse(DelimitedText(text, file), options);
  } catch (const Error& error) {
    throw error.within({.file = std::string(file), .line = 0, .field = {}, .hint = {}});
  }
}

std::string format_csv_spectra(const SpectraSet& spectra) {
  fmt::memory_buffer out;
  const auto put = [&](std::string_view text) { out.append(text); };
  put(heading_label_text(spectra.axis.unit(), spectra.ordinate));
  for (const double position : spectra.axis.positions())
    fmt::format_to(std::back_inserter(out), ",{}", position);
  for (Index i = 0; i < spectra.size(); ++i) {
    put("\n");
    put(cell_of_name(spectra.ids[static_cast<std::size_t>(i)]));
    for (const double value : spectra.values.row(i)) fmt::format_to(std::back_inserter(out), ",{}", value);
  }
  put("\n");
  return fmt::to_string(out);
}

}  // namespace bandwright
