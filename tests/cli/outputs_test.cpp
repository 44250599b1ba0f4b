// SPDX-License-Identifier: Apache-2.0
// Files appear whole or not at all, and nothing out of a foreign file steers a terminal.
#include <gmock/gmock.h>
#include <gtest/gtest.h>
#include <signal.h>
#include <sys/wait.h>

#include <chrono>
#include <thread>

#include "cli/program.hpp"

namespace bandwright::cli_tests {
namespace {

using ::testing::HasSubstr;
using ::testing::Not;

class Outputs : public ::testing::Test {
 protected:
  void SetUp() override { scratch.add_tiny(); }
  Scratch scratch;
};

TEST_F(Outputs, ReplaceReplaces) {
  scratch.write("model.json", "old\n");
  ASSERT_EQ(run(scratch, {"calibrate", "plan.toml", "--out", "model.json", "--replace"}).status, 0);
  EXPECT_THAT(scratch.read("model.json"), HasSubstr("\"content_sha256\""));
}

TEST_F(Outputs, ASymbolicLinkStaysALink) {
  std::filesystem::create_directory(scratch / "store");
  scratch.write("store/model.json", "old\n");
  std::filesystem::create_symlink("store/model.json", scratch / "link.json");
  ASSERT_EQ(run(scratch, {"calibrate", "plan.toml", "--out", "link.json", "--replace"}).status, 0);
  EXPECT_TRUE(std::filesystem::is_symlink(scratch / "link.json"));
  EXPECT_THAT(scratch.read("store/model.json"), HasSubstr("\"content_sha256\""));
}

TEST_F(Outputs, ARefusedRunLeavesTheOldFile) {
  scratch.write("model.json", "old\n");
  scratch.write("standards.csv", "sample,acid,water\nS01,x,1\n");
  EXPECT_EQ(run(scratch, {"calibrate", "plan.toml", "--out", "model.json", "--replace"}).status, 3);
  EXPECT_EQ(scratch.read("model.json"), "old\n");
}

/// Ended by a signal when a thousand bytes of the model are written: the old file still stands whole, and
/// the temporary file that stays behind does not disturb the next run.
TEST_F(Outputs, ARunEndedInTheMiddleOfWritingLeavesTheOldFile) {
  const std::vector<std::string> calibrate{"calibrate",  "plan.toml", "--out",
                                           "model.json", "--replace", "--quiet"};
  scratch.write("model.json", "old\n");
  const std::vector<std::string> before = scratch.names();
  const Outcome ended = run(scratch, calibrate, {.largest_file = 1000});
  EXPECT_EQ(ended.status, 128 + SIGXFSZ);
  EXPECT_EQ(scratch.read("model.json"), "old\n");
  EXPECT_EQ(scratch.names().size(), before.size() + 1) << "the run was ended before it wrote";
  EXPECT_EQ(run(scratch, calibrate).status, 0);
  EXPECT_THAT(scratch.read("model.json"), ::testing::EndsWith("\"\n}\n"));
}

TEST_F(Outputs, ADiskThatFillsUpLeavesTheOldFileAndNothingElse) {
  scratch.write("model.json", "old\n");
  const std::vector<std::string> before = scratch.names();
  const Outcome got = run(scratch, {"calibrate", "plan.toml", "--out", "model.json", "--replace", "--quiet"},
                          {.largest_file = 1000, .ignore_size_signal = true});
  EXPECT_EQ(got.status, 4);
  EXPECT_EQ(got.out, "");
  EXPECT_EQ(got.err, "bandwright: model.json: cannot be written: File too large\n");
  EXPECT_EQ(scratch.read("model.json"), "old\n");
  EXPECT_EQ(scratch.names(), before);
}

/// Killed at moments spread over a whole run: the file is the old one or the new one.
TEST_F(Outputs, AKilledRunLeavesTheOldFileOrTheNewOne) {
  const std::vector<std::string> calibrate{"calibrate",  "plan.toml", "--out",
                                           "model.json", "--replace", "--quiet"};
  const auto began = std::chrono::steady_clock::now();
  ASSERT_EQ(run(scratch, calibrate).status, 0);
  const auto whole_run = std::chrono::steady_clock::now() - began;
  const std::string new_bytes = scratch.read("model.json");
  const std::string old_bytes = "the old file\n";
  constexpr int kKills = 40;
  for (int i = 0; i < kKills; ++i) {
    scratch.write("model.json", old_bytes);
    const pid_t child = start(scratch, calibrate);
    std::this_thread::sleep_for(whole_run * i / (kKills - 5));
    ::kill(child, SIGKILL);
    ::waitpid(child, nullptr, 0);
    const std::string found = scratch.read("model.json");
    EXPECT_TRUE(found == old_bytes || found == new_bytes)
        << "killed at step " << i << ", " << found.size() << " bytes";
  }
  // Whatever temporary files the killed runs left do not disturb the next one.
  scratch.write(".bandwright-00000000.tmp", "left behind");
  EXPECT_EQ(run(scratch, calibrate).status, 0);
  EXPECT_EQ(scratch.read("model.json"), new_bytes);
  EXPECT_EQ(scratch.read(".bandwright-00000000.tmp"), "left behind");
}

/// Ids may hold U+009B, which some terminals take for the start of a command, and DEL.
TEST_F(Outputs, IdsCannotSteerATerminal) {
  if (!has_pseudo_terminals()) GTEST_SKIP() << "no pseudo-terminal here";
  ASSERT_EQ(run(scratch, {"calibrate", "plan.toml", "--out", "model.json", "--quiet"}).status, 0);
  const std::string id =
      "e\xC2\x9B"
      "31mdge";
  scratch.write("steer.csv", replaced(scratch.read("new_spectra.csv"), "edge,", id + ","));
  for (const std::string format : {"", "--json", "--csv"}) {
    std::vector<std::string> arguments{"predict", "model.json", "steer.csv"};
    if (!format.empty()) arguments.push_back(format);
    const Outcome seen = run(scratch, arguments, {.out = Output::Terminal});
    EXPECT_THAT(seen.out, Not(HasSubstr("\xC2\x9B"))) << format;
    EXPECT_THAT(seen.out, HasSubstr("31mdge")) << format;
    const Outcome piped = run(scratch, arguments);
    EXPECT_EQ(piped.status, seen.status);
    if (!format.empty()) {
      EXPECT_THAT(piped.out, HasSubstr(id)) << format << ": a file gets the id as it is";
    }
  }
}

TEST_F(Outputs, MessagesOnATerminalComeOneALine) {
  if (!has_pseudo_terminals()) GTEST_SKIP() << "no pseudo-terminal here";
  const Outcome got = run(scratch, {"calibrate", "plan.toml", "--out", "model.json"},
                          {.environment = {{"TERM", "dumb"}}, .err = Output::Terminal});
  EXPECT_EQ(got.status, 0);
  EXPECT_EQ(got.err.find('\033'), std::string::npos);
  EXPECT_THAT(got.err, ::testing::StartsWith("warning: not used: 1 spectrum without a row"));
}

}  // namespace
}  // namespace bandwright::cli_tests
