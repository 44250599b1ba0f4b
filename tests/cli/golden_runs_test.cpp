// SPDX-License-Identifier: Apache-2.0
// Every command on the meats demonstration and on the invented tiny set, against tests/cli/golden. The
// numbers in the golden files are this program's own: that they are right is shown by the unit tests with
// values from outside; here it is shown that people get them, in these words.
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include "cli/golden.hpp"
#include "cli/program.hpp"

namespace bandwright::cli_tests {
namespace {

constexpr const char* kCalibrateWarnings =
    "warning: not used: 1 spectrum without a row in the reference table: stray-r1\n"
    "warning: not used: 1 row of the reference table without a spectrum: S99\n"
    "warning: acid: 19 standards for 3 factors; infrared practice asks for 24 or more\n"
    "warning: water content: 17 standards for 2 factors; infrared practice asks for 24 or more\n";
constexpr const char* kValidateWarnings =
    "warning: acid: 6 samples; infrared practice asks for 20 or more with 3 factors\n"
    "warning: water content: 6 samples; infrared practice asks for 20 or more with 2 factors\n"
    "warning: water content: flagged, and counted in: 1 of 6 samples\n";

class TinyRuns : public ::testing::Test {
 protected:
  void SetUp() override {
    scratch.add_tiny();
    calibrated = run(scratch, {"calibrate", "plan.toml", "--out", "model.json"});
    ASSERT_EQ(calibrated.status, 0) << calibrated.err;
  }

  Scratch scratch;
  Outcome calibrated;
};

class MeatsRuns : public ::testing::Test {
 protected:
  void SetUp() override {
    scratch.add_meats();
    calibrated = run(scratch, {"calibrate", "plan.toml", "--out", "model.json"});
    ASSERT_EQ(calibrated.status, 0) << calibrated.err;
  }

