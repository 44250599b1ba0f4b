// SPDX-License-Identifier: Apache-2.0
#include "cli/program.hpp"

#include <fcntl.h>
#include <linux/capability.h>
#include <signal.h>
#include <stdlib.h>
#include <sys/prctl.h>
#include <sys/resource.h>
#include <sys/wait.h>
#include <unistd.h>

#include <algorithm>
#include <array>
#include <cstdlib>
#include <fstream>
#include <iterator>
#include <optional>
#include <stdexcept>

extern "C" char** environ;

namespace bandwright::cli_tests {
namespace {

namespace fs = std::filesystem;

std::string bytes_of(const fs::path& path) {
  std::ifstream in(path, std::ios::binary);
  if (!in) throw std::runtime_error("cannot read " + path.string());
  return {std::istreambuf_iterator<char>(in), std::istreambuf_iterator<char>()};
}

void write_bytes(const fs::path& path, const std::string& bytes) {
  std::ofstream out(path, std::ios::binary);
  out << bytes;
  if (!out.flush()) throw std::runtime_error("cannot write " + path.string());
}

/// A pseudo-terminal; the master side is read until the program is gone.
class Terminal {
 public:
  Terminal() : master_(::posix_openpt(O_RDWR | O_NOCTTY | O_CLOEXEC)) {
    std::array<char, 128> name{};
    if (master_ < 0 || ::grantpt(master_) != 0 || ::unlockpt(master_) != 0 ||
        ::ptsname_r(master_, name.data(), name.size()) != 0)
      throw std::runtime_error("no pseudo-terminal");
    slave_ = ::open(name.data(), O_RDWR | O_NOCTTY | O_CLOEXEC);
  }
  ~Terminal() {
    hang_up();
    ::close(master_);
  }
  Terminal(const Terminal&) = delete;
  Terminal& operator=(const Terminal&) = delete;
  [[nodiscard]] int slave() const { return slave_; }
  void hang_up() {
    if (slave_ >= 0) ::close(slave_);
    slave_ = -1;
  }
  [[nodiscard]] std::string read_to_end() const {
    std::string text;
    std::array<char, 4096> chunk{};
    for (ssize_t got = 0; (got = ::read(master_, chunk.data(), chunk.size())) > 0;)
      text.append(chunk.data(), static_cast<std::size_t>(got));
    return text;
  }

