// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <cstddef>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "model/recipe.hpp"
#include "spectra/axis.hpp"
#include "spectra/spectra_set.hpp"

namespace bandwright {

/// One set of a plan: [standards] or [validation]. Paths are as written, relative to the plan.
struct SetFiles {
  std::vector<std::string> spectra;  ///< file names or globs, at least one
  std::string reference;
  std::string replicate;         ///< mark of replicate spectra; empty = none
  std::string group;             ///< column of the reference table; empty = none
  std::optional<AxisUnit> axis;  ///< needed when the files do not say
  std::optional<Ordinate> ordinate;
  std::size_t line = 0;  ///< of the table's heading, for messages

  template <class Visitor>
  static void describe(Visitor&& visit) {
    visit("spectra", &SetFiles::spectra, any_value(),
          "files of spectra, globs allowed, relative to the plan");
    visit("reference", &SetFiles::reference, any_value(), "composition of the samples, one row a sample");
    visit("replicate", &SetFiles::replicate, any_value(),
          "mark before the number of a replicate: with \"-r\" spectrum S07-r2 belongs to sample S07");
    visit("group", &SetFiles::group, any_value(),
          "column of the reference table; samples of one group stay in one fold");
    visit("axis", &SetFiles::axis, any_value(), "unit of the axis, when the files do not say");
    visit("ordinate", &SetFiles::ordinate, any_value(), "what the ordinates are, when the files do not say");
  }
};

/// A plan file, read and checked.
struct Plan {
  std::string path;  ///< as given on the command line
  std::string text;  ///< as written, byte for byte
  Recipe recipe;
  SetFiles standards;
  /// Empty without [validation] files. `replicate`, `axis` and `ordinate` are those of [standards]
  /// where [validation] does not say; `group` is not.
  std::optional<SetFiles> validation;

  /// 1-based lines of the headings, one for each entry of the list in `recipe`: for faults that
  /// only the data show.
  std::vector<std::size_t> component_lines;
  std::vector<std::size_t> window_lines;
  std::vector<std::size_t> exclusion_lines;
};

/// Newest version of the plan grammar this program reads.
inline constexpr int kPlanFormat = 1;

/// Reads a plan. Every error is an Error(Usage) with the plan's path, the line and the key, and how
/// to mend it: unknown keys name the nearest known one; a part of the grammar that this version does
/// not compute yet is refused by name, never ignored.
[[nodiscard]] Plan parse_plan(std::string_view text, std::string_view path);

/// The option tables of the whole grammar, made from `describe`, as Markdown (see docs/plan.md).
[[nodiscard]] std::string plan_reference_markdown();

}  // namespace bandwright
