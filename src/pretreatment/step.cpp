// SPDX-License-Identifier: Apache-2.0
#include "pretreatment/step.hpp"

#include <optional>
#include <utility>

#include "base/error.hpp"

namespace bandwright {
namespace {

/// Calls `visit` with a default-made step of every kind.
template <class Visitor, std::size_t... Kinds>
void for_each_kind(Visitor&& visit, std::index_sequence<Kinds...>) {
  (visit(Step(std::in_place_index<Kinds>)), ...);
}

template <class Visitor>
void for_each_kind(Visitor&& visit) {
  for_each_kind(visit, std::make_index_sequence<std::variant_size_v<Step>>{});
}

}  // namespace

std::vector<std::string> step_names() {
  std::vector<std::string> names;
  for_each_kind([&](const Step& step) { names.emplace_back(name_of(step)); });
  return names;
}

Step step_with_defaults(std::string_view name) {
  std::optional<Step> found;
  for_each_kind([&](const Step& step) {
    if (name_of(step) == name) found = step;
  });
  if (!found) throw Error(ErrorKind::Internal, "no pretreatment step \"" + std::string(name) + "\"");
  return *found;
}

}  // namespace bandwright
