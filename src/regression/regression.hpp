// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <array>
#include <string_view>
#include <utility>

#include "base/options.hpp"

namespace bandwright {

/// The kinds of regression a plan may ask for.
enum class RegressionKind { Pls };

template <>
struct EnumTexts<RegressionKind> {
  static constexpr std::array entries{std::pair{RegressionKind::Pls, std::string_view{"pls"}}};
};

}  // namespace bandwright
