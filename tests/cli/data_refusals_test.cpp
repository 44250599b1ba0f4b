// SPDX-License-Identifier: Apache-2.0
// Refusals of plans, standards and sets.
#include "cli/refusals.hpp"

namespace bandwright::cli_tests {
namespace {

using ::testing::HasSubstr;

class DataRefusals : public Refusals {};

TEST_F(DataRefusals, PlanMissing) {
  expect_refused({"calibrate", "no.toml", "--out", "m.json"}, 2,
                 "no.toml: cannot be read: No such file or directory");
}

TEST_F(DataRefusals, PlanFaultNamesItsLine) {
  write_plan("bad.toml", "max_factors = 5", "max_factor = 5");
  expect_refused({"calibrate", "bad.toml", "--out", "m.json"}, 2,
                 R"(bad.toml:58: [regression] max_factor: unknown key (did you mean "max_factors"?))");
}

TEST_F(DataRefusals, PlanWithControlCharacters) {
  write_plan("steer.toml", "\"Acid and water in an invented ester\"", "\"a\\u001b[31mb\"");
  expect_refused(
      {"calibrate", "steer.toml", "--out", "m.json"}, 2,
      "steer.toml:3: title: \"a\\x1b[31mb\" holds a control character (write it as plain text on one line)");
}

TEST_F(DataRefusals, PlanOfALaterVersion) {
  write_plan("newer.toml", "format = 1", "format = 2");
  expect_refused(
      {"calibrate", "newer.toml", "--out", "m.json"}, 2,
      "newer.toml:2: format: 2 was written for a newer version of this program (this version reads "
      "plans up to format 1)");
}

TEST_F(DataRefusals, PlanWithoutValidation) {
  write_plan("none.toml",
             "[validation]\nspectra   = [\"validation_spectra.csv\"]\nreference = \"validation.csv\"\n", "");
  ASSERT_EQ(run(scratch, {"calibrate", "none.toml", "--out", "none.json", "--quiet"}).status, 0);
  expect_refused({"validate", "none.json"}, 2,
                 "none.json: the plan in the model has no [validation] (give --spectra and --reference)");
}

TEST_F(DataRefusals, SpectraMissing) {
  expect_refused({"predict", "model.json", "no.csv"}, 3, "no.csv: there is no such file");
}

TEST_F(DataRefusals, PatternWithoutAMatch) {
  expect_refused({"predict", "model.json", "no*.csv"}, 3, "no*.csv: no file matches this pattern");
}

TEST_F(DataRefusals, StandardsMissing) {
  write_plan("bad.toml", "standards_?.csv", "gone_?.csv");
  expect_refused({"calibrate", "bad.toml", "--out", "m.json"}, 3, "gone_?.csv: no file matches this pattern");
}

TEST_F(DataRefusals, ReferenceTableMissing) {
  write_plan("bad.toml", "\"standards.csv\"", "\"gone.csv\"");
  expect_refused({"calibrate", "bad.toml", "--out", "m.json"}, 3,
                 "gone.csv: cannot be read: No such file or directory");
}

TEST_F(DataRefusals, ValidationSetNotBesideTheModel) {
  std::filesystem::remove(scratch / "validation_spectra.csv");
  expect_refused(
      {"validate", "model.json"}, 3,
      "validation_spectra.csv: there is no such file ([validation] of the plan, relative to the model "
      "file; or give --spectra and --reference)");
}

TEST_F(DataRefusals, BadCellInTheStandards) {
  const std::string csv = scratch.read("standards_1.csv");
  const std::size_t cell = csv.find(',', csv.find("S01-r2,")) + 1;
  scratch.write("standards_1.csv", csv.substr(0, cell) + "n/a" + csv.substr(csv.find(',', cell)));
  expect_refused({"calibrate", "plan.toml", "--out", "m.json"}, 3,
                 R"(standards_1.csv:3: field 2: "n/a" is not a number)");
}

TEST_F(DataRefusals, BadCellInTheReferenceTable) {
  const std::string table = scratch.read("standards.csv");
  const std::size_t cell = table.find("S02,B2,") + 7;
  scratch.write("standards.csv", table.substr(0, cell) + "<0.2" + table.substr(table.find(',', cell)));
  expect_refused({"calibrate", "plan.toml", "--out", "m.json"}, 3,
                 "standards.csv:3: column \"acid\": \"<0.2\" is not a number (leave the cell empty if the "
                 "value was not determined)");
}

TEST_F(DataRefusals, JcampFile) {
  scratch.write("new.dx", "##TITLE=x\n");
  const Outcome got = run(scratch, {"predict", "model.json", "new.dx"});
  EXPECT_EQ(got.status, 3);
  EXPECT_THAT(got.out,
              HasSubstr("\nrefused: new.dx: new.dx: this looks like a JCAMP-DX file, which this version "
                        "does not read yet (export the spectra as CSV)\n"));
  EXPECT_EQ(got.err, "");
}

TEST_F(DataRefusals, TooFewStandards) {
  std::string table = scratch.read("standards.csv");
  table = table.substr(0, table.find("S03,"));
  scratch.write("two.csv", table);
  std::string plan = replaced(scratch.read("plan.toml"), "\"standards.csv\"", "\"two.csv\"");
  plan = replaced(plan, "[[exclude]]\nsample = \"S13\"\nreason = \"cell leaked, rescan failed\"\n", "");
  scratch.write("few.toml", plan);
  expect_refused(
      {"calibrate", "few.toml", "--out", "m.json"}, 3,
      R"(few.toml:22: component "acid": only 2 standards with a reference value; at least 3 are needed)");
}

TEST_F(DataRefusals, MoreFactorsThanThePlanTries) {
  write_plan("many.toml", "factors  = 2", "factors  = 6");
  expect_refused(
      {"calibrate", "many.toml", "--out", "m.json"}, 2,
      "many.toml:36: [[component]] 2 \"water content\": factors: 6 is more than [regression] max_factors, 5 "
      "(ask for fewer factors or raise max_factors)");
}

TEST_F(DataRefusals, MoreFactorsThanTheStandardsCarry) {
  write_plan("many.toml", "factors  = 2", "factors  = 16");
  scratch.write("many.toml", replaced(scratch.read("many.toml"), "max_factors = 5", "max_factors = 20"));
  expect_refused({"calibrate", "many.toml", "--out", "m.json"}, 3,
                 "many.toml:32: component \"water content\": 16 factors are asked for, but these standards "
                 "carry no more than 15");
}

TEST_F(DataRefusals, WindowBeyondTheAxis) {
  write_plan("beyond.toml", "from = 1600\nto   = 1685", "from = 1500\nto   = 1550");
  expect_refused({"calibrate", "beyond.toml", "--out", "m.json"}, 2,
                 "beyond.toml:46: window \"bend\": the window 1500 to 1550 reaches beyond the spectra, which "
                 "cover 1600 to 1800");
}

TEST_F(DataRefusals, ExclusionOfSomethingThatIsNotThere) {
  write_plan("typo.toml", "\"S13\"", "\"S31\"");
  expect_refused({"calibrate", "typo.toml", "--out", "m.json"}, 2,
                 "typo.toml:13: [[exclude]] \"S31\": there is no such sample among the standards "
                 "(check the name, or remove the entry)");
}

TEST_F(DataRefusals, ColumnThatTheReferenceTableLacks) {
  write_plan("column.toml", "column   = \"water\"", "column   = \"watr\"");
  expect_refused({"calibrate", "column.toml", "--out", "m.json"}, 3,
                 "standards.csv:1: there is no column \"watr\" (did you mean \"water\"? columns: \"batch\", "
                 "\"acid\", \"water\")");
}

TEST_F(DataRefusals, ValidationSampleAmongTheStandards) {
  expect_refused(
      {"validate", "model.json", "--spectra", "standards_1.csv", "--reference", "standards.csv"}, 3,
      "sample \"S01\" is one of the model's standards (an independent set must hold no sample of the "
      "calibration)");
}

TEST_F(DataRefusals, ValidationSpectrumThatCannotBeUsed) {
  std::string csv = scratch.read("validation_spectra.csv");
  csv = csv.substr(0, csv.find("V1-r1,")) + "V1-r1" + replaced(std::string(41, 'x'), "x", ",0.5") + "\n" +
        csv.substr(csv.find("V1-r2,"));
  scratch.write("validation_spectra.csv", csv);
  expect_refused({"validate", "model.json"}, 3,
                 "validation_spectra.csv:2: spectrum \"V1-r1\": snv cannot be computed: the spectrum is "
                 "constant in window \"carbonyl\"");
}

}  // namespace
}  // namespace bandwright::cli_tests
