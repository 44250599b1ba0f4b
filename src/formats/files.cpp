// SPDX-License-Identifier: Apache-2.0
#include "formats/files.hpp"

#include <fcntl.h>
#include <fmt/format.h>
#include <fnmatch.h>
#include <sys/stat.h>
#include <unistd.h>

#include <algorithm>
#include <array>
#include <cerrno>
#include <cstdio>
#include <cstdlib>
#include <filesystem>
#include <memory>
#include <optional>
#include <random>
#include <system_error>
#include <unordered_set>
#include <utility>

#include "base/error.hpp"

namespace bandwright {
namespace {

namespace fs = std::filesystem;

constexpr std::string_view kWildcards = "*?[";

std::string reason_text(int number) { return std::error_code(number, std::generic_category()).message(); }

ErrorContext in_file(const std::string& path, std::string hint = {}) {
  return {.file = path, .line = 0, .field = {}, .hint = std::move(hint)};
}

/// An open file, closed at the end of the scope.
class Descriptor {
 public:
  explicit Descriptor(int number) : number_(number) {}
  ~Descriptor() {
    if (number_ > STDERR_FILENO) ::close(number_);
  }
  Descriptor(const Descriptor&) = delete;
  Descriptor& operator=(const Descriptor&) = delete;
  [[nodiscard]] int number() const { return number_; }
  [[nodiscard]] bool is_open() const { return number_ >= 0; }
  /// Some file systems report a full disk only now.
  [[nodiscard]] bool close() { return ::close(std::exchange(number_, -1)) == 0; }

 private:
  int number_;
};

[[noreturn]] void refuse_size(const std::string& name, std::size_t max_bytes) {
  throw Error(ErrorKind::Input, fmt::format("the file is larger than {} bytes", max_bytes), in_file(name));
}

std::string read_all(const Descriptor& file, const std::string& name, std::size_t expected,
                     std::size_t max_bytes) {
  constexpr std::size_t kChunk = std::size_t{1} << 16U;
  std::string bytes;
  std::size_t filled = 0;
  for (;;) {
    // One byte more than expected shows the end of a file of known size without another round.
    if (filled == bytes.size()) bytes.resize(std::max({filled + filled / 2, expected + 1, filled + kChunk}));
    const ssize_t got = ::read(file.number(), bytes.data() + filled, bytes.size() - filled);
    if (got < 0 && errno == EINTR) continue;
    if (got < 0) throw Error(ErrorKind::Input, "cannot be read: " + reason_text(errno), in_file(name));
    if (got == 0) break;
    filled += static_cast<std::size_t>(got);
    if (filled > max_bytes) refuse_size(name, max_bytes);
  }
  bytes.resize(filled);
  return bytes;
}

/// Directory entries that match one part of a pattern, in byte order.
std::vector<std::string> matching_names(const fs::path& directory, const std::string& part) {
  std::vector<std::string> names;
  std::error_code fault;
  fs::directory_iterator entry(directory.empty() ? fs::path(".") : directory, fault);
  if (fault == std::errc::no_such_file_or_directory || fault == std::errc::not_a_directory) return names;
  for (; !fault && entry != fs::directory_iterator(); entry.increment(fault)) {
    std::string name = entry->path().filename().string();
    if (::fnmatch(part.c_str(), name.c_str(), FNM_PERIOD) == 0) names.push_back(std::move(name));
  }
  if (fault)
    throw Error(ErrorKind::Input, "the directory cannot be read: " + fault.message(),
                in_file(directory.string()));
  std::sort(names.begin(), names.end());
  return names;
}

bool is_file(const fs::path& path) {
  std::error_code fault;
  const fs::file_status status = fs::status(path, fault);
  return !fault && fs::exists(status) && !fs::is_directory(status);
}

std::vector<std::string> expanded(const std::string& pattern, const std::string& base) {
  const fs::path whole = fs::path(base) / pattern;
  if (is_file(whole)) return {whole.string()};
  const fs::path relative(pattern);
  std::vector<fs::path> found = {relative.is_absolute() ? relative.root_path() : fs::path(base)};
  for (const fs::path& step : relative.relative_path()) {
    const std::string part = step.string();
    std::vector<fs::path> longer;
    for (const fs::path& path : found) {
      if (part.find_first_of(kWildcards) == std::string::npos) {
        longer.push_back(path / step);
      } else {
        for (const std::string& name : matching_names(path, part)) longer.push_back(path / name);
      }
    }
    found = std::move(longer);
  }
  std::vector<std::string> files;
  for (const fs::path& path : found)
    if (is_file(path)) files.push_back(path.string());
  std::sort(files.begin(), files.end());
  if (!files.empty()) return files;
  const bool is_pattern = pattern.find_first_of(kWildcards) != std::string::npos;
  throw Error(ErrorKind::Input, is_pattern ? "no file matches this pattern" : "there is no such file",
              in_file(whole.string()));
}

[[noreturn]] void refuse_output(const std::string& path, std::string message, std::string hint = {}) {
  throw Error(ErrorKind::Output, std::move(message), in_file(path, std::move(hint)));
}

[[noreturn]] void refuse_existing(const std::string& path) {
  refuse_output(path, "exists already", "--replace overwrites it");
}

/// A file that is removed again unless it was published under its final name.
class TemporaryFile {
 public:
  /// Created with the permissions the user's umask gives. The name is short, so that a long target
  /// name does not make it too long.
  static std::unique_ptr<TemporaryFile> create(const fs::path& directory, const std::string& target) {
    constexpr int kAttempts = 100;
    constexpr mode_t kMode = 0666;
    std::random_device random;
    for (int attempt = 0; attempt < kAttempts; ++attempt) {
      std::string path = (directory / fmt::format(".bandwright-{:08x}.tmp", random())).string();
      const int number = ::open(path.c_str(), O_WRONLY | O_CREAT | O_EXCL | O_CLOEXEC, kMode);
      if (number >= 0) return std::unique_ptr<TemporaryFile>(new TemporaryFile(std::move(path), number));
      if (errno != EEXIST) refuse_output(target, "cannot be written: " + reason_text(errno));
    }
    refuse_output(target, "cannot be written: no free name for a temporary file");
  }
  ~TemporaryFile() {
    if (!published_) ::unlink(path_.c_str());
  }
  TemporaryFile(const TemporaryFile&) = delete;
  TemporaryFile& operator=(const TemporaryFile&) = delete;

