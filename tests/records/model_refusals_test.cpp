// SPDX-License-Identifier: Apache-2.0
// What the reader of model files refuses behind the digests, one case a refusal.
#include <gtest/gtest.h>

#include <nlohmann/json.hpp>

#include "records/json.hpp"
#include "records/model_file.hpp"
#include "records/model_seal.hpp"
#include "support/error_text.hpp"
#include "support/sample_model.hpp"

namespace bandwright {
namespace {

using Pointer = Json::json_pointer;

Json tiny_document() { return Json::parse(format_model(tiny_model())); }

std::string refusal(const Json& document) {
  return error_text(ErrorKind::Input,
                    [&] { static_cast<void>(parse_model_unsealed(document.dump(), "m.json")); });
}

/// What the reader says when the member at `pointer` (RFC 6901) is `value`.
std::string refusal_with(const std::string& pointer, const Json& value) {
  Json document = tiny_document();
  document[Pointer(pointer)] = value;
  return refusal(document);
}

std::string refusal_without(const std::string& parent, const std::string& key) {
  Json document = tiny_document();
  document[Pointer(parent)].erase(key);
  return refusal(document);
}

const std::string kComponent = "/components/0";
const std::string kRegression = kComponent + "/regression";

TEST(ModelRefusals, TheUntouchedDocumentIsNotRefused) {
  EXPECT_EQ(refusal(tiny_document()), "nothing was thrown");
}

TEST(ModelRefusals, ADocumentThatIsNoModel) {
  EXPECT_EQ(refusal(Json::parse("[1]")), "m.json: not a model file");
  EXPECT_EQ(refusal(Json::parse(R"({"format": 1})")), "m.json: not a model file");
  EXPECT_EQ(refusal_with("/kind", "recipe"), "m.json: not a model file");
}

TEST(ModelRefusals, ANewerFormat) {
  const std::string newer = "m.json: written by a newer version: format 2; this program reads 1";
  EXPECT_EQ(refusal_with("/format", 2), newer);
  const ModelSections sections{.members = {{"format", "2"}, {"kind", "\"bandwright model\""}, {"new", "{}"}},
                               .components = {}};
  EXPECT_EQ(
      error_text(ErrorKind::Input, [&] { static_cast<void>(parse_model(sealed_text(sections), "m.json")); }),
      newer);
  EXPECT_EQ(refusal_with("/format", 0), "m.json: format: must be a whole number of at least 1, not 0");
}

TEST(ModelRefusals, UnknownAndMissingMembers) {
  EXPECT_EQ(refusal_with("/unts", "wt%"), R"(m.json: the member "unts" is not known)");
  EXPECT_EQ(refusal_with("/axis/units", "nm"),
            R"(m.json: axis: the member "units" is not known (did you mean "unit"?))");
  EXPECT_EQ(
      refusal_with(kComponent + "/regression/loading", 1),
      R"(m.json: components[0].regression: the member "loading" is not known (did you mean "loadings"?))");
  EXPECT_EQ(refusal_without("", "ordinate"), "m.json: ordinate: missing");
  EXPECT_EQ(refusal_without(kRegression, "loadings"), "m.json: components[0].regression.loadings: missing");
}

TEST(ModelRefusals, AnIdOfAnotherPlan) {
  Json document = tiny_document();
  ModelSections sections;
  document["id"] = std::string(64, '0');
  for (const auto& [key, value] : document.items())
    if (key != "components" && key != "digests" && key != "content_sha256")
      sections.members.emplace_back(key, value.dump());
  sections.components = {document["components"][0].dump()};
  EXPECT_EQ(
      error_text(ErrorKind::Input, [&] { static_cast<void>(parse_model(sealed_text(sections), "m.json")); }),
      "m.json: id: is not the id of this plan and these inputs");
  EXPECT_EQ(refusal_with("/id", "0A"), "m.json: id: must be a SHA-256: 64 hexadecimal digits in lower case");
}

TEST(ModelRefusals, APlanThatCannotBeRead) {
  EXPECT_EQ(refusal_with("/plan/text", "formt = 1"),
            "m.json: plan.text: the plan cannot be read: plan.toml:1: formt: unknown key (did you mean "
            "\"format\"?)");
}

TEST(ModelRefusals, AnAxisOutOfOrder) {
  EXPECT_EQ(refusal_with("/axis/positions", {1800.0, 1796.0, 1798.0}).substr(0, 24),
            "m.json: axis.positions: ");
  EXPECT_EQ(refusal_with("/axis/positions", Json::array()),
            "m.json: axis.positions: must hold at least one position");
  EXPECT_EQ(refusal_with("/axis/unit", "um"), R"(m.json: axis.unit: must be "cm-1" | "nm", not "um")");
}

TEST(ModelRefusals, AnAxisThatTheWindowsDoNotFit) {
  EXPECT_EQ(refusal_with("/axis/positions", {1500.0, 1496.0, 1492.0}),
            "m.json: components[0].windows: the windows and steps of the plan do not fit the axis: window "
            "\"w\": the "
            "window 1700 to 1720 reaches beyond the spectra, which cover 1492 to 1500");
}

TEST(ModelRefusals, CountsThatContradictEachOther) {
  EXPECT_EQ(refusal_with("/spectra", 9), "m.json: spectrum_ids: must be a list of 9, not of 8");
  EXPECT_EQ(refusal_with("/spectrum_ids/1", "S01"), "m.json: spectrum_ids: an id comes twice");
  EXPECT_EQ(refusal_with("/samples", 9), "m.json: samples: must not be more than there are spectra");
  EXPECT_EQ(refusal_with("/samples", 7),
            "m.json: components[0].statistics.samples: must be 7 at most, the samples of this model");
  EXPECT_EQ(refusal_with(kComponent + "/evidence/spectrum_ids/0", "S99"),
            R"(m.json: components[0].evidence.spectrum_ids: "S99" is no spectrum of this model)");
}

TEST(ModelRefusals, ComponentsThatAreNotThoseOfThePlan) {
  EXPECT_EQ(refusal_with("/components", Json::array()),
            "m.json: components: must be a list of 1 as the plan names them, not of 0");
  EXPECT_EQ(refusal_with(kComponent + "/name", "B"),
            R"(m.json: components[0].name: is "B", but the plan has "A" here)");
}

TEST(ModelRefusals, AChainThatIsNotThatOfThePlan) {
  EXPECT_EQ(refusal_with(kComponent + "/windows/0/points", 7),
            "m.json: components[0].windows: does not follow from the plan");
  EXPECT_EQ(refusal_with(kComponent + "/windows/0/from", 1696.0),
            "m.json: components[0].windows: does not follow from the plan");
  EXPECT_EQ(refusal_with(kComponent + "/steps", Json::parse(R"([{"step": "snv"}])")),
            "m.json: components[0].steps: does not follow from the plan");
  EXPECT_EQ(refusal_with(kComponent + "/scaling/kind", "unit-variance"),
            "m.json: components[0].scaling.kind: does not follow from the plan");
  EXPECT_EQ(refusal_with(kRegression + "/max_factors", 3),
            "m.json: components[0].regression.max_factors: does not follow from the plan");
  EXPECT_EQ(refusal_with(kRegression + "/rule", "minimum"),
            "m.json: components[0].regression.rule: does not follow from the plan");
}

TEST(ModelRefusals, OptionsOfAStepThatAreNotThoseOfThePlan) {
  Json document = Json::parse(format_model(sample_model()));
  document[Pointer("/components/1/steps/0/points")] = 7;
  EXPECT_EQ(refusal(document), "m.json: components[1].steps[0].points: does not follow from the plan");
}

TEST(ModelRefusals, AFactorNumberThatTheRuleDidNotChoose) {
  Json document = Json::parse(format_model(sample_model()));
  document[Pointer("/components/0/regression/rule")] = "f-test";
  EXPECT_EQ(refusal(document), "m.json: components[0].regression.rule: does not follow from the plan");
  document[Pointer("/components/0/regression/rule")] = "minimum";
  document[Pointer("/components/0/regression/choices")] = Json::array();
  EXPECT_EQ(refusal(document), "m.json: components[0].regression.factors: is not what the rule chose");
}

TEST(ModelRefusals, ScalingOfTheWrongShapeOrSize) {
  EXPECT_EQ(refusal_with(kComponent + "/scaling/mean", {1.0, 2.0}),
            "m.json: components[0].scaling.mean: must be a list of 6, not of 2");
  EXPECT_EQ(refusal_with(kComponent + "/scaling/scale/2", 0.0),
            "m.json: components[0].scaling.scale[2]: must be above 0, but is 0");
  EXPECT_EQ(refusal_with(kComponent + "/scaling/scale/2", 2.0),
            "m.json: components[0].scaling.scale: must be 1 where nothing is scaled");
  EXPECT_EQ(refusal_with(kComponent + "/response_mean", nullptr),
            "m.json: components[0].response_mean: must be a number, not null");
}

TEST(ModelRefusals, FactorsOutOfRange) {
  const std::string factors = "m.json: components[0].regression.factors: ";
  EXPECT_EQ(refusal_with(kRegression + "/factors", 0),
            factors + "must be a whole number of at least 1, not 0");
  EXPECT_EQ(refusal_with(kRegression + "/factors", -1),
            factors + "must be a whole number of at least 1, not -1");
  EXPECT_EQ(refusal_with(kRegression + "/factors", 3),
            factors + "must be 2 at most, the length of the curve");
  EXPECT_EQ(refusal_with(kRegression + "/factors", 2), factors + "does not follow from the plan");
}

TEST(ModelRefusals, ACurveThatDoesNotCount) {
  EXPECT_EQ(refusal_with(kRegression + "/curve/1/factors", 3),
            "m.json: components[0].regression.curve[1].factors: must be 2: the curve counts up from 1");
  EXPECT_EQ(refusal_with(kRegression + "/curve", Json::array()),
            "m.json: components[0].regression.curve: must hold 1 to 2 numbers of factors, not 0");
  EXPECT_EQ(refusal_with(kRegression + "/curve/0/press", -1.0),
            "m.json: components[0].regression.curve[0].press: must be at least 0, not -1");
}

TEST(ModelRefusals, ChoicesThatCannotBe) {
  EXPECT_EQ(
      refusal_with(kRegression + "/choices/0/factors", 3),
      "m.json: components[0].regression.choices[0].factors: must be 2 at most, the length of the curve");
  EXPECT_EQ(refusal_with(kRegression + "/choices/1/rule", "f-test"),
            "m.json: components[0].regression.choices[1].rule: comes twice");
}

TEST(ModelRefusals, MatricesOfTheWrongShape) {
  EXPECT_EQ(refusal_with(kRegression + "/rotations", Json::parse("[[1, 2, 3, 4, 5, 6], [1, 2, 3, 4, 5, 6]]")),
            "m.json: components[0].regression.rotations: must be a list of 1, not of 2");
  EXPECT_EQ(refusal_with(kRegression + "/loadings", Json::parse("[[1, 2, 3, 4, 5]]")),
            "m.json: components[0].regression.loadings[0]: must be a list of 6, not of 5");
  EXPECT_EQ(refusal_with(kRegression + "/loadings/0/3", nullptr),
            "m.json: components[0].regression.loadings[0][3]: must be a number, not null");
  EXPECT_EQ(refusal_with(kRegression + "/score_squares/0", -1.5),
            "m.json: components[0].regression.score_squares[0]: must be above 0, but is -1.5");
  EXPECT_EQ(
      refusal_with(kRegression + "/path_end", "tired"),
      R"(m.json: components[0].regression.path_end: must be "asked" | "rank used up" | "response explained", not "tired")");
}

TEST(ModelRefusals, CoefficientsThatDoNotFollowFromTheMatrices) {
  Json document = tiny_document();
  Json& value = document[Pointer(kComponent + "/coefficients/values/0")];
  value = value.get<double>() * (1.0 + 1e-14);
  EXPECT_EQ(refusal(document), "nothing was thrown");  // another processor's rounding
  value = value.get<double>() + 1e-6;
  EXPECT_EQ(refusal(document),
            "m.json: components[0].coefficients.values: do not follow from rotations, y_loadings and scale");
  EXPECT_EQ(refusal_with(kComponent + "/coefficients/intercept", 0.0),
            "m.json: components[0].coefficients.intercept: does not follow from coefficients, mean and "
            "response_mean");
  EXPECT_EQ(refusal_with(kComponent + "/coefficients/axis/0", 1721.0),
            "m.json: components[0].coefficients.axis: is not the axis of the points inside the windows");
  EXPECT_EQ(refusal_with(kRegression + "/y_loadings/0", 1e308).substr(0, 30),
            "m.json: components[0].coeffici");
}

TEST(ModelRefusals, StatisticsThatCannotBe) {
  const std::string statistics = kComponent + "/statistics";
  EXPECT_EQ(refusal_with(statistics + "/sec_df", 7.0),
            "m.json: components[0].statistics.sec_df: must be 6: 8 samples, 1 factors");
  EXPECT_EQ(refusal_with(statistics + "/sec", nullptr),
            "m.json: components[0].statistics.sec: must be a number where sec_df is above 0, else null");
  EXPECT_EQ(refusal_with(statistics + "/rmsecv", -0.1),
            "m.json: components[0].statistics.rmsecv: must be at least 0, not -0.1");
  EXPECT_EQ(refusal_with(statistics + "/r2", nullptr),
            "m.json: components[0].statistics.r2: must be a number, not null");
  EXPECT_EQ(refusal_with(statistics + "/samples", 1),
            "m.json: components[0].statistics.samples: must be a whole number of at least 2, not 1");
}

TEST(ModelRefusals, LimitsThatCannotBe) {
  EXPECT_EQ(refusal_with(kComponent + "/limits/value_min", 100.0),
            "m.json: components[0].limits.value_min: must not be above value_max");
  EXPECT_EQ(refusal_with(kComponent + "/limits/t2", -1.0),
            "m.json: components[0].limits.t2: must be at least 0, not -1");
  EXPECT_EQ(refusal_with(kComponent + "/limits/leverage_max", nullptr),
            "m.json: components[0].limits.leverage_max: must be a number, not null");
}

TEST(ModelRefusals, EvidenceOfTheWrongShape) {
  const std::string evidence = kComponent + "/evidence";
  EXPECT_EQ(refusal_with(evidence + "/samples", {"S01", "S02", "S03"}),
            "m.json: components[0].evidence.samples: must be a list of 8, not of 3");
  EXPECT_EQ(refusal_with(evidence + "/samples/0", "S02"),
            "m.json: components[0].evidence.samples: must name 8 samples, not 7");
  EXPECT_EQ(refusal_with(evidence + "/fitted", {1.0}),
            "m.json: components[0].evidence.fitted: must be a list of 8, not of 1");
  EXPECT_EQ(refusal_with(evidence + "/q/3", -0.5),
            "m.json: components[0].evidence.q[3]: must not be negative, but is -0.5");
}

TEST(ModelRefusals, ValidationThatCannotBe) {
  const Json validation =
      Json::parse(R"({"samples": 1, "rmsep": 1.0, "sep": 1.0, "bias": 0.5, "set_sha256": "00"})");
  EXPECT_EQ(refusal_with(kComponent + "/validation", validation),
            "m.json: components[0].validation.sep: must be null for a single sample");
  EXPECT_EQ(refusal_with(kComponent + "/validation", true),
            "m.json: components[0].validation: must be an object, not true");
}

}  // namespace
}  // namespace bandwright
