// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <string>
#include <vector>

#include "cli/command.hpp"

namespace CLI {
class ParseError;
}

namespace bandwright::cli {

/// Refuses a first word that is no command: by name if a later version brings it, else with the nearest
/// known one. Throws Error(Usage).
void check_command_word(const std::vector<std::string>& arguments, const CommandList& commands);

/// Refuses, by name, options that a later version brings. Throws Error(Usage).
void refuse_what_is_to_come(const CommonOptions& common);

/// The one line of a fault that the option parser found in the arguments of `app`.
[[nodiscard]] std::string parse_fault_line(const CLI::App& app, const CLI::ParseError& fault);

}  // namespace bandwright::cli
