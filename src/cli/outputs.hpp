// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <functional>
#include <string>
#include <string_view>

#include "cli/command.hpp"
#include "model/model.hpp"

namespace bandwright::cli {

/// Fails early, before long work: when --out names a file that exists and --replace is not given, or lies
/// in a directory where nothing can be written. Throws Error(Output), or Error(Usage) if --out - and
/// --json both ask for standard output.
void check_out(const CommonOptions& common);

/// Writes the main result to --out, whole or not at all, then `on_screen` to standard output; with --out -
/// the main result alone goes to standard output. `main_result` is called only when --out is given.
void deliver(const CommonOptions& common, const std::function<std::string()>& main_result,
             const std::function<std::string()>& on_screen);

/// Short form of a SHA-256 for people's tables; the full one stands in JSON and in `show`.
[[nodiscard]] std::string short_digest(const std::string& sha256);

/// Value and unit, "0.0312 wt%".
[[nodiscard]] std::string with_unit(const std::string& value, const std::string& unit);

/// Decimals of a component's values: those of its cross-validated error.
[[nodiscard]] int decimals_of(const ComponentModel& component);

/// A statistic of the catalogue as people see it.
[[nodiscard]] std::string shown(std::string_view key, double value, int decimals);
[[nodiscard]] std::string label(std::string_view key);

/// The caution under every table of results.
[[nodiscard]] std::string_view caution();

}  // namespace bandwright::cli
