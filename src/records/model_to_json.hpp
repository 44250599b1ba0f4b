// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <array>
#include <string_view>
#include <utility>
#include <vector>

#include "base/options.hpp"
#include "model/model.hpp"
#include "records/json.hpp"
#include "records/model_seal.hpp"
#include "regression/latent_path.hpp"

/// The members of a model file, format 1, from a model. What each one means: models/README.md.

namespace bandwright {

template <>
struct EnumTexts<PathEnd> {
  static constexpr std::array entries{
      std::pair{PathEnd::Asked, std::string_view{"asked"}},
      std::pair{PathEnd::RankUsedUp, std::string_view{"rank used up"}},
      std::pair{PathEnd::ResponseExplained, std::string_view{"response explained"}}};
};

/// [{"name", "from", "to", "except", "points"}]: the windows of a chain and how many points of the axis
/// each one takes.
[[nodiscard]] Json windows_to_json(const PretreatmentChain& chain);

/// {"step": name, each option}.
[[nodiscard]] Json step_to_json(const Step& step);

/// All sections of the model, in the order of the file.
[[nodiscard]] ModelSections model_to_sections(const Model& model);

}  // namespace bandwright
