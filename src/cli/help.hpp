// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <string>

#include "cli/command.hpp"

namespace bandwright::cli {

/// Words and widths of the help pages; subcommands added afterwards inherit them.
void lay_out_help(CLI::App& app);

/// The page of the command that was named, or of the program.
[[nodiscard]] std::string help_page(const CLI::App& app);

/// What stands at the end of every help page: exit statuses and the caution.
[[nodiscard]] std::string help_footer();

}  // namespace bandwright::cli
