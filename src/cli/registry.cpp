// SPDX-License-Identifier: Apache-2.0
#include "cli/command.hpp"

namespace bandwright::cli {

CommandList all_commands() {
  CommandList commands;
  commands.push_back(make_calibrate());
  commands.push_back(make_validate());
  commands.push_back(make_predict());
  commands.push_back(make_show());
  return commands;
}

const std::vector<std::string>& commands_to_come() {
  static const std::vector<std::string> names{"inspect", "revalidate", "survey", "ledger"};
  return names;
}

}  // namespace bandwright::cli
