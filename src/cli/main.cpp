// SPDX-License-Identifier: Apache-2.0
#include <fmt/format.h>

#include <CLI/CLI.hpp>
#include <algorithm>
#include <charconv>
#include <csignal>
#include <exception>
#include <new>
#include <string>
#include <vector>

#include "base/error.hpp"
#include "cli/command.hpp"
#include "cli/command_line_faults.hpp"
#include "cli/help.hpp"
#include "cli/terminal.hpp"
#include "cli/version.hpp"
#include "numerics/linear_algebra.hpp"
#include "records/plan.hpp"

namespace bandwright::cli {
namespace {

int status_of(ErrorKind kind) {
  switch (kind) {
    case ErrorKind::Usage:
      return kUsageFault;
    case ErrorKind::Input:
    case ErrorKind::Numerical:
      return kDataRefused;
    case ErrorKind::Output:
      return kOutputFault;
    case ErrorKind::Internal:
      return kProgramFault;
  }
  return kProgramFault;
}

/// A whole number from 1 to 1024, and nothing else.
std::string fault_of_threads(const std::string& text) {
  constexpr unsigned kMost = 1024;
  unsigned threads = 0;
  const char* const end = text.data() + text.size();
  const auto [stop, fault] = std::from_chars(text.data(), end, threads);
  if (fault == std::errc{} && stop == end && threads >= 1 && threads <= kMost) return {};
  return fmt::format("\"{}\" is not a whole number from 1 to {}", text, kMost);
}

void add_common_options(CLI::App& app, CommonOptions& common, const Command& command) {
  constexpr const char* kGroup = "Options of every command";
  app.add_flag("--json", common.json, "one JSON document on standard output instead of the table")
      ->group(kGroup);
  app.add_option("--out", common.out, command.out_help())->type_name("FILE")->group(kGroup);
  app.add_flag("--replace", common.replace, "let --out overwrite a file that exists")->group(kGroup);
  app.add_option("--threads", common.threads,
                 "threads to work with; default: every processor the program may use;\n"
                 "the results are the same for any number")
      ->type_name("N")
      ->check(CLI::Validator(fault_of_threads, ""))
      ->group(kGroup);
  app.add_flag("--quiet", common.quiet, "no warnings and no progress on standard error")->group(kGroup);
  app.add_option("--report", common.report, "not available in this version")
      ->type_name("FILE.html")
      ->group(kGroup);
  app.add_option("--ledger", common.ledger, "not available in this version")
      ->type_name("FILE")
      ->group(kGroup);
  app.footer(command.details() + "\n" + help_footer());
}

int run(const std::vector<std::string>& arguments) {
  CommandList commands = all_commands();
  CLI::App app(
      "Builds calibrations from infrared spectra of standards, proves them, and estimates the\n"
      "composition of samples.",
      "bandwright");
  app.require_subcommand(1);
  lay_out_help(app);
  app.footer("bandwright COMMAND --help explains a command.\n\n" + help_footer());
  bool version = false;
  bool version_json = false;
  app.add_flag("--version", version, "name and version; with --json also the libraries");
  app.add_flag("--json", version_json, "with --version: one JSON document");
  bool plan_keys = false;
  app.add_flag("--plan-keys", plan_keys, "every key of a plan file with its default, rule and meaning");

  std::vector<CommonOptions> common(commands.size());
  std::vector<CLI::App*> subcommands;
  for (std::size_t i = 0; i < commands.size(); ++i) {
    CLI::App* const sub = app.add_subcommand(commands[i]->name(), commands[i]->summary());
    sub->group("Commands");
    commands[i]->add_options(*sub);
    add_common_options(*sub, common[i], *commands[i]);
    subcommands.push_back(sub);
  }

  const bool asks_for_text = std::any_of(arguments.begin(), arguments.end(), [](const std::string& argument) {
    return argument == "--version" || argument == "--plan-keys";
  });
  if (asks_for_text) app.require_subcommand(0);
  check_command_word(arguments, commands);
  try {
    std::vector<std::string> reversed(arguments.rbegin(), arguments.rend());
    app.parse(reversed);
  } catch (const CLI::CallForHelp&) {
    print(help_page(app));
    return kDone;
  } catch (const CLI::ParseError& fault) {
    complain(parse_fault_line(app, fault));
    return kUsageFault;
  }
  if (version) {
    print(version_json ? version_document() : version_line());
    return kDone;
  }
  if (plan_keys) {
    print(plan_reference_markdown());
    return kDone;
  }
  check_linear_algebra();
  for (std::size_t i = 0; i < commands.size(); ++i) {
    if (!subcommands[i]->parsed()) continue;
    refuse_what_is_to_come(common[i]);
    return commands[i]->run(common[i]);
  }
  return kUsageFault;
}

}  // namespace
}  // namespace bandwright::cli

int main(int argc, char** argv) {
  using namespace bandwright;
  cli::open_standard_streams();
  std::signal(SIGPIPE, SIG_IGN);  // a closed pipe is an output fault with its own exit status
  try {
    return cli::run(std::vector<std::string>(argv + 1, argv + argc));
  } catch (const Error& error) {
    cli::complain(error.what());
    return cli::status_of(error.kind());
  } catch (const std::bad_alloc&) {
    cli::complain("there is not enough memory for these data");
    return cli::kDataRefused;
  } catch (const std::exception& fault) {
    cli::complain(std::string("fault of the program: ") + fault.what());
    return cli::kProgramFault;
  }
}
