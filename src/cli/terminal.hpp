// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <chrono>
#include <cstddef>
#include <mutex>
#include <string>
#include <string_view>
#include <vector>

#include "base/error.hpp"

namespace bandwright::cli {

/// First thing in the program: a standard stream that the caller closed is opened on /dev/null, so that no
/// file of ours takes its number. Standard output is opened for reading only: writing to it then fails,
/// as it must, instead of losing results quietly.
void open_standard_streams();

/// One line on standard error, made printable. Whether anybody can read it changes nothing.
void complain(std::string_view line) noexcept;

/// Standard error: warnings and progress, one line each. A progress bar only on a terminal.
class Messages {
 public:
  explicit Messages(bool quiet);
  ~Messages();
  Messages(const Messages&) = delete;
  Messages& operator=(const Messages&) = delete;
  Messages(Messages&&) = delete;
  Messages& operator=(Messages&&) = delete;

  void warn(const Warning& warning);
  void warn(const std::vector<Warning>& warnings);
  /// May be called from any thread; redraws at most ten times a second.
  void progress(std::string_view what, std::size_t done, std::size_t total);
  void clear_progress();

 private:
  std::mutex mutex_;
  bool quiet_;
  bool bar_allowed_;
  bool bar_shown_ = false;
  std::chrono::steady_clock::time_point last_drawn_;
};

/// The text with everything but line ends and tabs that could steer a terminal written as escapes.
[[nodiscard]] std::string safe_for_terminal(std::string_view text);

/// Writes the whole text to standard output: as it is to files and pipes, safe_for_terminal() to a
/// terminal. Throws Error(Output) if it cannot be delivered.
void print(std::string_view text);

}  // namespace bandwright::cli
