// SPDX-License-Identifier: Apache-2.0
#include "cli/outputs.hpp"

#include <unistd.h>

#include <cerrno>
#include <filesystem>
#include <system_error>

#include "base/error.hpp"
#include "cli/terminal.hpp"
#include "formats/files.hpp"
#include "model/catalogue.hpp"

namespace bandwright::cli {

namespace fs = std::filesystem;

void check_out(const CommonOptions& common) {
  if (common.out == "-" && common.json)
    throw Error(ErrorKind::Usage, "--out - and --json both ask for standard output; give one of them");
  if (common.out.empty() || common.out == "-") return;
  const auto refuse = [&](std::string message, std::string hint) {
    throw Error(ErrorKind::Output, std::move(message),
                {.file = common.out, .line = 0, .field = {}, .hint = std::move(hint)});
  };
  std::error_code ignored;
  if (fs::is_directory(common.out, ignored)) refuse("this is a directory, not a file", {});
  if (!common.replace && fs::exists(common.out, ignored)) refuse("exists already", "--replace overwrites it");
  // Where a symbolic link leads, for that is the place of the file.
  const fs::path parent = fs::weakly_canonical(common.out, ignored).parent_path();
  const fs::path directory = parent.empty() ? fs::path(".") : parent;
  if (!fs::is_directory(directory, ignored)) refuse("cannot be written: its directory does not exist", {});
  if (::access(directory.c_str(), W_OK) != 0)
    refuse("cannot be written: " + std::generic_category().message(errno), {});
}

void deliver(const CommonOptions& common, const std::function<std::string()>& main_result,
             const std::function<std::string()>& on_screen) {
  if (common.out == "-") {
    print(main_result());
    return;
  }
  const std::string screen = on_screen();
  if (!common.out.empty())
    write_file_atomically(common.out, main_result(), common.replace ? Existing::Replace : Existing::Keep);
  try {
    print(screen);
  } catch (const Error& error) {
    if (common.out.empty()) throw;
    throw error.within({.file = {}, .line = 0, .field = {}, .hint = common.out + " was written"});
  }
}

std::string short_digest(const std::string& sha256) {
  constexpr std::size_t kShown = 12;
  return sha256.substr(0, kShown);
}

std::string with_unit(const std::string& value, const std::string& unit) {
  return unit.empty() ? value : value + " " + unit;
}

int decimals_of(const ComponentModel& component) { return component_decimals(component.statistics.rmsecv); }

std::string shown(std::string_view key, double value, int decimals) {
  return bandwright::shown(statistic(key), value, decimals);
}

std::string label(std::string_view key) { return std::string(statistic(key).label); }

std::string_view caution() {
  return "Results support, and do not replace, the reference method, the site's quality system and "
         "qualified\n"
         "people; local codes and chemical-safety rules come first.\n";
}

}  // namespace bandwright::cli
