// SPDX-License-Identifier: Apache-2.0
#include "spectra/reference_table.hpp"

#include <algorithm>

#include "base/error.hpp"

namespace bandwright {

Index ReferenceTable::row_of(std::string_view sample) const {
  const auto found = std::find(samples.begin(), samples.end(), sample);
  return found == samples.end() ? -1 : static_cast<Index>(found - samples.begin());
}

const ReferenceColumn& ReferenceTable::column(std::string_view name) const {
  const auto found =
      std::find_if(columns.begin(), columns.end(), [&](const ReferenceColumn& c) { return c.name == name; });
  if (found == columns.end())
    throw Error(ErrorKind::Internal, "reference column \"" + std::string(name) + "\" was not read");
  return *found;
}

}  // namespace bandwright
