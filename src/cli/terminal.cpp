// SPDX-License-Identifier: Apache-2.0
#include "cli/terminal.hpp"

#include <fcntl.h>
#include <fmt/format.h>
#include <sys/ioctl.h>
#include <unistd.h>

#include <algorithm>
#include <cerrno>
#include <cstdio>
#include <cstdlib>
#include <cstring>

namespace bandwright::cli {
namespace {

constexpr std::chrono::milliseconds kRedrawPause{100};

bool is_smart_terminal(int descriptor) {
  const char* const term = std::getenv("TERM");
  return isatty(descriptor) == 1 && term != nullptr && std::strcmp(term, "dumb") != 0;
}

std::size_t terminal_width() {
  constexpr std::size_t kUsual = 80;
  winsize size{};
  if (ioctl(STDERR_FILENO, TIOCGWINSZ, &size) == 0 && size.ws_col > 0) return size.ws_col;
  return kUsual;
}

/// Standard error is not worth failing for: what cannot be written there is lost.
void put_on_standard_error(const std::string& text) noexcept {
  static_cast<void>(std::fputs(text.c_str(), stderr));
  static_cast<void>(std::fflush(stderr));
}

}  // namespace

void open_standard_streams() {
  for (const int descriptor : {STDIN_FILENO, STDOUT_FILENO, STDERR_FILENO}) {
    if (::fcntl(descriptor, F_GETFD) != -1) continue;
    // The lowest free number is taken, and the ones below are open by now.
    static_cast<void>(::open("/dev/null", descriptor == STDERR_FILENO ? O_WRONLY : O_RDONLY));
  }
}

void complain(std::string_view line) noexcept {
  try {
    put_on_standard_error(fmt::format("bandwright: {}\n", printable(line)));
  } catch (const std::exception&) {
    put_on_standard_error("bandwright: out of memory\n");
  }
}

Messages::Messages(bool quiet) : quiet_(quiet), bar_allowed_(!quiet && is_smart_terminal(STDERR_FILENO)) {}

Messages::~Messages() { clear_progress(); }

void Messages::warn(const Warning& warning) {
  if (quiet_) return;
  clear_progress();
  put_on_standard_error(fmt::format("warning: {}\n", warning.one_line()));
}

void Messages::warn(const std::vector<Warning>& warnings) {
  for (const Warning& warning : warnings) warn(warning);
}

void Messages::progress(std::string_view what, std::size_t done, std::size_t total) {
  if (!bar_allowed_ || total == 0) return;
  const std::lock_guard guard(mutex_);
  const auto now = std::chrono::steady_clock::now();
  if (now - last_drawn_ < kRedrawPause) return;
  last_drawn_ = now;
  const std::string label = fmt::format("{} {}/{} ", printable(what), done, total);
  const std::size_t room = terminal_width() > label.size() + 4 ? terminal_width() - label.size() - 4 : 0;
  const std::size_t bar = std::min<std::size_t>(room, 40);
  const std::size_t filled = bar * done / total;
  put_on_standard_error(fmt::format("\r\033[K{}{:=<{}}{: <{}}", label, "", filled, "", bar - filled));
  bar_shown_ = true;
}

void Messages::clear_progress() {
  const std::lock_guard guard(mutex_);
  if (!bar_shown_) return;
  put_on_standard_error("\r\033[K");
  bar_shown_ = false;
}

std::string safe_for_terminal(std::string_view text) {
  std::string safe;
  safe.reserve(text.size());
  while (!text.empty()) {
    const std::size_t kept = text.find_first_of("\n\t");
    safe += printable(text.substr(0, kept));
    if (kept == std::string_view::npos) break;
    safe += text[kept];
    text.remove_prefix(kept + 1);
  }
  return safe;
}

void print(std::string_view text) {
  const std::string safe = isatty(STDOUT_FILENO) == 1 ? safe_for_terminal(text) : std::string{};
  if (!safe.empty()) text = safe;
  const bool written =
      std::fwrite(text.data(), 1, text.size(), stdout) == text.size() && std::fflush(stdout) == 0;
  if (!written)
    throw Error(ErrorKind::Output,
                fmt::format("standard output cannot be written: {}", std::strerror(errno)));
}

}  // namespace bandwright::cli
