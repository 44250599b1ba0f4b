// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <array>
#include <string_view>

#include "model/recipe.hpp"
#include "records/plan.hpp"
#include "records/toml_options.hpp"

/// How the types that only a plan has are written in TOML. Includes toml++: for .cpp files only.

namespace bandwright {

using namespace std::string_view_literals;

template <>
inline constexpr std::array kRequiredKeys<SetFiles>{"spectra"sv, "reference"sv};
template <>
inline constexpr std::array kRequiredKeys<ComponentRecipe>{"name"sv};
template <>
inline constexpr std::array kRequiredKeys<Window>{"name"sv, "from"sv, "to"sv};
template <>
inline constexpr std::array kRequiredKeys<Exclusion>{"reason"sv};

/// `5` or `"f-test"`.
void read_value(const TomlValue& value, const Bounds& bounds, FactorChoice& out);

/// `0.004`, `{ absolute = 0.004, relative = 0.02 }`, or `"sd_water"`, a column of the reference table.
void read_value(const TomlValue& value, const Bounds& bounds, LabError& out);

/// `[1700, 1702]`.
void read_value(const TomlValue& value, const Bounds& bounds, Stretch& out);

/// `"snv"`, or `{ step = "savitzky-golay", points = 11 }` with the options of the step.
void read_value(const TomlValue& value, const Bounds& bounds, Step& out);

}  // namespace bandwright
