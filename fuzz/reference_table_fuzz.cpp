// SPDX-License-Identifier: Apache-2.0
#include <cmath>
#include <cstddef>
#include <cstdint>
#include <cstdlib>
#include <string>
#include <string_view>

#include "base/error.hpp"
#include "formats/reference_csv.hpp"

using namespace bandwright;

namespace {

bool same(const ReferenceTable& a, const ReferenceTable& b) {
  if (a.samples != b.samples || a.groups != b.groups || a.columns.size() != b.columns.size()) return false;
  for (std::size_t k = 0; k < a.columns.size(); ++k) {
    if (a.columns[k].name != b.columns[k].name || a.columns[k].unit != b.columns[k].unit) return false;
    for (Index i = 0; i < a.columns[k].values.size(); ++i) {
      const double x = a.columns[k].values[i];
      const double y = b.columns[k].values[i];
      if (!(x == y || (std::isnan(x) && std::isnan(y)))) return false;
    }
  }
  return true;
}

/// All columns but the last as numbers, the last as groups.
ReferenceColumns all_columns(std::string_view text) {
  ReferenceColumns wanted;
  for (const ReferenceHeading& heading : reference_headings(text, "fuzz.csv"))
    if (!heading.name.empty()) wanted.components.push_back(heading.name);
  if (wanted.components.size() > 1) {
    wanted.group = wanted.components.back();
    wanted.components.pop_back();
  }
  return wanted;
}

}  // namespace

extern "C" int LLVMFuzzerTestOneInput(const std::uint8_t* data, std::size_t size) {
  const std::string_view text(reinterpret_cast<const char*>(data), size);
  ReferenceColumns wanted;
  ReferenceTable once;
  try {
    wanted = all_columns(text);
    once = parse_reference_table(text, "fuzz.csv", wanted).table;
  } catch (const Error&) {
    return 0;
  }
  // What was read must be written and read again without any refusal.
  const std::string again = format_reference_table(once, wanted.group);
  if (!same(once, parse_reference_table(again, "fuzz.csv", wanted).table)) std::abort();
  return 0;
}
