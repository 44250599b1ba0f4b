// SPDX-License-Identifier: Apache-2.0
#pragma once

#include "model/model.hpp"
#include "records/json.hpp"

namespace bandwright {

/// One entry of `components` in a model file, format 1. `asked` is what the plan says of the component,
/// `recipe` the whole plan. Throws Error(Input) whose field is the path of the member at fault.
[[nodiscard]] ComponentModel component_from_json(const JsonValue& node, const ComponentRecipe& asked,
                                                 const Recipe& recipe, const Axis& axis);

}  // namespace bandwright
