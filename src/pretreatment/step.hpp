// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <string>
#include <string_view>
#include <variant>
#include <vector>

#include "pretreatment/savitzky_golay.hpp"
#include "pretreatment/snv.hpp"

namespace bandwright {

/// The closed list of pretreatment steps. To add one: a pair of files with the struct, its `kName`
/// and `describe`; the overloads that the compiler then asks for in chain.cpp; its line here.
using Step = std::variant<SavitzkyGolay, Snv>;

/// The name a plan calls the step by.
[[nodiscard]] inline std::string_view name_of(const Step& step) {
  return std::visit([](const auto& s) { return s.kName; }, step);
}

/// Names of all steps of the list, in its order.
[[nodiscard]] std::vector<std::string> step_names();

/// A step of that name with its defaults; throws Error(Internal) for a name not in the list.
[[nodiscard]] Step step_with_defaults(std::string_view name);

}  // namespace bandwright
