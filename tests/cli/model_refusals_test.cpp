// SPDX-License-Identifier: Apache-2.0
// Refusals of models and of single spectra, and the judgements that a script asks for.
#include "base/digest.hpp"
#include "cli/refusals.hpp"

namespace bandwright::cli_tests {
namespace {

using ::testing::HasSubstr;

class ModelRefusals : public Refusals {};

TEST_F(ModelRefusals, ModelMissing) {
  expect_refused({"show", "no.json"}, 3, "no.json: cannot be read: No such file or directory");
}

TEST_F(ModelRefusals, NotAModel) {
  expect_refused({"predict", "plan.toml", "new_spectra.csv"}, 3, "plan.toml: not a model file");
  scratch.write("empty.json", "");
  expect_refused({"show", "empty.json"}, 3, "empty.json: the file is empty");
}

TEST_F(ModelRefusals, ModelWithAChangedByte) {
  std::string model = scratch.read("model.json");
  const std::size_t at = model.find("\"rmsecv\":") + 12;
  model[at] = model[at] == '5' ? '6' : '5';
  scratch.write("changed.json", model);
  expect_refused(
      {"predict", "changed.json", "new_spectra.csv"}, 3,
      "changed.json: the section \"components[0]\" was changed after the model was written (its SHA-256 "
      "differs)");
}

TEST_F(ModelRefusals, ModelCutShort) {
  const std::string model = scratch.read("model.json");
  scratch.write("short.json", model.substr(0, model.size() / 2));
  expect_refused({"show", "short.json"}, 3,
                 "short.json: cut short or changed at its end: a model file ends with its content_sha256");
}

/// A model whose seal is in order but whose format is one that this version cannot know.
TEST_F(ModelRefusals, ModelOfALaterFormat) {
  std::string model = replaced(scratch.read("model.json"), "\n\"format\": 1,\n", "\n\"format\": 2,\n");
  model = replaced(model, sha256("\"format\": 1"), sha256("\"format\": 2"));
  const std::size_t seal = model.rfind("\"content_sha256\"");
  scratch.write("newer.json",
                model.substr(0, seal) + "\"content_sha256\": \"" + sha256(model.substr(0, seal)) + "\"\n}\n");
  expect_refused({"show", "newer.json"}, 3,
                 "newer.json: written by a newer version: format 2; this program reads 1");
}

TEST_F(ModelRefusals, WrongAxisForTheModel) {
  scratch.write("other.csv", "spectrum,1600,1605,1610\nn1,0.1,0.2,0.1\nn2,0.1,0.2,0.1\n");
  const Outcome got = run(scratch, {"predict", "model.json", "other.csv"});
  EXPECT_EQ(got.status, 3);
  EXPECT_EQ(got.err, "");
  const std::string reason =
      "other.csv: the axis (3 points from 1600 to 1610 cm-1) is not that of the model (41 points from 1600 "
      "to "
      "1800 cm-1)\n";
  EXPECT_THAT(got.out,
              HasSubstr("\nno sample could be estimated\nrefused: n1: " + reason + "refused: n2: " + reason));
}

TEST_F(ModelRefusals, OneBadSpectrumAmongGoodOnes) {
  const std::string good = scratch.read("new_spectra.csv");
  std::string bad = good;
  const std::size_t cell = bad.find("edge,") + 5;
  bad = bad.substr(0, cell) + "oops" + bad.substr(bad.find(',', cell));
  scratch.write("bad.csv", bad);
  const Outcome got = run(scratch, {"predict", "model.json", "bad.csv"});
  EXPECT_EQ(got.status, 3);
  EXPECT_EQ(got.err, "");
  EXPECT_THAT(got.out, HasSubstr("refused: edge: bad.csv:4: field 2: \"oops\" is not a number\n"));
  EXPECT_THAT(got.out, HasSubstr("\nabove  "));
  const Outcome json = run(scratch, {"predict", "model.json", "bad.csv", "--json"});
  EXPECT_EQ(json.status, 3);
  EXPECT_THAT(
      json.out,
      HasSubstr(
          R"({"sample":"edge","spectrum":"edge","refused":"bad.csv:4: field 2: \"oops\" is not a number","components":[]})"));
  EXPECT_THAT(json.out, HasSubstr(R"({"sample":"above","spectrum":"above","refused":null,"components":[{)"));
}

TEST_F(ModelRefusals, ConstantSpectrumUnderSnv) {
  std::string csv = scratch.read("new_spectra.csv");
  csv += "flat" + replaced(std::string(41, 'x'), "x", ",0.5") + "\n";
  scratch.write("flat.csv", csv);
  const Outcome got = run(scratch, {"predict", "model.json", "flat.csv", "--csv"});
  EXPECT_EQ(got.status, 3);
  EXPECT_EQ(got.err, "");
  EXPECT_THAT(got.out, HasSubstr("\nflat,flat,0,,,,,,,,,,,,,,,\"flat.csv:9: snv cannot be computed: the "
                                 "spectrum is constant in window \"\"carbonyl\"\"\"\n"));
  EXPECT_THAT(got.out, HasSubstr("\nabove,above,1,acid,wt%,"));
}

TEST_F(ModelRefusals, IdWithControlCharacters) {
  std::string csv = scratch.read("new_spectra.csv");
  scratch.write("esc.csv", replaced(csv, "edge,", "e\033[31mdge,"));
  const Outcome got = run(scratch, {"predict", "model.json", "esc.csv"});
  EXPECT_EQ(got.status, 3);
  EXPECT_EQ(got.out.find('\033'), std::string::npos);
}

TEST_F(ModelRefusals, FailOnGivesStatusOneOnlyForWhatWasAskedFor) {
  const std::string csv = scratch.read("new_spectra.csv");
  const auto only = [&](const std::string& id) {
    const std::size_t at = csv.find("\n" + id + ",") + 1;
    scratch.write(id + ".csv",
                  csv.substr(0, csv.find('\n') + 1) + csv.substr(at, csv.find('\n', at) + 1 - at));
    return id + ".csv";
  };
  const auto status = [&](const std::string& file, const std::string& words) {
    return run(scratch, {"predict", "model.json", file, "--fail-on", words}).status;
  };
  const std::string good = only("good-r1");
  const std::string edge = only("edge");
  const std::string above = only("above");
  const std::string beyond = only("beyond");
  EXPECT_EQ(status(good, "flagged,outside,too-close"), 0);
  EXPECT_EQ(status(edge, "too-close"), 1);
  EXPECT_EQ(status(edge, "flagged,outside"), 0);
  EXPECT_EQ(status(above, "outside"), 1);
  EXPECT_EQ(status(above, "flagged,too-close"), 0);
  EXPECT_EQ(status(beyond, "flagged"), 1);
  EXPECT_EQ(status(beyond, "outside,too-close"), 0);
  EXPECT_EQ(run(scratch, {"predict", "model.json", beyond}).status, 0);
  EXPECT_EQ(run(scratch, {"predict", "--fail-on", "flagged", "model.json", beyond}).status, 1);
}

TEST_F(ModelRefusals, StatusThreeGoesBeforeFailOn) {
  scratch.write("bad.csv", replaced(scratch.read("new_spectra.csv"), "edge,", "edge,x"));
  EXPECT_EQ(run(scratch, {"predict", "model.json", "bad.csv", "--fail-on", "flagged"}).status, 3);
}

}  // namespace
}  // namespace bandwright::cli_tests
