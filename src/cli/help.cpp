// SPDX-License-Identifier: Apache-2.0
#include "cli/help.hpp"

#include <fmt/format.h>

#include <CLI/CLI.hpp>

#include "cli/outputs.hpp"

namespace bandwright::cli {

void lay_out_help(CLI::App& app) {
  constexpr std::size_t kColumn = 24;
  const auto formatter = app.get_formatter();
  formatter->column_width(kColumn);
  for (const auto& [word, ours] :
       {std::pair{"Positionals", "Arguments"}, std::pair{"SUBCOMMAND", "COMMAND ..."},
        std::pair{"REQUIRED", ""}, std::pair{"TEXT", ""}})
    formatter->label(word, ours);
  app.set_help_flag("-h,--help", "show this page");
}

std::string help_page(const CLI::App& app) {
  std::string page = app.help();
  for (std::size_t at = 0; (at = page.find("\n\n\n", at)) != std::string::npos;) page.erase(at, 1);
  page.erase(page.find_last_not_of('\n') + 1);
  const auto named = app.get_subcommands();
  return (named.empty() ? "" : "bandwright " + named.front()->get_name() + ": ") + page + "\n";
}

std::string help_footer() {
  const auto line = [](ExitStatus status, std::string_view meaning) {
    return fmt::format("  {:<4}{}\n", int{status}, meaning);
  };
  return "Exit status:\n" +
         line(kDone, "done; where the command judges, the judgement is favourable; never a release") +
         line(kUnfavourable, "done, and the judgement is unfavourable or cannot be made") +
         line(kUsageFault, "the command line or the plan is wrong") +
         line(kDataRefused, "data refused, or numbers that cannot be computed") +
         line(kOutputFault, "the output could not be written; what stood there before still stands") +
         line(kProgramFault, "a fault of the program or of its linear-algebra library") + "\n" +
         std::string(caution());
}

}  // namespace bandwright::cli
