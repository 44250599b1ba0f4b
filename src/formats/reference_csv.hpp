// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <cstddef>
#include <string>
#include <string_view>
#include <vector>

#include "base/error.hpp"
#include "spectra/reference_table.hpp"

/// Reference values in CSV files: a heading, then one row a sample.
///
///     sample,water [wt%],fat [wt%],batch
///     S01,60.5,22.5,B1
///     S02,,40.1,B1
///
/// The first column is the sample's id, whatever it is called. An empty cell of a numeric column
/// means "not determined".

namespace bandwright {

/// A column heading: `water [wt%]` is the name "water" with the unit "wt%".
struct ReferenceHeading {
  std::string name;
  std::string unit;  ///< empty if there are no brackets at the end
};

/// The columns a caller needs, by name without unit. Others are ignored.
struct ReferenceColumns {
  std::vector<std::string> components;  ///< numeric
  std::string group = {};               ///< text, no cell may be empty; empty = none asked for
  std::vector<std::string> further =
      {};  ///< numeric as well: standard deviations of the reference method and the like
};

struct ReferenceCsv {
  ReferenceTable table;  ///< columns: components, then further ones, each name once
  std::vector<Warning> warnings;
};

/// Reads the reference table of one CSV text; `file` names it in messages and origins.
///
/// Throws Error(Input) with file, line, column and hint if a column is missing, a heading or a
/// sample comes twice, a line has more or fewer fields than the heading, a cell is neither a finite
/// number nor empty (`<0.5` is text: nobody knows the value), or there are no samples.
[[nodiscard]] ReferenceCsv parse_reference_table(std::string_view text, std::string_view file,
                                                 const ReferenceColumns& wanted);

/// The headings behind that of the sample ids, in their order. Throws as parse_reference_table().
[[nodiscard]] std::vector<ReferenceHeading> reference_headings(std::string_view text, std::string_view file);

/// The table as comma-separated text, from which parse_reference_table() reads the same table, bit
/// for bit. `group_name` heads the groups if there are any, and must not be the name of a column.
/// Throws Error(Output) if a name cannot be written (cell_of_name()).
[[nodiscard]] std::string format_reference_table(const ReferenceTable& table,
                                                 std::string_view group_name = "group");

}  // namespace bandwright
