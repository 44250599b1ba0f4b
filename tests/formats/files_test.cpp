// SPDX-License-Identifier: Apache-2.0
#include "formats/files.hpp"

#include <gtest/gtest.h>
#include <sys/resource.h>
#include <sys/stat.h>
#include <unistd.h>

#include <algorithm>
#include <csignal>
#include <filesystem>
#include <fstream>
#include <string>
#include <thread>
#include <vector>

#include "formats/refusal.hpp"

namespace bandwright {
namespace {

namespace fs = std::filesystem;

constexpr std::size_t kEnough = 1 << 20;

/// An empty directory of its own for each test.
class Files : public ::testing::Test {
 protected:
  void SetUp() override {
    std::string pattern = (fs::temp_directory_path() / "bandwright_files_XXXXXX").string();
    ASSERT_NE(::mkdtemp(pattern.data()), nullptr);
    directory_ = pattern;
  }
  void TearDown() override { fs::remove_all(directory_); }

  [[nodiscard]] std::string path(const std::string& name) const { return (directory_ / name).string(); }
  void put(const std::string& name, const std::string& bytes) const {
    fs::create_directories((directory_ / name).parent_path());
    std::ofstream(directory_ / name, std::ios::binary) << bytes;
  }
  [[nodiscard]] std::string get(const std::string& name) const { return read_text_file(path(name), kEnough); }
  [[nodiscard]] std::vector<std::string> names() const {
    std::vector<std::string> found;
    for (const auto& entry : fs::directory_iterator(directory_))
      found.push_back(entry.path().filename().string());
    std::sort(found.begin(), found.end());
    return found;
  }
  [[nodiscard]] std::vector<std::string> expand(const std::vector<std::string>& patterns) const {
    std::vector<std::string> relative;
    for (const std::string& file : expand_paths(patterns, directory_.string()))
      relative.push_back(fs::path(file).lexically_relative(directory_).string());
    return relative;
  }