 private:
  int master_;
  int slave_ = -1;
};

/// In the child: the stream as the test wants it.
void set_stream(int descriptor, Output output, const char* file, int terminal) {
  ::close(descriptor);
  if (output == Output::Closed) return;
  if (output == Output::Terminal) {
    ::dup2(terminal, descriptor);
    return;
  }
  const char* const path = output == Output::FullDisk ? "/dev/full" : file;
  const int opened = ::open(path, O_WRONLY | O_CREAT | O_TRUNC, 0600);
  if (opened != descriptor) {
    ::dup2(opened, descriptor);
    ::close(opened);
  }
}

struct CommandLine {
  std::vector<std::string> words;
  std::vector<std::string> environment;
  std::vector<char*> argv;
  std::vector<char*> envp;
};

CommandLine command_line(const std::vector<std::string>& arguments, const RunOptions& options) {
  CommandLine line;
  line.words.emplace_back(BANDWRIGHT_PROGRAM);
  line.words.insert(line.words.end(), arguments.begin(), arguments.end());
  for (char** entry = environ; *entry != nullptr; ++entry) line.environment.emplace_back(*entry);
  for (const auto& [name, value] : options.environment) {
    std::erase_if(line.environment, [&](const std::string& entry) {
      return entry.starts_with(name) && entry[name.size()] == '=';
    });
    line.environment.push_back(name);
    line.environment.back().append("=").append(value);
  }
  for (std::string& word : line.words) line.argv.push_back(word.data());
  for (std::string& entry : line.environment) line.envp.push_back(entry.data());
  line.argv.push_back(nullptr);
  line.envp.push_back(nullptr);
  return line;
}

int status_from(int wait_status) {
  return WIFEXITED(wait_status) ? WEXITSTATUS(wait_status) : 128 + WTERMSIG(wait_status);
}

}  // namespace

Scratch::Scratch() {
  std::string pattern = (fs::temp_directory_path() / "bandwright-cli-XXXXXX").string();
  if (::mkdtemp(pattern.data()) == nullptr) throw std::runtime_error("no scratch directory");
  path_ = pattern;
}

Scratch::~Scratch() {
  std::error_code ignored;
  fs::remove_all(path_, ignored);
}

void Scratch::write(const std::string& name, const std::string& bytes) const {
  write_bytes(path_ / name, bytes);
}
std::string Scratch::read(const std::string& name) const { return bytes_of(path_ / name); }
bool Scratch::has(const std::string& name) const { return fs::exists(path_ / name); }

std::vector<std::string> Scratch::names() const {
  std::vector<std::string> found;
  for (const auto& entry : fs::directory_iterator(path_)) found.push_back(entry.path().filename().string());
  std::sort(found.begin(), found.end());
  return found;
}

void Scratch::add_tiny() const { fs::copy(fs::path(BANDWRIGHT_CLI_TESTS) / "data" / "tiny", path_); }
void Scratch::add_meats() const { fs::copy(BANDWRIGHT_MEATS, path_); }

Outcome run(const Scratch& scratch, const std::vector<std::string>& arguments, const RunOptions& options) {
  const Scratch streams;
  const std::string out_file = (streams / "out").string();
  const std::string err_file = (streams / "err").string();
  const std::string in_file = (streams / "in").string();
  streams.write("in", options.input);
  CommandLine line = command_line(arguments, options);
  const bool on_terminal = options.out == Output::Terminal || options.err == Output::Terminal;
  std::optional<Terminal> terminal;
  if (on_terminal) terminal.emplace();
  const int slave = terminal ? terminal->slave() : -1;
  const pid_t child = ::fork();
  if (child < 0) throw std::runtime_error("cannot fork");
  if (child == 0) {
    const int in = ::open(in_file.c_str(), O_RDONLY);
    ::dup2(in, STDIN_FILENO);
    ::close(in);
    set_stream(STDERR_FILENO, options.err, err_file.c_str(), slave);
    set_stream(STDOUT_FILENO, options.out, out_file.c_str(), slave);
    if (options.largest_file > 0) {
      const rlimit limit{options.largest_file, options.largest_file};
      ::setrlimit(RLIMIT_FSIZE, &limit);
      if (options.ignore_size_signal) ::signal(SIGXFSZ, SIG_IGN);
    }
    if (options.without_override) ::prctl(PR_CAPBSET_DROP, CAP_DAC_OVERRIDE);
    if (::chdir(scratch.path().c_str()) == 0) ::execve(line.argv[0], line.argv.data(), line.envp.data());
    ::_exit(127);
  }
  if (terminal) terminal->hang_up();
  Outcome result;
  const std::string seen = terminal ? terminal->read_to_end() : std::string{};
  int wait_status = 0;
  ::waitpid(child, &wait_status, 0);
  result.status = status_from(wait_status);
  if (options.out == Output::Captured) result.out = streams.read("out");
  if (options.out == Output::Terminal) result.out = seen;
  if (options.err == Output::Captured) result.err = streams.read("err");
  if (options.err == Output::Terminal) result.err = seen;
  return result;
}

bool has_pseudo_terminals() {
  const int master = ::posix_openpt(O_RDWR | O_NOCTTY | O_CLOEXEC);
  if (master < 0) return false;
  const bool usable = ::grantpt(master) == 0 && ::unlockpt(master) == 0;
  ::close(master);
  return usable;
}

int start(const Scratch& scratch, const std::vector<std::string>& arguments) {
  CommandLine line = command_line(arguments, {});
  const pid_t child = ::fork();
  if (child < 0) throw std::runtime_error("cannot fork");
  if (child == 0) {
    set_stream(STDERR_FILENO, Output::Captured, "/dev/null", -1);
    set_stream(STDOUT_FILENO, Output::Captured, "/dev/null", -1);
    if (::chdir(scratch.path().c_str()) == 0) ::execve(line.argv[0], line.argv.data(), line.envp.data());
    ::_exit(127);
  }
  return child;
}

std::string replaced(std::string text, const std::string& from, const std::string& to) {
  for (std::size_t at = 0; (at = text.find(from, at)) != std::string::npos; at += to.size())
    text.replace(at, from.size(), to);
  return text;
}

}  // namespace bandwright::cli_tests
