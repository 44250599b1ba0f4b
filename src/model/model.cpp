// SPDX-License-Identifier: Apache-2.0
#include "model/model.hpp"

namespace bandwright {

std::string FactorDecision::rule_text() const { return rule ? std::string(text_of(*rule)) : "fixed"; }

const ComponentRecipe& Model::asked(const ComponentModel& component) const {
  return recipe.component(component.name);
}

}  // namespace bandwright
