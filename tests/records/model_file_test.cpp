// SPDX-License-Identifier: Apache-2.0
#include "records/model_file.hpp"

#include <gtest/gtest.h>

#include <bit>
#include <cmath>
#include <limits>

#include "base/digest.hpp"
#include "support/error_text.hpp"
#include "support/sample_model.hpp"
#include "support/test_data.hpp"

namespace bandwright {
namespace {

/// Same shape and same bits in every entry; not a number equals not a number.
template <class Values>
::testing::AssertionResult same_bits(const Values& got, const Values& want) {
  if (got.rows() != want.rows() || got.cols() != want.cols())
    return ::testing::AssertionFailure() << "another shape";
  for (Index i = 0; i < got.rows(); ++i)
    for (Index j = 0; j < got.cols(); ++j)
      if (std::bit_cast<std::uint64_t>(got(i, j)) != std::bit_cast<std::uint64_t>(want(i, j)))
        return ::testing::AssertionFailure()
               << "entry " << i + 1 << ", " << j + 1 << ": " << got(i, j) << ", want " << want(i, j);
  return ::testing::AssertionSuccess();
}

std::string refusal(const std::string& text) {
  return error_text(ErrorKind::Input, [&] { static_cast<void>(parse_model(text, "fat.model.json")); });
}

Model read_back(const Model& model) { return parse_model(format_model(model), "fat.model.json"); }

TEST(ModelFile, PredictsTheSameBitsAfterReadingBack) {
  const Model& model = sample_model();
  const Model read = read_back(model);
  const Matrix spectra = beerlambert4().spectra_at(beerlambert4().test);
  ASSERT_EQ(read.components.size(), model.components.size());
  for (std::size_t i = 0; i < model.components.size(); ++i) {
    const Projection want = project(model.components[i].calibration, spectra, model.components[i].factors());
    const Projection got = project(read.components[i].calibration, spectra, read.components[i].factors());
    EXPECT_TRUE(same_bits(got.value, want.value));
    EXPECT_TRUE(same_bits(got.scores, want.scores));
    EXPECT_TRUE(same_bits(got.leverage, want.leverage));
    EXPECT_TRUE(same_bits(got.q, want.q));
  }
}

TEST(ModelFile, GivesTheSameTextAgainAfterReadingBack) {
  const std::string text = format_model(sample_model());
  EXPECT_EQ(format_model(parse_model(text, "fat.model.json")), text);
  EXPECT_EQ(format_model(build_sample_model()), text);  // built a second time from the same inputs
}

TEST(ModelFile, KeepsWhatTheModelKnows) {
  Model model = sample_model();
  model.components[0].validation = {
      .samples = 7, .rmsep = 0.25, .sep = 0.125, .bias = -0.5, .set_digest = sha256("v")};
  model.components[1].limits.q = std::numeric_limits<double>::quiet_NaN();
  const Model read = read_back(model);
  EXPECT_EQ(read.recipe.title, "Two of four, \"gewürfelt\"");
  EXPECT_TRUE(same_bits(read.axis.positions(), model.axis.positions()));
  EXPECT_EQ(read.axis.unit(), AxisUnit::Wavenumber);
  EXPECT_EQ(read.ordinate, Ordinate::Absorbance);
  EXPECT_EQ(read.samples, 24);
  EXPECT_EQ(read.spectra, 24);
  EXPECT_EQ(read.spectrum_ids, model.spectrum_ids);
  ASSERT_FALSE(model.warnings.empty());
  ASSERT_EQ(read.warnings.size(), model.warnings.size());
  EXPECT_EQ(read.warnings[0].text, model.warnings[0].text);
  EXPECT_EQ(read.provenance.id, model.provenance.id);
  EXPECT_EQ(read.provenance.plan_text, kSamplePlan);
  EXPECT_EQ(read.provenance.plan_name, "plan.toml");
  EXPECT_EQ(read.provenance.written_by, "0.1.0");
  ASSERT_EQ(read.provenance.inputs.size(), 2U);
  EXPECT_EQ(read.provenance.inputs[1].name, "reference.csv");

  const ComponentModel& a = read.components[0];
  const ComponentModel& want = model.components[0];
  EXPECT_EQ(a.unit, "g/L");
  EXPECT_EQ(a.decision.rule, FactorRule::Minimum);
  EXPECT_EQ(a.decision.choices.size(), want.decision.choices.size());
  EXPECT_EQ(a.curve.size(), want.curve.size());
  EXPECT_EQ(a.curve.back().press, want.curve.back().press);
  EXPECT_EQ(a.statistics.sec, want.statistics.sec);
  EXPECT_EQ(a.statistics.secv, want.statistics.secv);
  EXPECT_EQ(a.limits.t2, want.limits.t2);
  EXPECT_TRUE(same_bits(a.evidence.studentised, want.evidence.studentised));
  EXPECT_TRUE(same_bits(a.evidence.cross_validated, want.evidence.cross_validated));
  EXPECT_EQ(a.evidence.samples, want.evidence.samples);
  ASSERT_TRUE(a.validation.has_value());
  EXPECT_EQ(a.validation->sep, 0.125);
  EXPECT_EQ(a.validation->set_digest, sha256("v"));
  EXPECT_FALSE(read.components[1].validation.has_value());
  EXPECT_FALSE(read.components[1].decision.rule.has_value());
  EXPECT_TRUE(std::isnan(read.components[1].limits.q));
  EXPECT_EQ(read.components[1].recipe.scaling, Scaling::UnitVariance);
}

TEST(ModelFile, KeepsModelsWithoutWindowsCentringOrUnit) {
  const OpenData& data = beerlambert4();
  const std::vector<Index> twelve(data.training.begin(), data.training.begin() + 12);
  SpectraSet spectra = data.spectra_set(twelve);
  spectra.axis = Axis(spectra.axis.positions().head(4), std::nullopt);
  spectra.values = Matrix(spectra.values.leftCols(4));
  for (std::size_t i = 0; i < 12; ++i) spectra.ids[i] = data.samples[i / 2] + (i % 2 == 0 ? "-r1" : "-r2");
  const std::string_view plan = R"([standards]
spectra = ["s.csv"]
reference = "r.csv"
replicate = "-r"
[[component]]
name = "A"
column = "A [g/L]"
factors = 4
[pretreatment]
scaling = "none"
)";
  const Model model = model_of(plan, spectra, data.reference_table(twelve));
  const Model read = read_back(model);
  EXPECT_EQ(read.samples, 6);
  EXPECT_EQ(read.spectra, 12);
  EXPECT_FALSE(read.axis.unit().has_value());
  EXPECT_EQ(read.recipe.replicate_mark, "-r");
  const ComponentModel& component = read.components[0];
  EXPECT_EQ(component.statistics.samples, 6);
  EXPECT_EQ(component.evidence.samples[1], "S01");
  EXPECT_EQ(component.calibration.response_mean, 0.0);
  EXPECT_TRUE(std::isnan(component.limits.q));  // as many factors as points
  EXPECT_TRUE(
      same_bits(component.calibration.path.rotations, model.components[0].calibration.path.rotations));
  EXPECT_EQ(format_model(read), format_model(model));
}

TEST(ModelFile, HoldsNoFolderOfThisMachine) {
  Model model = tiny_model();
  model.warnings.push_back({"odd", "/home/someone/data/spectra.csv", 3});
  const std::string text = format_model(model);
  EXPECT_EQ(text.find("someone"), std::string::npos);
  EXPECT_EQ(read_back(model).warnings.back().one_line(), "spectra.csv:3: odd");
}

TEST(ModelFile, TheIdIsTheDigestOfPlanAndInputsWithTheirLengths) {
  const Provenance provenance{.plan_name = "not in it",
                              .plan_text = "plan",
                              .inputs = {{"spectra", "a.csv", "00"}, {"reference values", "b.csv", "11"}},
                              .id = {},
                              .written_by = "not in it"};
  EXPECT_EQ(model_id(provenance), sha256("1:14:plan7:spectra5:a.csv2:0016:reference values5:b.csv2:11"));
}

TEST(ModelFile, AModelWithAnotherIdIsNotWritten) {
  Model model = tiny_model();
  model.provenance.plan_text += "\n";
  EXPECT_EQ(error_text(ErrorKind::Internal, [&] { static_cast<void>(format_model(model)); }),
            "the id of the model is not that of its plan and inputs");
}

TEST(ModelFile, EverySingleChangedBitIsDetected) {
  std::string text = format_model(tiny_model());
  std::size_t named = 0;
  for (std::size_t i = 0; i < text.size(); ++i) {
    const char before = text[i];
    text[i] = static_cast<char>(before ^ (1 << (i % 8)));
    const std::string line = refusal(text);
    ASSERT_TRUE(line.starts_with("fat.model.json: ")) << "byte " << i << ": " << line;
    if (line.starts_with("fat.model.json: the section \"")) ++named;
    text[i] = before;
  }
  EXPECT_EQ(refusal(text), "nothing was thrown");
  // All but the punctuation between sections, the digests and the seal.
  const std::size_t outside = text.size() - text.find("\"digests\"") + 100;
  EXPECT_GT(named, text.size() - outside);
}

TEST(ModelFile, AChangedByteIsNamedByItsSection) {
  std::string text = format_model(sample_model());
  text[text.find("{\"name\":\"A\"") + 100] ^= 1;
  EXPECT_EQ(refusal(text),
            "fat.model.json: the section \"components[0]\" was changed after the model was written (its "
            "SHA-256 differs)");
}

TEST(ModelFile, EveryTruncationIsDetected) {
  const std::string text = format_model(tiny_model());
  EXPECT_EQ(refusal(""), "fat.model.json: the file is empty");
  for (std::size_t length = 1; length < text.size(); ++length) {
    const std::string line = refusal(text.substr(0, length));
    ASSERT_EQ(line, length < 12
                        ? "fat.model.json: not a model file"
                        : "fat.model.json: cut short or changed at its end: a model file ends with its "
                          "content_sha256");
  }
}

TEST(ModelFile, StatesTheDigestOfItsContent) {
  const std::string text = format_model(tiny_model());
  EXPECT_EQ(model_content_digest(text), sha256(text.substr(0, text.find("\"content_sha256\""))));
}

}  // namespace
}  // namespace bandwright
