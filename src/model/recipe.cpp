// SPDX-License-Identifier: Apache-2.0
#include "model/recipe.hpp"

#include <algorithm>

#include "base/error.hpp"

namespace bandwright {

AcceptCriteria AcceptRecipe::for_component(std::string_view name) const {
  AcceptCriteria criteria = all;
  const auto own = std::find_if(per_component.begin(), per_component.end(),
                                [&](const ComponentAccept& accept) { return accept.component == name; });
  if (own == per_component.end()) return criteria;
  AcceptCriteria::describe([&](std::string_view, auto member, const Bounds&, std::string_view) {
    if (own->criteria.*member) criteria.*member = own->criteria.*member;
  });
  return criteria;
}

const ComponentRecipe& Recipe::component(std::string_view name) const {
  const auto found = std::find_if(components.begin(), components.end(),
                                  [&](const ComponentRecipe& c) { return c.name == name; });
  if (found == components.end())
    throw Error(ErrorKind::Internal, "the recipe has no component \"" + std::string(name) + "\"");
  return *found;
}

}  // namespace bandwright
