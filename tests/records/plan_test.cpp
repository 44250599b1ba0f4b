// SPDX-License-Identifier: Apache-2.0
#include "records/plan.hpp"

#include <gtest/gtest.h>

#include <string>
#include <variant>

namespace bandwright {
namespace {

const std::string kSmallest =
    "[standards]\n"
    "spectra = [\"a.csv\"]\n"
    "reference = \"b.csv\"\n"
    "[[component]]\n"
    "name = \"water\"\n";

Plan parse(const std::string& text) { return parse_plan(text, "plan.toml"); }

// Every table of the grammar and every key that is available.
const std::string kWhole = R"(format = 1
title  = "Residual acid in n-butyl propionate, reactor line 4"

[standards]
spectra   = ["standards/*.csv", "more.csv"]
reference = "standards.csv"
replicate = "-r"
group     = "batch"
axis      = "cm-1"
ordinate  = "absorbance"

[[exclude]]
sample = "S13"
reason = "cell leaked, rescan failed"
[[exclude]]
spectrum = "S14-r2"
reason = "bubble"

[validation]
spectra   = ["validation/*.csv"]
reference = "validation.csv"

[[component]]
name      = "propionic acid"
column    = "propionic_acid"
unit      = "wt%"
lab_error = { absolute = 0.004, relative = 0.02 }
spec_min  = 0
spec_max  = 0.30
windows   = ["carbonyl", "O-H"]
factors   = 5
kind      = "pls"
steps     = []
scaling   = "unit-variance"

[[component]]
name = "water"
lab_error = 0.1
factors = "minimum"

[[component]]
name = "1-butanol"
lab_error = 0.05

[[window]]
name   = "carbonyl"
from   = 1660
to     = 1820.5
except = [[1700, 1702], [1750.5, 1740]]
[[window]]
name = "O-H"
from = 3700
to   = 3050

[pretreatment]
steps   = [{ step = "savitzky-golay", points = 15, polynomial = 3, derivative = 1 }, "snv", "savitzky-golay"]
scaling = "none"

[regression]
kind        = "pls"
factors     = "one-standard-error"
max_factors = 12

[cross_validation]
scheme  = "monte-carlo"
folds   = 20
repeats = 3
seed    = 7
share_left_out = 0.3

[interval]
kind  = "propagated"
level = 0.99
about = "true"

[decision]
risk = 0.01

[validation.accept]
sep_max = 0.03
rmsep_max = 0.04
bias_margin = 0.01
coverage_min = 0.90
n_min = 20
range_min = 0.95
r2_min = 0.9
per_component = [{ component = "water", sep_max = 0.5, n_min = 10 }]

[limits]
max_absorbance = 1.5
significance = 0.05
)";

TEST(Plan, FilesAndExclusionsArriveAsWritten) {
  const Plan plan = parse(kWhole);
  EXPECT_EQ(plan.path, "plan.toml");
  EXPECT_EQ(plan.text, kWhole);
  EXPECT_EQ(plan.recipe.title, "Residual acid in n-butyl propionate, reactor line 4");
  EXPECT_EQ(plan.standards.spectra, (std::vector<std::string>{"standards/*.csv", "more.csv"}));
  EXPECT_EQ(plan.standards.reference, "standards.csv");
  EXPECT_EQ(plan.standards.replicate, "-r");
  EXPECT_EQ(plan.recipe.replicate_mark, "-r");
  EXPECT_EQ(plan.standards.group, "batch");
  EXPECT_EQ(plan.recipe.group_column, "batch");
  EXPECT_EQ(plan.standards.axis, AxisUnit::Wavenumber);
  EXPECT_EQ(plan.standards.ordinate, Ordinate::Absorbance);
  ASSERT_EQ(plan.recipe.exclusions.size(), 2u);
  EXPECT_EQ(plan.recipe.exclusions[0].sample, "S13");
  EXPECT_EQ(plan.recipe.exclusions[0].spectrum, "");
  EXPECT_EQ(plan.recipe.exclusions[0].reason, "cell leaked, rescan failed");
  EXPECT_EQ(plan.recipe.exclusions[1].sample, "");
  EXPECT_EQ(plan.recipe.exclusions[1].spectrum, "S14-r2");
}

TEST(Plan, ComponentsArriveAsWritten) {
  const Plan plan = parse(kWhole);
  ASSERT_EQ(plan.recipe.components.size(), 3u);
  const ComponentRecipe& acid = plan.recipe.components[0];
  EXPECT_EQ(acid.name, "propionic acid");
  EXPECT_EQ(acid.reference_column(), "propionic_acid");
  EXPECT_EQ(acid.unit, "wt%");
  EXPECT_EQ(acid.lab_error.absolute, 0.004);
  EXPECT_EQ(acid.lab_error.relative, 0.02);
  EXPECT_EQ(acid.spec_min, 0.0);
  EXPECT_EQ(acid.spec_max, 0.30);
  EXPECT_EQ(acid.windows, (std::vector<std::string>{"carbonyl", "O-H"}));
  ASSERT_TRUE(acid.factors.has_value());
  EXPECT_EQ(std::get<Index>(*acid.factors), 5);
  EXPECT_EQ(acid.kind, RegressionKind::Pls);
  ASSERT_TRUE(acid.steps.has_value());
  EXPECT_TRUE(acid.steps->empty());  // none for this component: not the same as not given
  EXPECT_EQ(acid.scaling, Scaling::UnitVariance);

  const ComponentRecipe& water = plan.recipe.components[1];
  EXPECT_EQ(water.reference_column(), "water");
  EXPECT_EQ(water.lab_error.absolute, 0.1);
  EXPECT_EQ(water.lab_error.relative, 0.0);
  EXPECT_EQ(std::get<FactorRule>(*water.factors), FactorRule::Minimum);
  EXPECT_FALSE(water.steps.has_value());
  EXPECT_FALSE(water.spec_max.has_value());
  EXPECT_EQ(plan.recipe.components[2].lab_error.absolute, 0.05);
}

TEST(Plan, LabErrorMayBeAColumnOfTheReferenceTable) {
  const Plan plan = parse_plan(
      "[standards]\nspectra = [\"a.csv\"]\nreference = \"r.csv\"\n[[component]]\nname = \"water\"\nlab_error "
      "= \"water_sd\"\n",
      "plan.toml");
  EXPECT_EQ(plan.recipe.components[0].lab_error.column, "water_sd");
  EXPECT_TRUE(plan.recipe.components[0].lab_error.given());
}

TEST(Plan, WindowsAndStepsArriveAsWritten) {
  const Recipe recipe = parse(kWhole).recipe;
  ASSERT_EQ(recipe.windows.size(), 2u);
  EXPECT_EQ(recipe.windows[0].name, "carbonyl");
  EXPECT_EQ(recipe.windows[0].from, 1660.0);
  EXPECT_EQ(recipe.windows[0].to, 1820.5);
  ASSERT_EQ(recipe.windows[0].except.size(), 2u);
  EXPECT_EQ(recipe.windows[0].except[1].from, 1750.5);
  EXPECT_EQ(recipe.windows[0].except[1].to, 1740.0);
  EXPECT_EQ(recipe.windows[1].from, 3700.0);

  ASSERT_EQ(recipe.pretreatment.steps.size(), 3u);
  const auto& derivative = std::get<SavitzkyGolay>(recipe.pretreatment.steps[0]);
  EXPECT_EQ(derivative.points, 15);
  EXPECT_EQ(derivative.polynomial, 3);
  EXPECT_EQ(derivative.derivative, 1);
  EXPECT_TRUE(std::holds_alternative<Snv>(recipe.pretreatment.steps[1]));
  EXPECT_EQ(std::get<SavitzkyGolay>(recipe.pretreatment.steps[2]).points, SavitzkyGolay{}.points);
  EXPECT_EQ(recipe.pretreatment.scaling, Scaling::None);
}

TEST(Plan, FitTestAndJudgementArriveAsWritten) {
  const Recipe recipe = parse(kWhole).recipe;
  EXPECT_EQ(std::get<FactorRule>(recipe.regression.factors), FactorRule::OneStandardError);
  EXPECT_EQ(recipe.regression.max_factors, 12);
  EXPECT_EQ(recipe.cross_validation.scheme, FoldScheme::MonteCarlo);
  EXPECT_EQ(recipe.cross_validation.folds, 20);
  EXPECT_EQ(recipe.cross_validation.repeats, 3);
  EXPECT_EQ(recipe.cross_validation.seed, 7);
  EXPECT_EQ(recipe.cross_validation.share_left_out, 0.3);
  EXPECT_EQ(recipe.interval.kind, IntervalKind::Propagated);
  EXPECT_EQ(recipe.interval.level, 0.99);
  EXPECT_EQ(recipe.interval.about, IntervalAbout::True);
  EXPECT_EQ(recipe.decision.risk, 0.01);
  EXPECT_EQ(recipe.limits.max_absorbance, 1.5);
  EXPECT_EQ(recipe.limits.significance, 0.05);
  EXPECT_EQ(recipe.accept.all.sep_max, 0.03);
  EXPECT_EQ(recipe.accept.all.rmsep_max, 0.04);
  EXPECT_EQ(recipe.accept.all.bias_margin, 0.01);
  EXPECT_EQ(recipe.accept.all.coverage_min, 0.90);
  EXPECT_EQ(recipe.accept.all.n_min, 20);
  EXPECT_EQ(recipe.accept.all.range_min, 0.95);
  EXPECT_EQ(recipe.accept.all.r2_min, 0.9);
  ASSERT_EQ(recipe.accept.per_component.size(), 1u);
  EXPECT_EQ(recipe.accept.per_component[0].component, "water");
  EXPECT_EQ(recipe.accept.per_component[0].criteria.sep_max, 0.5);
  EXPECT_EQ(recipe.accept.per_component[0].criteria.n_min, 10);
  EXPECT_FALSE(recipe.accept.per_component[0].criteria.bias_margin.has_value());
}

TEST(Plan, LinesOfHeadingsAreKept) {
  const Plan plan = parse(kWhole);
  EXPECT_EQ(plan.standards.line, 4u);
  EXPECT_EQ(plan.exclusion_lines, (std::vector<std::size_t>{12, 15}));
  EXPECT_EQ(plan.validation.value().line, 19u);
  EXPECT_EQ(plan.component_lines, (std::vector<std::size_t>{23, 36, 41}));
  EXPECT_EQ(plan.window_lines, (std::vector<std::size_t>{45, 50}));
}

TEST(Plan, SmallestPlanHasTheDefaultsOfTheStructs) {
  const Plan plan = parse(kSmallest);
  EXPECT_EQ(plan.recipe.title, "");
  EXPECT_FALSE(plan.validation.has_value());
  EXPECT_FALSE(plan.standards.axis.has_value());
  EXPECT_TRUE(plan.recipe.windows.empty());
  EXPECT_TRUE(plan.recipe.pretreatment.steps.empty());
  EXPECT_EQ(plan.recipe.pretreatment.scaling, Scaling::Centre);
  EXPECT_EQ(std::get<FactorRule>(plan.recipe.regression.factors), FactorRule::FTest);
  EXPECT_EQ(plan.recipe.regression.max_factors, 15);
  EXPECT_FALSE(plan.recipe.cross_validation.scheme.has_value());
  EXPECT_EQ(plan.recipe.interval.level, 0.95);
  EXPECT_EQ(plan.recipe.limits.max_absorbance, 2.0);
  EXPECT_FALSE(plan.recipe.components[0].factors.has_value());
}

TEST(Plan, EveryDefaultIsValid) {
  // Window is not here: its ends have no default.
  EXPECT_NO_THROW(check_options(SetFiles{}));
  EXPECT_NO_THROW(check_options(Exclusion{}));
  EXPECT_NO_THROW(check_options(ComponentRecipe{}));
  EXPECT_NO_THROW(check_options(LabError{}));
  EXPECT_NO_THROW(check_options(Pretreatment{}));
  EXPECT_NO_THROW(check_options(RegressionRecipe{}));
  EXPECT_NO_THROW(check_options(CrossValidation{}));
  EXPECT_NO_THROW(check_options(IntervalRecipe{}));
  EXPECT_NO_THROW(check_options(Decision{}));
  EXPECT_NO_THROW(check_options(AcceptCriteria{}));
  EXPECT_NO_THROW(check_options(Limits{}));
  for (const std::string& name : step_names())
    EXPECT_NO_THROW(std::visit([](const auto& step) { check_options(step); }, step_with_defaults(name)))
        << name;
}

TEST(Plan, ValidationTakesMarkAxisAndOrdinateFromTheStandardsButNotTheGroup) {
  const SetFiles taken = parse(kWhole).validation.value();
  EXPECT_EQ(taken.spectra, (std::vector<std::string>{"validation/*.csv"}));
  EXPECT_EQ(taken.reference, "validation.csv");
  EXPECT_EQ(taken.replicate, "-r");
  EXPECT_EQ(taken.axis, AxisUnit::Wavenumber);
  EXPECT_EQ(taken.ordinate, Ordinate::Absorbance);
  EXPECT_EQ(taken.group, "");
}

TEST(Plan, ValidationMaySayOtherwise) {
  const Plan plan = parse(
      "[standards]\nspectra = [\"a\"]\nreference = \"b\"\nreplicate = \"-r\"\naxis = \"cm-1\"\n"
      "[[component]]\nname = \"water\"\n"
      "[validation]\nspectra = [\"c\"]\nreference = \"d\"\nreplicate = \"\"\naxis = \"nm\"\ngroup = "
      "\"lot\"\n");
  EXPECT_EQ(plan.validation.value().replicate, "");
  EXPECT_EQ(plan.validation.value().axis, AxisUnit::Nanometre);
  EXPECT_EQ(plan.validation.value().group, "lot");
  EXPECT_EQ(plan.recipe.replicate_mark, "-r");
  EXPECT_EQ(plan.recipe.group_column, "");
}

TEST(Plan, AcceptMayStandWithoutASet) {
  const Plan plan = parse(kSmallest + "[validation.accept]\nsep_max = 1\n");
  EXPECT_FALSE(plan.validation.has_value());
  EXPECT_EQ(plan.recipe.accept.all.sep_max, 1.0);
}

TEST(Plan, AcceptOfComponentsMayBeWrittenAsTables) {
  const Plan plan =
      parse(kSmallest + "[[validation.accept.per_component]]\ncomponent = \"water\"\nsep_max = 1\n");
  ASSERT_EQ(plan.recipe.accept.per_component.size(), 1u);
  EXPECT_EQ(plan.recipe.accept.per_component[0].criteria.sep_max, 1.0);
}

TEST(Plan, GroupsMakeLeaveGroupOutPossible) {
  const Plan plan = parse(
      "[standards]\nspectra = [\"a\"]\nreference = \"b\"\ngroup = \"batch\"\n"
      "[[component]]\nname = \"water\"\n[cross_validation]\nscheme = \"leave-group-out\"\n");
  EXPECT_EQ(plan.recipe.cross_validation.scheme, FoldScheme::LeaveGroupOut);
}

TEST(Plan, OrderOfTablesDoesNotMatter) {
  const Plan plan = parse(
      "[regression]\nfactors = 3\n[[component]]\nname = \"water\"\nwindows = [\"all of it\"]\n"
      "[[window]]\nname = \"all of it\"\nfrom = 1\nto = 2\n[standards]\nspectra = [\"a\"]\nreference = "
      "\"b\"\n");
  EXPECT_EQ(plan.recipe.components[0].windows[0], plan.recipe.windows[0].name);
}

TEST(Plan, WindowsLineEndsAndByteOrderMarkAreRead) {
  std::string text = kSmallest;
  for (std::size_t at = text.find('\n'); at != std::string::npos; at = text.find('\n', at + 2))
    text.replace(at, 1, "\r\n");
  text = "\xEF\xBB\xBF" + text;
  const Plan plan = parse(text);
  EXPECT_EQ(plan.text, text);
  EXPECT_EQ(plan.component_lines, (std::vector<std::size_t>{4}));
  EXPECT_EQ(plan.recipe.components[0].name, "water");
}

TEST(Plan, DefaultsOfOtherSchemesMayBeWrittenOut) {
  const Plan plan =
      parse(kSmallest +
            "[cross_validation]\nscheme = \"leave-one-out\"\nfolds = 10\nrepeats = 1\nseed = 1\n"
            "share_left_out = 0.25\n");
  EXPECT_EQ(plan.recipe.cross_validation.scheme, FoldScheme::LeaveOneOut);
}

TEST(Plan, NamesMayBeInAnyLanguage) {
  const Plan plan = parse(
      "[standards]\nspectra = [\"Spektren/größe.csv\"]\nreference = \"b\"\n"
      "[[component]]\nname = \"Säurezahl\"\nunit = \"mg/g\"\n");
  EXPECT_EQ(plan.recipe.components[0].name, "Säurezahl");
}

TEST(Plan, ExceptAtTheEdgesOfAWindowIsInside) {
  const Plan plan =
      parse(kSmallest + "[[window]]\nname = \"w\"\nfrom = 20\nto = 10\nexcept = [[20, 19], [10, 10]]\n");
  EXPECT_EQ(plan.recipe.windows[0].except.size(), 2u);
}

}  // namespace
}  // namespace bandwright
