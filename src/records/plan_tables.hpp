// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <string_view>
#include <vector>

#include "model/recipe.hpp"
#include "records/plan.hpp"
#include "records/toml_options.hpp"

/// One function for each table of a plan: reads it out of the top level and checks it against those
/// read before (`Plan` is filled in the order of these functions). Each throws Error(Usage) at the
/// line of the fault. Includes toml++: for .cpp files only.

namespace bandwright {

/// Keys and tables of the top level.
[[nodiscard]] const std::vector<std::string>& top_level_keys();

void read_standards(const TomlTable& top, Plan& plan);
void read_exclusions(const TomlTable& top, Plan& plan);
void read_windows(const TomlTable& top, Plan& plan);
void read_pretreatment(const TomlTable& top, Plan& plan);
void read_regression(const TomlTable& top, Plan& plan);
void read_components(const TomlTable& top, Plan& plan);        ///< needs windows and regression
void read_cross_validation(const TomlTable& top, Plan& plan);  ///< needs standards
void read_interval(const TomlTable& top, Plan& plan);          ///< needs components
void read_decision(const TomlTable& top, Plan& plan);
void read_limits(const TomlTable& top, Plan& plan);
void read_validation(const TomlTable& top, Plan& plan);  ///< needs standards and components

}  // namespace bandwright