  fs::path directory_;
};

using Names = std::vector<std::string>;

TEST_F(Files, ReadsEveryByte) {
  const std::string bytes("a\0b\r\n\xFF", 6);
  put("x", bytes);
  EXPECT_EQ(get("x"), bytes);
  put("empty", "");
  EXPECT_EQ(get("empty"), "");
  const std::string large(300'000, 'x');
  put("large", large);
  EXPECT_EQ(get("large"), large);
  EXPECT_EQ(read_text_file(path("large"), large.size()), large);
}

TEST_F(Files, ReadsPipes) {
  ASSERT_EQ(::mkfifo(path("pipe").c_str(), 0600), 0);
  const std::string large(200'000, 'x');
  std::jthread writer([&] { std::ofstream(path("pipe")) << large; });
  EXPECT_EQ(read_text_file(path("pipe"), kEnough), large);
}

TEST_F(Files, RefusesToReadWithOneClearLine) {
  const auto refusal_of = [](const std::string& file, std::size_t most) {
    return refusal([&] { static_cast<void>(read_text_file(file, most)); });
  };
  EXPECT_EQ(refusal_of(path("none"), 10), path("none") + ": cannot be read: No such file or directory");
  EXPECT_EQ(refusal_of(directory_.string(), 10), directory_.string() + ": this is a directory, not a file");
  put("x", "12345678901");
  EXPECT_EQ(refusal_of(path("x"), 10), path("x") + ": the file is larger than 10 bytes");
  EXPECT_EQ(refusal_of("/dev/zero", 10),
            "/dev/zero: the file is larger than 10 bytes");  // no size beforehand
  EXPECT_EQ(refusal_of(path("x") + "/y", 10), path("x") + "/y: cannot be read: Not a directory");
}

TEST_F(Files, PatternsExpandInByteOrder) {
  for (const char* name : {"S10.dx", "S2.dx", "s1.dx", "S1.csv", ".hidden.dx", "a/x.dx", "b/x.dx", "b/y.dx"})
    put(name, "");
  EXPECT_EQ(expand({"*.dx"}), (Names{"S10.dx", "S2.dx", "s1.dx"}));
  EXPECT_EQ(expand({"S?.*"}), (Names{"S1.csv", "S2.dx"}));
  EXPECT_EQ(expand({"[sS]1.*"}), (Names{"S1.csv", "s1.dx"}));
  EXPECT_EQ(expand({"*/x.dx"}), (Names{"a/x.dx", "b/x.dx"}));
  EXPECT_EQ(expand({"b/*", "*/x.dx"}),
            (Names{"b/x.dx", "b/y.dx", "a/x.dx"}));                         // each once, patterns in order
  EXPECT_EQ(expand({"*"}), (Names{"S1.csv", "S10.dx", "S2.dx", "s1.dx"}));  // no directories
  EXPECT_EQ(expand({".*.dx"}), (Names{".hidden.dx"}));
  EXPECT_EQ(expand({path("a") + "/*.dx"}), (Names{"a/x.dx"}));
  EXPECT_EQ(expand({"a/../S2.dx"}), (Names{"a/../S2.dx"}));
  EXPECT_EQ(expand_paths({"-"}, "/nowhere"), Names{"-"});
}

TEST_F(Files, NamesOfFilesAreTakenLiterally) {
  put("[1].csv", "");
  put("1.csv", "");
  put("odd [dir]*/x.csv", "");
  EXPECT_EQ(expand({"[1].csv"}), (Names{"[1].csv"}));
  EXPECT_EQ(expand_paths({"*.csv"}, path("odd [dir]*")), (Names{path("odd [dir]*") + "/x.csv"}));
}

TEST_F(Files, APatternThatMatchesNothingIsNamed) {
  put("a.csv", "");
  const auto refusal_of = [&](const Names& patterns) {
    return refusal([&] { static_cast<void>(expand(patterns)); });
  };
  EXPECT_EQ(refusal_of({"a.csv", "*.dx"}), path("*.dx") + ": no file matches this pattern");
  EXPECT_EQ(refusal_of({"none/*.dx"}), path("none/*.dx") + ": no file matches this pattern");
  EXPECT_EQ(refusal_of({"a.csv/*"}), path("a.csv/*") + ": no file matches this pattern");
  EXPECT_EQ(refusal_of({"b.csv"}), path("b.csv") + ": there is no such file");
}

TEST_F(Files, WritesNewFilesWithTheUsersPermissions) {
  const mode_t before = ::umask(027);
  write_file_atomically(path("new"), "bytes\n", Existing::Keep);
  ::umask(before);
  EXPECT_EQ(get("new"), "bytes\n");
  EXPECT_EQ(fs::status(path("new")).permissions(), fs::perms{0640});
  EXPECT_EQ(names(), Names{"new"});
}

TEST_F(Files, RelativeAndLongNamesWork) {
  const std::string longest(255, 'n');
  write_file_atomically(path(longest), "x", Existing::Keep);
  EXPECT_EQ(get(longest), "x");
  const fs::path before = fs::current_path();
  fs::current_path(directory_);
  write_file_atomically("plain", "y", Existing::Keep);
  fs::current_path(before);
  EXPECT_EQ(get("plain"), "y");
}

TEST_F(Files, ReplacesOnlyWhenAsked) {
  put("x", "old");
  EXPECT_EQ(refusal([&] { write_file_atomically(path("x"), "new", Existing::Keep); }, ErrorKind::Output),
            path("x") + ": exists already (--replace overwrites it)");
  EXPECT_EQ(get("x"), "old");
  fs::permissions(path("x"), fs::perms{0604});
  write_file_atomically(path("x"), "new", Existing::Replace);
  EXPECT_EQ(get("x"), "new");
  EXPECT_EQ(fs::status(path("x")).permissions(), fs::perms{0604});
  EXPECT_EQ(names(), Names{"x"});
}

TEST_F(Files, ALinkStaysALink) {
  put("real", "old");
  fs::create_symlink("real", path("link"));
  write_file_atomically(path("link"), "new", Existing::Replace);
  EXPECT_TRUE(fs::is_symlink(path("link")));
  EXPECT_EQ(get("real"), "new");
  fs::create_symlink("nothing", path("dangling"));
  EXPECT_EQ(
      refusal([&] { write_file_atomically(path("dangling"), "new", Existing::Keep); }, ErrorKind::Output),
      path("dangling") + ": exists already (--replace overwrites it)");
}

TEST_F(Files, RefusesTargetsThatAreNoFiles) {
  fs::create_directory(path("folder"));
  const auto refusal_of = [](const std::string& file) {
    return refusal([&] { write_file_atomically(file, "x", Existing::Replace); }, ErrorKind::Output);
  };
  EXPECT_EQ(refusal_of(path("folder")), path("folder") + ": this is a directory, not a file");
  EXPECT_EQ(refusal_of("/dev/null"), "/dev/null: this is no regular file (- stands for standard output)");
  EXPECT_EQ(refusal_of(path("none/x")), path("none/x") + ": cannot be written: No such file or directory");
  EXPECT_TRUE(fs::is_character_file("/dev/null"));
}

TEST_F(Files, AnUnwritableDirectoryIsRefused) {
  if (::geteuid() == 0) GTEST_SKIP() << "the superuser writes everywhere";
  fs::permissions(directory_, fs::perms{0500});
  EXPECT_EQ(refusal([&] { write_file_atomically(path("x"), "x", Existing::Keep); }, ErrorKind::Output),
            path("x") + ": cannot be written: Permission denied");
  fs::permissions(directory_, fs::perms{0700});
}

/// A limit on the size of files stands for the full disk: the first write is cut short, the next fails.
TEST_F(Files, AFullDiskLeavesTheOldFileAndNothingElse) {
  put("x", "old");
  rlimit before{};
  ASSERT_EQ(::getrlimit(RLIMIT_FSIZE, &before), 0);
  const auto handler = std::signal(SIGXFSZ, SIG_IGN);
  const rlimit small{4096, before.rlim_max};
  ASSERT_EQ(::setrlimit(RLIMIT_FSIZE, &small), 0);
  const std::string message =
      refusal([&] { write_file_atomically(path("x"), std::string(10'000, 'n'), Existing::Replace); },
              ErrorKind::Output);
  ASSERT_EQ(::setrlimit(RLIMIT_FSIZE, &before), 0);
  std::signal(SIGXFSZ, handler);
  EXPECT_EQ(message, path("x") + ": cannot be written: File too large");
  EXPECT_EQ(get("x"), "old");
  EXPECT_EQ(names(), Names{"x"});
}

/// Of many writers of one new file exactly one wins, and its bytes stand there whole.
TEST_F(Files, OneOfManyWritersWins) {
  constexpr int kWriters = 8;
  std::vector<int> won(kWriters, 0);
  {
    std::vector<std::jthread> writers;
    for (int i = 0; i < kWriters; ++i) {
      writers.emplace_back([&, i] {
        try {
          write_file_atomically(path("x"), std::string(100'000, static_cast<char>('a' + i)), Existing::Keep);
          won[static_cast<std::size_t>(i)] = 1;
        } catch (const Error&) {
        }
      });
    }
  }
  EXPECT_EQ(std::count(won.begin(), won.end(), 1), 1);
  const auto winner = std::find(won.begin(), won.end(), 1) - won.begin();
  EXPECT_EQ(get("x"), std::string(100'000, static_cast<char>('a' + winner)));
  EXPECT_EQ(names(), Names{"x"});
}

}  // namespace
}  // namespace bandwright