  Scratch scratch;
  Outcome calibrated;
};

TEST_F(TinyRuns, Calibrate) {
  EXPECT_TRUE(matches_golden_text("tiny_calibrate.txt", calibrated.out));
  EXPECT_EQ(calibrated.err, kCalibrateWarnings);
}

TEST_F(TinyRuns, CalibrateJson) {
  const Outcome got = run(scratch, {"calibrate", "plan.toml", "--out", "model.json", "--replace", "--json"});
  EXPECT_EQ(got.status, 0);
  EXPECT_TRUE(matches_golden_json("tiny_calibrate.json", got.out));
  EXPECT_EQ(got.err, kCalibrateWarnings);
}

TEST_F(TinyRuns, CalibrateQuietStillPrintsItsTable) {
  const Outcome got = run(scratch, {"calibrate", "plan.toml", "--out", "model.json", "--replace", "--quiet"});
  EXPECT_EQ(got.status, 0);
  EXPECT_EQ(got.out, calibrated.out);
  EXPECT_EQ(got.err, "");
}

TEST_F(TinyRuns, CalibrateFromStandardInput) {
  const Outcome got = run(scratch, {"calibrate", "-", "--out", "other.json", "--quiet"},
                          {.input = scratch.read("plan.toml")});
  EXPECT_EQ(got.status, 0);
  EXPECT_EQ(got.out, replaced(calibrated.out, "model.json", "other.json"));
}

TEST_F(TinyRuns, CalibrateToStandardOutputGivesTheModelAlone) {
  const Outcome got = run(scratch, {"calibrate", "plan.toml", "--out", "-", "--quiet"});
  EXPECT_EQ(got.status, 0);
  EXPECT_EQ(got.out, scratch.read("model.json"));
  EXPECT_FALSE(scratch.has("-"));
}

TEST_F(TinyRuns, ValidateThatFails) {
  const Outcome got = run(scratch, {"validate", "model.json"});
  EXPECT_EQ(got.status, 1);
  EXPECT_TRUE(matches_golden_text("tiny_validate.txt", got.out));
  EXPECT_EQ(got.err, kValidateWarnings);
}

TEST_F(TinyRuns, ValidateJson) {
  const Outcome got = run(scratch, {"validate", "model.json", "--json"});
  EXPECT_EQ(got.status, 1);
  EXPECT_TRUE(matches_golden_json("tiny_validate.json", got.out));
  EXPECT_EQ(got.err, kValidateWarnings);
}

TEST_F(TinyRuns, ValidateGivesTheSameForTheFilesNamedOnTheCommandLine) {
  const Outcome by_plan = run(scratch, {"validate", "model.json"});
  const Outcome by_name = run(scratch, {"validate", "model.json", "--spectra", "validation_spectra.csv",
                                        "--reference", "validation.csv"});
  EXPECT_EQ(by_name.out, by_plan.out);
  EXPECT_EQ(by_name.status, by_plan.status);
}

TEST_F(TinyRuns, ValidateThatIsNotJudged) {
  const std::string plan = scratch.read("plan.toml");
  scratch.write("plain.toml", plan.substr(0, plan.find("[validation.accept]")));
  ASSERT_EQ(run(scratch, {"calibrate", "plain.toml", "--out", "plain.json"}).status, 0);
  const Outcome got = run(scratch, {"validate", "plain.json"});
  EXPECT_EQ(got.status, 1);
  EXPECT_TRUE(matches_golden_text("tiny_validate_not_judged.txt", got.out));
  const Outcome json = run(scratch, {"validate", "plain.json", "--json"});
  EXPECT_EQ(json.status, 1);
  EXPECT_THAT(json.out, ::testing::HasSubstr("],\"verdict\":null,\"warnings\":["));
}

TEST_F(TinyRuns, ValidateRecordsItselfInTheModel) {
  const Outcome got = run(scratch, {"validate", "model.json", "--out", "validated.json"});
  EXPECT_EQ(got.status, 1);
  EXPECT_THAT(got.out, ::testing::HasSubstr("model with this validation written to validated.json\n"));
  const Outcome shown = run(scratch, {"show", "validated.json"});
  EXPECT_EQ(shown.status, 0);
  EXPECT_TRUE(matches_golden_text("tiny_show_validated.txt", shown.out));
  EXPECT_EQ(shown.err, "");
  const Outcome predicted = run(scratch, {"predict", "validated.json", "new_spectra.csv"});
  EXPECT_EQ(predicted.status, 0);
  EXPECT_TRUE(matches_golden_text("tiny_predict_validated.txt", predicted.out));
}

TEST_F(TinyRuns, Predict) {
  const Outcome got = run(scratch, {"predict", "model.json", "new_spectra.csv"});
  EXPECT_EQ(got.status, 0);
  EXPECT_TRUE(matches_golden_text("tiny_predict.txt", got.out));
  EXPECT_EQ(got.err, "");
}

TEST_F(TinyRuns, PredictJson) {
  const Outcome got = run(scratch, {"predict", "model.json", "new_spectra.csv", "--json"});
  EXPECT_EQ(got.status, 0);
  EXPECT_TRUE(matches_golden_json("tiny_predict.json", got.out));
  EXPECT_EQ(got.err, "");
}

TEST_F(TinyRuns, PredictCsv) {
  const Outcome got = run(scratch, {"predict", "model.json", "new_spectra.csv", "--csv"});
  EXPECT_EQ(got.status, 0);
  EXPECT_TRUE(matches_golden_csv("tiny_predict.csv", got.out));
  EXPECT_EQ(got.err, "");
}

TEST_F(TinyRuns, PredictIntoAFile) {
  const Outcome table = run(scratch, {"predict", "model.json", "new_spectra.csv"});
  const Outcome json = run(scratch, {"predict", "model.json", "new_spectra.csv", "--json"});
  const Outcome csv = run(scratch, {"predict", "model.json", "new_spectra.csv", "--csv"});
  const Outcome both = run(scratch, {"predict", "model.json", "new_spectra.csv", "--out", "result.json"});
  EXPECT_EQ(both.out, table.out);
  EXPECT_EQ(scratch.read("result.json"), json.out);
  const Outcome as_csv =
      run(scratch, {"predict", "model.json", "new_spectra.csv", "--csv", "--out", "result.csv"});
  EXPECT_EQ(as_csv.status, 0);
  EXPECT_EQ(scratch.read("result.csv"), csv.out);
  EXPECT_EQ(run(scratch, {"predict", "model.json", "new_spectra.csv", "--out", "-"}).out, json.out);
}

TEST_F(TinyRuns, PredictFromStandardInput) {
  const Outcome by_name = run(scratch, {"predict", "model.json", "new_spectra.csv"});
  const Outcome got =
      run(scratch, {"predict", "model.json", "-"}, {.input = scratch.read("new_spectra.csv")});
  EXPECT_EQ(got.status, 0);
  EXPECT_EQ(got.out, by_name.out);
}

TEST_F(TinyRuns, Show) {
  const Outcome got = run(scratch, {"show", "model.json"});
  EXPECT_EQ(got.status, 0);
  EXPECT_TRUE(matches_golden_text("tiny_show.txt", got.out));
  EXPECT_EQ(got.err, "");
}

TEST_F(TinyRuns, ShowJson) {
  const Outcome got = run(scratch, {"show", "model.json", "--json"});
  EXPECT_EQ(got.status, 0);
  EXPECT_TRUE(matches_golden_json("tiny_show.json", got.out));
  EXPECT_EQ(got.err, "");
}

TEST_F(TinyRuns, ShowPlanGivesThePlanByteForByte) {
  const Outcome got = run(scratch, {"show", "model.json", "--plan", "--out", "again.toml"});
  EXPECT_EQ(got.status, 0);
  EXPECT_EQ(got.out, scratch.read("plan.toml"));
  EXPECT_EQ(scratch.read("again.toml"), scratch.read("plan.toml"));
}

TEST_F(MeatsRuns, Calibrate) {
  EXPECT_TRUE(matches_golden_text("meats_calibrate.txt", calibrated.out));
  EXPECT_EQ(calibrated.err, "");
}

TEST_F(MeatsRuns, ValidateThatPasses) {
  const Outcome got = run(scratch, {"validate", "model.json"});
  EXPECT_EQ(got.status, 0);
  EXPECT_TRUE(matches_golden_text("meats_validate.txt", got.out));
  EXPECT_EQ(got.err,
            "warning: water: flagged, and counted in: 4 of 38 samples\n"
            "warning: fat: flagged, and counted in: 3 of 38 samples\n"
            "warning: protein: 38 samples; infrared practice asks for 48 or more with 12 factors\n"
            "warning: protein: flagged, and counted in: 4 of 38 samples\n");
}

TEST_F(MeatsRuns, Predict) {
  const Outcome got = run(scratch, {"predict", "model.json", "new_spectra.csv"});
  EXPECT_EQ(got.status, 0);
  EXPECT_TRUE(matches_golden_text("meats_predict.txt", got.out));
  EXPECT_EQ(got.err, "");
}

TEST_F(MeatsRuns, Show) {
  const Outcome got = run(scratch, {"show", "model.json"});
  EXPECT_EQ(got.status, 0);
  EXPECT_TRUE(matches_golden_text("meats_show.txt", got.out));
  EXPECT_EQ(got.err, "");
}

TEST(HelpRuns, Program) {
  const Scratch scratch;
  const Outcome got = run(scratch, {"--help"});
  EXPECT_EQ(got.status, 0);
  EXPECT_TRUE(matches_golden_text("help.txt", got.out));
  EXPECT_EQ(got.err, "");
  EXPECT_EQ(run(scratch, {"-h"}).out, got.out);
}

class CommandHelp : public ::testing::TestWithParam<std::string> {};

TEST_P(CommandHelp, IsAsInItsFile) {
  const Scratch scratch;
  const Outcome got = run(scratch, {GetParam(), "--help"});
  EXPECT_EQ(got.status, 0);
  EXPECT_TRUE(matches_golden_text("help_" + GetParam() + ".txt", got.out));
  EXPECT_EQ(got.err, "");
}

INSTANTIATE_TEST_SUITE_P(HelpRuns, CommandHelp, ::testing::Values("calibrate", "validate", "predict", "show"),
                         [](const auto& tested) { return tested.param; });

TEST(VersionRuns, OneLine) {
  const Scratch scratch;
  const Outcome got = run(scratch, {"--version"});
  EXPECT_EQ(got.status, 0);
  EXPECT_THAT(got.out, ::testing::MatchesRegex("bandwright [0-9]+\\.[0-9]+\\.[0-9]+\n"));
  EXPECT_EQ(got.err, "");
}

TEST(VersionRuns, Json) {
  const Scratch scratch;
  const Outcome got = run(scratch, {"--version", "--json"});
  EXPECT_EQ(got.status, 0);
  constexpr const char* kVersion = "\"[0-9]+\\.[0-9]+\\.[0-9]+\"";
  const std::string pattern =
      std::string("\\{\"format\":1,\"tool\":\\{\"name\":\"bandwright\",\"version\":") + kVersion +
      "\\},\"libraries\":\\{\"eigen\":" + kVersion + ",\"fmt\":" + kVersion +
      ",\"nlohmann_json\":" + kVersion + ",\"cli11\":" + kVersion + ",\"armadillo\":" + kVersion +
      "\\},\"linear_algebra\":\\{\"library\":\"[^\"]+\",\"kernel\":\"[A-Za-z0-9_]+\",\"safe_for_threads\":("
      "true|false)\\}\\}\n";
  EXPECT_THAT(got.out, ::testing::MatchesRegex(pattern));
  EXPECT_EQ(got.err, "");
}

}  // namespace
}  // namespace bandwright::cli_tests
