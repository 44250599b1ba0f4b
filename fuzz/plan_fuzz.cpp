// SPDX-License-Identifier: Apache-2.0
// Whatever the text, parse_plan returns a plan or throws an Error(Usage) of one printable line that names the
// file.
#include <cstddef>
#include <cstdint>
#include <cstdlib>
#include <string_view>

#include "base/error.hpp"
#include "records/plan.hpp"

extern "C" int LLVMFuzzerTestOneInput(const std::uint8_t* data, std::size_t size) {
  using bandwright::Error;
  try {
    const bandwright::Plan plan =
        bandwright::parse_plan({reinterpret_cast<const char*>(data), size}, "plan.toml");
    if (plan.recipe.components.empty() || plan.recipe.components.size() != plan.component_lines.size())
      std::abort();
  } catch (const Error& error) {
    const std::string_view line = error.what();
    if (error.kind() != bandwright::ErrorKind::Usage || !line.starts_with("plan.toml:")) std::abort();
    if (line.find('\n') != std::string_view::npos || !bandwright::is_utf8(line)) std::abort();
  }
  return 0;
}