  void write(std::string_view bytes, std::optional<mode_t> mode, const std::string& target) {
    while (!bytes.empty()) {
      const ssize_t put = ::write(file_.number(), bytes.data(), bytes.size());
      if (put < 0 && errno == EINTR) continue;
      if (put < 0) refuse_output(target, "cannot be written: " + reason_text(errno));
      bytes.remove_prefix(static_cast<std::size_t>(put));
    }
    if (mode && ::fchmod(file_.number(), *mode) != 0)
      refuse_output(target, "its permissions cannot be kept: " + reason_text(errno));
    if (::fsync(file_.number()) != 0 || !file_.close())
      refuse_output(target, "cannot be written: " + reason_text(errno));
  }

  void publish(const std::string& target, Existing existing) {
    if (existing == Existing::Replace) {
      if (std::rename(path_.c_str(), target.c_str()) != 0)
        refuse_output(target, "cannot be written: " + reason_text(errno));
      published_ = true;
      return;
    }
    if (::renameat2(AT_FDCWD, path_.c_str(), AT_FDCWD, target.c_str(), RENAME_NOREPLACE) == 0) {
      published_ = true;
      return;
    }
    // Some file systems know only the older way to give a name that must be free; the temporary
    // name is then removed by the destructor.
    const bool unknown = errno == EINVAL || errno == ENOSYS;
    if (unknown && ::link(path_.c_str(), target.c_str()) == 0) return;
    if (errno == EEXIST) refuse_existing(target);
    refuse_output(target, "cannot be written: " + reason_text(errno));
  }

 private:
  TemporaryFile(std::string path, int number) : path_(std::move(path)), file_(number) {}

  std::string path_;
  Descriptor file_;
  bool published_ = false;
};

/// A name survives a power failure only when its directory is on the disk. Failure is no error:
/// the file is complete, and some file systems cannot do this.
void flush_directory(const fs::path& directory) {
  const Descriptor opened(::open(directory.c_str(), O_RDONLY | O_DIRECTORY | O_CLOEXEC));
  if (opened.is_open()) static_cast<void>(::fsync(opened.number()));
}

}  // namespace

std::string read_text_file(const std::string& path, std::size_t max_bytes) {
  if (path == "-") return read_all(Descriptor(STDIN_FILENO), "standard input", 0, max_bytes);
  const Descriptor file(::open(path.c_str(), O_RDONLY | O_CLOEXEC));
  if (!file.is_open()) throw Error(ErrorKind::Input, "cannot be read: " + reason_text(errno), in_file(path));
  struct stat status {};
  if (::fstat(file.number(), &status) != 0)
    throw Error(ErrorKind::Input, "cannot be read: " + reason_text(errno), in_file(path));
  if (S_ISDIR(status.st_mode))
    throw Error(ErrorKind::Input, "this is a directory, not a file", in_file(path));
  const std::size_t expected = S_ISREG(status.st_mode) ? static_cast<std::size_t>(status.st_size) : 0;
  if (expected > max_bytes) refuse_size(path, max_bytes);
  return read_all(file, path, expected, max_bytes);
}

std::vector<std::string> expand_paths(const std::vector<std::string>& patterns, const std::string& base) {
  std::vector<std::string> files;
  std::unordered_set<std::string> seen;
  for (const std::string& pattern : patterns) {
    const std::vector<std::string> matches = pattern == "-" ? std::vector{pattern} : expanded(pattern, base);
    for (const std::string& file : matches)
      if (seen.insert(file).second) files.push_back(file);
  }
  return files;
}

void write_file_atomically(const std::string& path, std::string_view bytes, Existing existing) {
  std::string target = path;
  std::optional<mode_t> mode;
  struct stat status {};
  const bool exists = ::lstat(path.c_str(), &status) == 0;
  if (exists && ::stat(path.c_str(), &status) == 0) {
    if (S_ISDIR(status.st_mode)) refuse_output(path, "this is a directory, not a file");
    if (!S_ISREG(status.st_mode))
      refuse_output(path, "this is no regular file", "- stands for standard output");
    mode = status.st_mode & mode_t{07777};
    std::error_code fault;
    const fs::path real = fs::canonical(path, fault);  // through symbolic links
    if (!fault) target = real.string();
  }
  if (exists && existing == Existing::Keep) refuse_existing(path);
  const fs::path parent = fs::path(target).parent_path();
  const fs::path directory = parent.empty() ? fs::path(".") : parent;
  const auto temporary = TemporaryFile::create(directory, path);
  temporary->write(bytes, mode, path);
  temporary->publish(target, existing);
  flush_directory(directory);
}

}  // namespace bandwright
