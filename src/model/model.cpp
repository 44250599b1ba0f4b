// SPDX-License-Identifier: Apache-2.0
#include "model/model.hpp"

#include <algorithm>

#include "base/error.hpp"

namespace bandwright {

std::string FactorDecision::rule_text() const { return rule ? std::string(text_of(*rule)) : "fixed"; }

const ComponentRecipe& Model::asked(const ComponentModel& component) const {
  const auto found = std::find_if(recipe.components.begin(), recipe.components.end(),
                                  [&](const ComponentRecipe& asked) { return asked.name == component.name; });
  if (found == recipe.components.end())
    throw Error(ErrorKind::Internal, "the model's plan has no component \"" + component.name + "\"");
  return *found;
}

}  // namespace bandwright
