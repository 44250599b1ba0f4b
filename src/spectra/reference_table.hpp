// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <string>
#include <string_view>
#include <vector>

#include "base/matrix.hpp"
#include "spectra/spectra_set.hpp"

namespace bandwright {

/// Reference values of one component, one a sample; not a number = not determined.
struct ReferenceColumn {
  std::string name;
  std::string unit;  ///< from brackets in the heading, `water [wt%]`; may be empty
  Vector values;
};

/// Composition of samples by the reference method, one row a sample, in the order of the file.
struct ReferenceTable {
  std::vector<std::string> samples;      ///< unique
  std::vector<Origin> origins;           ///< one a sample
  std::vector<ReferenceColumn> columns;  ///< the numeric columns that were asked for
  std::vector<std::string> groups;       ///< one a sample; empty if no grouping column was asked for

  /// Position of the sample, or -1.
  [[nodiscard]] Index row_of(std::string_view sample) const;
  /// The column of that name. Throws Error(Internal) if it was not asked for when reading.
  [[nodiscard]] const ReferenceColumn& column(std::string_view name) const;
};

}  // namespace bandwright
