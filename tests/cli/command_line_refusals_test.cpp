// SPDX-License-Identifier: Apache-2.0
// Refusals of what was typed, and of outputs that cannot be written.
#include "cli/refusals.hpp"

namespace bandwright::cli_tests {
namespace {

class CommandLineRefusals : public Refusals {};

TEST_F(CommandLineRefusals, NoCommand) {
  expect_refused({}, 2, "a command is needed (bandwright --help lists them)");
}

TEST_F(CommandLineRefusals, JsonWithoutACommand) {
  expect_refused({"--json"}, 2, "a command is needed (bandwright --help lists them)");
}

TEST_F(CommandLineRefusals, UnknownCommand) {
  expect_refused({"calibrat", "plan.toml"}, 2,
                 R"(there is no command "calibrat" (did you mean "calibrate"?))");
  expect_refused({"xyzzy"}, 2, R"(there is no command "xyzzy" (bandwright --help lists them))");
}

TEST_F(CommandLineRefusals, CommandsOfALaterVersion) {
  for (const std::string command : {"inspect", "revalidate", "survey", "ledger"})
    expect_refused({command, "plan.toml"}, 2,
                   "the command \"" + command + "\" is not available in this version");
}

TEST_F(CommandLineRefusals, UnknownOption) {
  expect_refused({"predict", "model.json", "new_spectra.csv", "--thread", "1"}, 2,
                 R"(there is no option "--thread" (did you mean "--threads"?))");
  expect_refused({"predict", "model.json", "new_spectra.csv", "--xyzzy"}, 2,
                 R"(there is no option "--xyzzy" (bandwright predict --help lists them))");
  expect_refused({"--xyzzy"}, 2, R"(there is no option "--xyzzy" (bandwright --help lists them))");
}

TEST_F(CommandLineRefusals, OptionsOfALaterVersion) {
  expect_refused({"calibrate", "plan.toml", "--out", "m.json", "--report", "r.html"}, 2,
                 "--report is not available in this version");
  expect_refused({"predict", "model.json", "new_spectra.csv", "--ledger", "l.db"}, 2,
                 "--ledger is not available in this version");
}

TEST_F(CommandLineRefusals, ArgumentTooMany) {
  expect_refused({"show", "model.json", "plan.toml"}, 2,
                 R"(one argument too many: "plan.toml" (bandwright show --help))");
}

TEST_F(CommandLineRefusals, ArgumentsMissing) {
  expect_refused({"calibrate"}, 2, "PLAN is missing (bandwright calibrate --help)");
  expect_refused({"validate"}, 2, "MODEL is missing (bandwright validate --help)");
  expect_refused({"predict"}, 2, "MODEL is missing (bandwright predict --help)");
  expect_refused({"predict", "model.json"}, 2, "SPECTRA is missing (bandwright predict --help)");
  expect_refused({"show"}, 2, "MODEL is missing (bandwright show --help)");
}

TEST_F(CommandLineRefusals, OptionWithoutItsValue) {
  expect_refused({"calibrate", "plan.toml", "--out"}, 2, "--out needs a value (bandwright calibrate --help)");
}

TEST_F(CommandLineRefusals, CalibrateWithoutOut) {
  expect_refused({"calibrate", "plan.toml"}, 2,
                 "--out FILE is missing: the model to write (bandwright calibrate --help)");
}

TEST_F(CommandLineRefusals, Threads) {
  for (const std::string threads : {"0", "-1", "1.5", "abc", "1025", "", " 1"})
    expect_refused({"show", "model.json", "--threads=" + threads}, 2,
                   threads.empty() ? "--threads needs a value (bandwright show --help)"
                                   : "--threads: \"" + threads +
                                         "\" is not a whole number from 1 to 1024 (bandwright show --help)");
}

TEST_F(CommandLineRefusals, FailOnWord) {
  expect_refused({"predict", "model.json", "new_spectra.csv", "--fail-on", "flagged,bad"}, 2,
                 R"(--fail-on: "bad" is none of flagged, outside, too-close (bandwright predict --help))");
}

TEST_F(CommandLineRefusals, OptionsThatExcludeEachOther) {
  expect_refused({"predict", "model.json", "new_spectra.csv", "--csv", "--json"}, 2,
                 "--csv and --json exclude each other");
  expect_refused({"show", "model.json", "--plan", "--json"}, 2, "--plan and --json exclude each other");
  expect_refused({"calibrate", "plan.toml", "--out", "-", "--json"}, 2,
                 "--out - and --json both ask for standard output; give one of them");
}

TEST_F(CommandLineRefusals, HalfAValidationSet) {
  expect_refused({"validate", "model.json", "--spectra", "validation_spectra.csv"}, 2,
                 "--reference is missing: --spectra and --reference go together");
  expect_refused({"validate", "model.json", "--reference", "validation.csv"}, 2,
                 "--spectra is missing: --spectra and --reference go together");
}

TEST_F(CommandLineRefusals, OutThatExists) {
  scratch.write("kept.json", "something of value\n");
  expect_refused({"calibrate", "plan.toml", "--out", "kept.json"}, 4,
                 "kept.json: exists already (--replace overwrites it)");
  expect_refused({"predict", "model.json", "new_spectra.csv", "--out", "kept.json"}, 4,
                 "kept.json: exists already (--replace overwrites it)");
  EXPECT_EQ(scratch.read("kept.json"), "something of value\n");
}

TEST_F(CommandLineRefusals, OutInAMissingDirectory) {
  expect_refused({"calibrate", "plan.toml", "--out", "no/m.json"}, 4,
                 "no/m.json: cannot be written: its directory does not exist");
}

TEST_F(CommandLineRefusals, OutThatIsADirectory) {
  std::filesystem::create_directory(scratch / "folder");
  expect_refused({"calibrate", "plan.toml", "--out", "folder", "--replace"}, 4,
                 "folder: this is a directory, not a file");
}

TEST_F(CommandLineRefusals, OutInAReadOnlyDirectory) {
  const auto folder = scratch / "sealed";
  std::filesystem::create_directory(folder);
  std::filesystem::permissions(folder,
                               std::filesystem::perms::owner_read | std::filesystem::perms::owner_exec);
  const Outcome got =
      run(scratch, {"calibrate", "plan.toml", "--out", "sealed/m.json"}, {.without_override = true});
  EXPECT_EQ(got.status, 4);
  EXPECT_EQ(got.out, "");
  EXPECT_EQ(got.err, "bandwright: sealed/m.json: cannot be written: Permission denied\n");
  std::filesystem::permissions(folder, std::filesystem::perms::owner_all);
  EXPECT_TRUE(std::filesystem::is_empty(folder));
}

TEST_F(CommandLineRefusals, StandardOutputOnAFullDisk) {
  const Outcome got = run(scratch, {"show", "model.json"}, {.out = Output::FullDisk});
  EXPECT_EQ(got.status, 4);
  EXPECT_EQ(got.err, "bandwright: standard output cannot be written: No space left on device\n");
}

TEST_F(CommandLineRefusals, StandardOutputOnAFullDiskAfterTheModelWasWritten) {
  const Outcome got =
      run(scratch, {"calibrate", "plan.toml", "--out", "m.json", "--quiet"}, {.out = Output::FullDisk});
  EXPECT_EQ(got.status, 4);
  EXPECT_EQ(got.err,
            "bandwright: standard output cannot be written: No space left on device (m.json was written)\n");
  EXPECT_EQ(scratch.read("m.json"), scratch.read("model.json"));
}

TEST_F(CommandLineRefusals, StandardOutputClosed) {
  for (const Arguments& arguments :
       {Arguments{"show", "model.json"}, Arguments{"--help"}, Arguments{"--version"}}) {
    const Outcome got = run(scratch, arguments, {.out = Output::Closed});
    EXPECT_EQ(got.status, 4);
    EXPECT_EQ(got.err, "bandwright: standard output cannot be written: Bad file descriptor\n");
  }
}

TEST_F(CommandLineRefusals, StandardErrorThatNobodyHearsChangesNothing) {
  for (const Output err : {Output::Closed, Output::FullDisk}) {
    EXPECT_EQ(run(scratch, {"xyzzy"}, {.err = err}).status, 2);
    const Outcome heard = run(scratch, {"validate", "model.json"});
    const Outcome got = run(scratch, {"validate", "model.json"}, {.err = err});
    EXPECT_EQ(got.status, heard.status);
    EXPECT_EQ(got.out, heard.out);
  }
}

}  // namespace
}  // namespace bandwright::cli_tests
