// SPDX-License-Identifier: Apache-2.0
#include "cli/command_line_faults.hpp"

#include <fmt/format.h>

#include <CLI/CLI.hpp>
#include <algorithm>

#include "base/error.hpp"
#include "base/options.hpp"

namespace bandwright::cli {
namespace {

/// The command whose arguments are at fault, or the program itself.
const CLI::App& app_in_use(const CLI::App& app) {
  const auto commands = app.get_subcommands();
  return commands.empty() ? app : *commands.front();
}

std::string where_help_is(const CLI::App& app) {
  return &app_in_use(app) == &app ? "bandwright --help"
                                  : "bandwright " + app_in_use(app).get_name() + " --help";
}

/// The words before the first colon: the name of the option at fault.
std::string option_at_fault(const CLI::ParseError& fault) {
  const std::string text = fault.what();
  return text.substr(0, text.find(':'));
}

std::string unexpected_line(const CLI::App& app) {
  const CLI::App& used = app_in_use(app);
  const std::vector<std::string> words = used.remaining_size() > 0 ? used.remaining() : app.remaining();
  const auto option =
      std::find_if(words.begin(), words.end(), [](const std::string& word) { return word.starts_with('-'); });
  if (option == words.end())
    return fmt::format("one argument too many: \"{}\" ({})", words.empty() ? "" : words.back(),
                       where_help_is(app));
  std::vector<std::string> known;
  for (const CLI::Option* candidate : used.get_options())
    for (const std::string& name : candidate->get_lnames()) known.push_back("--" + name);
  const std::string word = option->substr(0, option->find('='));
  const std::string nearest = nearest_word(word, known);
  return fmt::format(
      "there is no option \"{}\" ({})", word,
      nearest.empty() ? where_help_is(app) + " lists them" : fmt::format("did you mean \"{}\"?", nearest));
}

}  // namespace

void check_command_word(const std::vector<std::string>& arguments, const CommandList& commands) {
  if (arguments.empty() || arguments.front().starts_with('-')) return;
  const std::string& word = arguments.front();
  std::vector<std::string> known;
  for (const auto& command : commands) known.push_back(command->name());
  if (std::find(known.begin(), known.end(), word) != known.end()) return;
  const auto& to_come = commands_to_come();
  if (std::find(to_come.begin(), to_come.end(), word) != to_come.end())
    throw Error(ErrorKind::Usage, fmt::format("the command \"{}\" is not available in this version", word));
  const std::string nearest = nearest_word(word, known);
  throw Error(ErrorKind::Usage, fmt::format("there is no command \"{}\"", word),
              {.file = {},
               .line = 0,
               .field = {},
               .hint = nearest.empty() ? "bandwright --help lists them"
                                       : fmt::format("did you mean \"{}\"?", nearest)});
}

void refuse_what_is_to_come(const CommonOptions& common) {
  for (const auto& [value, name] :
       {std::pair{&common.report, "--report"}, std::pair{&common.ledger, "--ledger"}})
    if (!value->empty())
      throw Error(ErrorKind::Usage, fmt::format("{} is not available in this version", name));
}

std::string parse_fault_line(const CLI::App& app, const CLI::ParseError& fault) {
  if (dynamic_cast<const CLI::ExtrasError*>(&fault) != nullptr) return unexpected_line(app);
  if (dynamic_cast<const CLI::ArgumentMismatch*>(&fault) != nullptr)
    return fmt::format("{} needs a value ({})", option_at_fault(fault), where_help_is(app));
  if (dynamic_cast<const CLI::RequiredError*>(&fault) != nullptr) {
    if (&app_in_use(app) == &app)
      return app.remaining_size() > 0 ? unexpected_line(app)
                                      : "a command is needed (bandwright --help lists them)";
    std::string name = fault.what();
    name = name.substr(0, name.find(' '));
    return fmt::format("{} is missing ({})", name, where_help_is(app));
  }
  std::string text = fault.what();
  std::replace(text.begin(), text.end(), '\n', ' ');
  return fmt::format("{} ({})", text, where_help_is(app));
}

}  // namespace bandwright::cli
