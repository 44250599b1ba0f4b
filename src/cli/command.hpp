// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <memory>
#include <string>
#include <vector>

namespace CLI {
class App;
}

namespace bandwright::cli {

/// The exit statuses of the program; the table in every help page is made from them.
enum ExitStatus : int {
  kDone = 0,
  kUnfavourable = 1,
  kUsageFault = 2,
  kDataRefused = 3,
  kOutputFault = 4,
  kProgramFault = 70,
};

/// Options that every command takes.
struct CommonOptions {
  bool json = false;
  bool quiet = false;
  bool replace = false;  ///< overwrite existing outputs
  unsigned threads = 0;  ///< 0 = as many as the process may use
  std::string out;
  std::string report;
  std::string ledger;
};

/// One command: `add_options` declares its arguments and opens no file; `run` does the work and returns
/// the exit status. To add a command: a file with a function that makes it, and a line in registry.cpp.
class Command {
 public:
  Command() = default;
  virtual ~Command() = default;
  Command(const Command&) = delete;
  Command& operator=(const Command&) = delete;
  Command(Command&&) = delete;
  Command& operator=(Command&&) = delete;

  [[nodiscard]] virtual std::string name() const = 0;
  [[nodiscard]] virtual std::string summary() const = 0;
  /// What --out holds, for its help.
  [[nodiscard]] virtual std::string out_help() const = 0;
  /// What the command does with its arguments and prints: paragraphs of its help page, each with a newline.
  [[nodiscard]] virtual std::string details() const = 0;
  virtual void add_options(CLI::App& app) = 0;
  [[nodiscard]] virtual int run(const CommonOptions& common) = 0;
};

using CommandList = std::vector<std::unique_ptr<Command>>;

/// All commands, in the order of the help page.
[[nodiscard]] CommandList all_commands();

/// Names of commands of the interface that this version does not have yet.
[[nodiscard]] const std::vector<std::string>& commands_to_come();

[[nodiscard]] std::unique_ptr<Command> make_calibrate();
[[nodiscard]] std::unique_ptr<Command> make_validate();
[[nodiscard]] std::unique_ptr<Command> make_predict();
[[nodiscard]] std::unique_ptr<Command> make_show();

}  // namespace bandwright::cli
