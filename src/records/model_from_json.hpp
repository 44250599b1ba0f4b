// SPDX-License-Identifier: Apache-2.0
#pragma once

#include "model/model.hpp"
#include "records/json.hpp"

namespace bandwright {

/// The model behind the document of a model file, format 1; digests and id are not checked. The recipe is
/// read from the plan in it, the chains are made anew from recipe and axis, and everything the document says
/// a second time must agree. Throws Error(Input) whose field is the path of the member at fault.
[[nodiscard]] Model model_from_json(const JsonValue& root);

}  // namespace bandwright
