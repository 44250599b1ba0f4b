// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <filesystem>
#include <string>
#include <utility>
#include <vector>

/// The real program, run without a shell in a directory of its own.

namespace bandwright::cli_tests {

/// Where standard output goes.
enum class Output { Captured, Closed, FullDisk, Terminal };

struct RunOptions {
  std::string input = {};                                             ///< standard input
  std::vector<std::pair<std::string, std::string>> environment = {};  ///< added to the test's own
  Output out = Output::Captured;
  Output err = Output::Captured;
  bool without_override = false;  ///< file permissions hold even for root
  /// 0 = none; writing more than this many bytes to a file ends the program by a signal, or fails with
  /// an error if that signal is ignored.
  std::size_t largest_file = 0;
  bool ignore_size_signal = false;
};

struct Outcome {
  int status = -1;  ///< exit status; 128 + signal when a signal ended it
  std::string out;
  std::string err;
};

/// A new directory below the system's temporary one, removed at the end.
class Scratch {
 public:
  Scratch();
  ~Scratch();
  Scratch(const Scratch&) = delete;
  Scratch& operator=(const Scratch&) = delete;

  [[nodiscard]] const std::filesystem::path& path() const { return path_; }
  [[nodiscard]] std::filesystem::path operator/(const std::string& name) const { return path_ / name; }
  void write(const std::string& name, const std::string& bytes) const;
  [[nodiscard]] std::string read(const std::string& name) const;
  [[nodiscard]] bool has(const std::string& name) const;
  /// Names of all entries, sorted.
  [[nodiscard]] std::vector<std::string> names() const;
  /// Copies the files of tests/cli/data/tiny, or of the meats demonstration.
  void add_tiny() const;
  void add_meats() const;

 private:
  std::filesystem::path path_;
};

/// Runs `bandwright arguments...` with `scratch` as the working directory.
[[nodiscard]] Outcome run(const Scratch& scratch, const std::vector<std::string>& arguments,
                          const RunOptions& options = {});

/// Can Output::Terminal be had here? Some containers have none.
[[nodiscard]] bool has_pseudo_terminals();

/// Starts the program without waiting; returns its process id. Its output is thrown away.
[[nodiscard]] int start(const Scratch& scratch, const std::vector<std::string>& arguments);

/// `text` with every `from` replaced.
[[nodiscard]] std::string replaced(std::string text, const std::string& from, const std::string& to);

}  // namespace bandwright::cli_tests
