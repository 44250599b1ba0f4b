// SPDX-License-Identifier: Apache-2.0
// Every refusal of the plan reader with its whole line. The wording is this project's own.
#include <gtest/gtest.h>

#include <string>

#include "base/error.hpp"
#include "records/plan.hpp"

namespace bandwright {
namespace {

/// The line that a plan ends in; "no refusal" if it is read.
std::string refusal(const std::string& text) {
  try {
    static_cast<void>(parse_plan(text, "plan.toml"));
  } catch (const Error& error) {
    EXPECT_EQ(error.kind(), ErrorKind::Usage);
    return error.what();
  }
  return "no refusal";
}

const std::string kStandards = "[standards]\nspectra = [\"a.csv\"]\nreference = \"b.csv\"\n";  // lines 1 - 3
const std::string kWater = "[[component]]\nname = \"water\"\n";                                // lines 4 - 5

/// The refusal of `lines` after the smallest plan: they begin in line 6.
std::string refusal_of(const std::string& lines) { return refusal(kStandards + kWater + lines); }

TEST(PlanRefusals, TextThatIsNotToml) {
  EXPECT_EQ(refusal("title = water\n"),
            "plan.toml:1: not TOML: value: could not determine value type (text must stand in quotes)");
  EXPECT_EQ(refusal("title = \"a\"\ntitle = \"b\"\n"),
            "plan.toml:2: not TOML: key-value pair: cannot redefine existing string 'title' "
            "(no key and no table may come twice)");
  EXPECT_EQ(refusal("\n[standards\n"),
            "plan.toml:2: not TOML: table header: expected ']', saw '\\n' "
            "(text must stand in quotes, every bracket must be closed)");
  EXPECT_EQ(refusal("title = \"\xff\"\n"),
            "plan.toml:1: not TOML: Encountered invalid utf-8 sequence (save the file as UTF-8 text)");
}

TEST(PlanRefusals, HeadingsAndCharactersThatOnceEndedTheParser) {
  EXPECT_EQ(refusal("x = \xC3\xA9\n"),
            "plan.toml:1: not TOML: value: could not determine value type (text must stand in quotes)");
  EXPECT_EQ(refusal("[.a]\n"),
            "plan.toml:1: not TOML: key: expected bare key starting character or string delimiter, saw '.' "
            "(text must stand in quotes, every bracket must be closed)");
  EXPECT_TRUE(refusal("[[[a]]]\n").starts_with("plan.toml:1: not TOML: "));
  EXPECT_TRUE(refusal("temp_\xC2\xB0"
                      "C = 3\n")
                  .starts_with("plan.toml:1: not TOML: "));
}

TEST(PlanRefusals, AFileThatIsNoPlan) {
  EXPECT_EQ(refusal(std::string((4U << 20U) + 1, '#')),
            "plan.toml: the file is larger than 4 MB, which no plan is (is this the right file?)");
  EXPECT_EQ(refusal(""),
            "plan.toml: [standards]: missing (it names the files of the standards: spectra = [\"*.csv\"] and "
            "reference = \"values.csv\")");
}

TEST(PlanRefusals, Format) {
  EXPECT_EQ(refusal("format = 2\n[something_new]\n"),
            "plan.toml:1: format: 2 was written for a newer version of this program "
            "(this version reads plans up to format 1)");
  EXPECT_EQ(refusal("format = 0\n"), "plan.toml:1: format: 0 must be at least 1");
  EXPECT_EQ(refusal("format = \"1\"\n"), "plan.toml:1: format: must be a whole number, not \"1\"");
  EXPECT_EQ(refusal("format = 1.0\n"),
            "plan.toml:1: format: must be a whole number, not 1.0 (write it without a point or an exponent)");
}

TEST(PlanRefusals, UnknownKeysNameTheNearestKnownOne) {
  EXPECT_EQ(refusal("titel = \"x\"\n"), "plan.toml:1: titel: unknown key (did you mean \"title\"?)");
  EXPECT_EQ(refusal("\n[standard]\n"),
            "plan.toml:2: [standard]: unknown table (did you mean \"standards\"?)");
  EXPECT_EQ(refusal("[[windows]]\n"), "plan.toml:1: [[windows]]: unknown table (did you mean \"window\"?)");
  EXPECT_EQ(refusal("[standards]\nspectra = [\"a\"]\ngrup = \"x\"\n"),
            "plan.toml:3: [standards] grup: unknown key (did you mean \"group\"?)");
  EXPECT_EQ(refusal_of("window = [\"a\"]\n"),
            "plan.toml:6: [[component]] 1 \"water\": window: unknown key (did you mean \"windows\"?)");
  EXPECT_EQ(refusal_of("[regression]\nKind = \"pls\"\n"),
            "plan.toml:7: [regression] Kind: unknown key (did you mean \"kind\"?)");
}

TEST(PlanRefusals, UnknownKeysWithoutANearOneListWhatIsKnown) {
  EXPECT_EQ(refusal_of("[decision]\nconfidence = 0.9\n"),
            "plan.toml:7: [decision] confidence: unknown key (known: \"risk\")");
}

TEST(PlanRefusals, TheFirstUnknownKeyOfTheFileIsNamed) {
  EXPECT_EQ(refusal_of("[limits]\nzebra = 1\nant = 2\n"),
            "plan.toml:7: [limits] zebra: unknown key (known: \"max_absorbance\", \"significance\")");
}

TEST(PlanRefusals, TablesWrittenInTheWrongForm) {
  EXPECT_EQ(refusal("standards = 3\n"),
            "plan.toml:1: [standards]: must be a table, not 3 (write it as [standards])");
  EXPECT_EQ(refusal("[[standards]]\n"),
            "plan.toml:1: [standards]: may come only once (write it in single brackets, [standards])");
  EXPECT_EQ(refusal(kStandards + "[component]\nname = \"water\"\n"),
            "plan.toml:4: [[component]]: must be a list of tables, not a table "
            "(write [[component]] above each of them)");
  EXPECT_EQ(refusal("component = [\"water\"]\n" + kStandards),
            "plan.toml:1: [[component]] 1: must be a table, not \"water\"");
  EXPECT_EQ(refusal("title = 3\n"
                    "[standards]\n"),
            "plan.toml:1: title: must be text, not 3 (write it in quotes)");
}

TEST(PlanRefusals, StandardsWithoutFiles) {
  EXPECT_EQ(
      refusal("\n[standards]\nreference = \"b\"\n"),
      "plan.toml:2: [standards] spectra: missing (files of spectra, globs allowed, relative to the plan)");
  EXPECT_EQ(refusal("[standards]\nspectra = [\"a\"]\n"),
            "plan.toml:1: [standards] reference: missing (composition of the samples, one row a sample)");
  EXPECT_EQ(refusal("standards.spectra = [\"a\"]\n"),
            "plan.toml:1: [standards] reference: missing (composition of the samples, one row a sample)");
  EXPECT_EQ(refusal("[standards]\nspectra = []\nreference = \"b\"\n"),
            "plan.toml:2: [standards] spectra: must name at least one file");
  EXPECT_EQ(refusal("[standards]\nspectra = \"a\"\nreference = \"b\"\n"),
            "plan.toml:2: [standards] spectra: must be a list, not \"a\" (write it in square brackets)");
  EXPECT_EQ(refusal("[standards]\nspectra = [\"a\"]\nreference = \"\"\n"),
            "plan.toml:3: [standards] reference: must not be empty");
}

TEST(PlanRefusals, TheLineIsThatOfTheEntryInsideALongList) {
  EXPECT_EQ(refusal("[standards]\nspectra = [\n  \"a\",\n\n  3,\n]\nreference = \"b\"\n"),
            "plan.toml:5: [standards] spectra 2: must be text, not 3 (write it in quotes)");
  EXPECT_EQ(refusal("[standards]\r\nspectra = [\r\n  \"a\",\r\n  \"\",\r\n]\r\nreference = \"b\"\r\n"),
            "plan.toml:4: [standards] spectra 2: must not be empty");
  EXPECT_EQ(
      refusal_of("[[window]]\nname = \"w\"\nfrom = 1\nto = 9\nexcept = [\n  [2, 3],\n  [4,\n   \"5\"],\n]\n"),
      "plan.toml:13: [[window]] 1 \"w\": except 2 2: must be a number, not \"5\" (write it without quotes)");
}

TEST(PlanRefusals, ControlCharactersInText) {
  EXPECT_EQ(refusal(kStandards + "[[component]]\nname = \"wa\\u0007ter\"\n"),
            "plan.toml:5: [[component]] 1 \"wa\\x07ter\": name: \"wa\\x07ter\" holds a control character "
            "(write it as plain text on one line)");
  EXPECT_EQ(
      refusal("title = \"\"\"two\nlines\"\"\"\n" + kStandards + kWater),
      "plan.toml:1: title: \"two\\x0alines\" holds a control character (write it as plain text on one line)");
}

TEST(PlanRefusals, Components) {
  EXPECT_EQ(refusal(kStandards),
            "plan.toml: [[component]]: missing (a plan needs at least one component, with its name)");
  EXPECT_EQ(refusal(kStandards + "[[component]]\nunit = \"%\"\n"),
            "plan.toml:4: [[component]] 1: name: missing (how results call the component)");
  EXPECT_EQ(refusal(kStandards + "[[component]]\nname = \"\"\n"),
            "plan.toml:5: [[component]] 1 \"\": name: must not be empty");
  EXPECT_EQ(refusal(kStandards + kWater + kWater),
            "plan.toml:7: [[component]] 2 \"water\": name: \"water\" is taken by the component of line 4 "
            "(give each a name of its own)");
  EXPECT_EQ(refusal_of("spec_max = 1\nspec_min = 1\n"),
            "plan.toml:7: [[component]] 1 \"water\": spec_min: 1 is not below spec_max, 1");
  EXPECT_EQ(refusal_of("spec_max = inf\n"),
            "plan.toml:6: [[component]] 1 \"water\": spec_max: must be a finite number, not inf");
}

TEST(PlanRefusals, LongNamesAreCutInMessages) {
  const std::string name(1000, 'w');
  EXPECT_EQ(refusal(kStandards + "[[component]]\nname = \"" + name + "\"\nunits = 1\n"),
            "plan.toml:6: [[component]] 1 \"" + name.substr(0, 80) +
                "...\": units: unknown key (did you mean \"unit\"?)");
}

TEST(PlanRefusals, LabError) {
  EXPECT_EQ(refusal_of("lab_error = 0\n"),
            "plan.toml:6: [[component]] 1 \"water\": lab_error: must be more than 0 "
            "(leave the key out if the error is not known)");
  EXPECT_EQ(refusal_of("lab_error = -0.1\n"),
            "plan.toml:6: [[component]] 1 \"water\": lab_error: -0.1 must be at least 0");
  EXPECT_EQ(refusal_of("lab_error = { absolute = nan }\n"),
            "plan.toml:6: [[component]] 1 \"water\": lab_error: absolute: must be a finite number, not nan");
  EXPECT_EQ(
      refusal_of("lab_error = { relativ = 1 }\n"),
      "plan.toml:6: [[component]] 1 \"water\": lab_error: relativ: unknown key (did you mean \"relative\"?)");
  EXPECT_EQ(refusal_of("lab_error = \"\"\n"),
            "plan.toml:6: [[component]] 1 \"water\": lab_error: must not be empty "
            "(the name of a column of the reference table)");
  EXPECT_EQ(
      refusal_of("lab_error = [0.1, 0.2]\n"),
      "plan.toml:6: [[component]] 1 \"water\": lab_error: must be a number, a table { absolute, relative } "
      "or the name of a column, not a list");
}

TEST(PlanRefusals, WindowsOfAComponent) {
  const std::string window = "[[window]]\nname = \"carbonyl\"\nfrom = 1\nto = 2\n";
  EXPECT_EQ(refusal_of("windows = [\"carbonil\"]\n" + window),
            "plan.toml:6: [[component]] 1 \"water\": windows 1: no window is called \"carbonil\" "
            "(did you mean \"carbonyl\"?)");
  EXPECT_EQ(refusal_of("windows = [\"carbonyl\",\n\"carbonyl\"]\n" + window),
            "plan.toml:7: [[component]] 1 \"water\": windows 2: \"carbonyl\" stands here twice");
  EXPECT_EQ(refusal_of("windows = [\"carbonyl\"]\n"),
            "plan.toml:6: [[component]] 1 \"water\": windows 1: no window is called \"carbonyl\" "
            "(the plan has no [[window]])");
  EXPECT_EQ(refusal_of("windows = []\n" + window),
            "plan.toml:6: [[component]] 1 \"water\": windows: must name at least one window "
            "(leave the key out to use all windows)");
}

TEST(PlanRefusals, Windows) {
  EXPECT_EQ(refusal_of("[[window]]\nname = \"w\"\nfrom = 1\n"),
            "plan.toml:6: [[window]] 1 \"w\": to: missing (the other end)");
  EXPECT_EQ(refusal_of("[[window]]\nname = \"w\"\nfrom = 0\nto = 1\n"),
            "plan.toml:8: [[window]] 1 \"w\": from: 0 must be more than 0");
  EXPECT_EQ(refusal_of("[[window]]\nname = \"w\"\nfrom = 1\nto = 1\n"),
            "plan.toml:9: [[window]] 1 \"w\": to: 1 is both ends of the window (a window needs a width)");
  EXPECT_EQ(
      refusal_of("[[window]]\nname = \"w\"\nfrom = 1\nto = 2\n[[window]]\nname = \"w\"\nfrom = 3\nto = 4\n"),
      "plan.toml:11: [[window]] 2 \"w\": name: \"w\" is taken by the window of line 6 (give each a name of "
      "its own)");
  EXPECT_EQ(refusal_of("[[window]]\nname = \"w\"\nfrom = 9\nto = 5\nexcept = [[6, 7],\n[8, 9.5]]\n"),
            "plan.toml:11: [[window]] 1 \"w\": except 2: 8 to 9.5 is not inside the window, which goes from "
            "9 to 5");
  EXPECT_EQ(refusal_of("[[window]]\nname = \"w\"\nfrom = 1\nto = 9\nexcept = [2, 3]\n"),
            "plan.toml:10: [[window]] 1 \"w\": except 1: must be a stretch [from, to], not 2 "
            "(a list of stretches: [[from, to], ...])");
  EXPECT_EQ(refusal_of("[[window]]\nname = \"w\"\nfrom = 1\nto = 9\nexcept = [[2]]\n"),
            "plan.toml:10: [[window]] 1 \"w\": except 1: must be a stretch [from, to], not a list of 1");
}

TEST(PlanRefusals, Steps) {
  EXPECT_EQ(refusal_of("[pretreatment]\nsteps = [\"SNV\"]\n"),
            "plan.toml:7: [pretreatment] steps 1: \"SNV\" is not known (did you mean \"snv\"?)");
  EXPECT_EQ(refusal_of("[pretreatment]\nsteps = \"snv\"\n"),
            "plan.toml:7: [pretreatment] steps: must be a list, not \"snv\" (write it in square brackets)");
  EXPECT_EQ(
      refusal_of("[pretreatment]\nsteps = [1]\n"),
      "plan.toml:7: [pretreatment] steps 1: must be the name of a step or a table { step = \"...\" }, not 1");
  EXPECT_EQ(refusal_of("[pretreatment]\nsteps = [{ points = 5 }]\n"),
            "plan.toml:7: [pretreatment] steps 1: step: missing (the name of the step)");
  EXPECT_EQ(refusal_of("[pretreatment]\nsteps = [{ step = 5 }]\n"),
            "plan.toml:7: [pretreatment] steps 1: step: must be one of \"savitzky-golay\" | \"snv\", not 5");
  EXPECT_EQ(refusal_of("[pretreatment]\nsteps = [\n\"snv\",\n{ step = \"savitzky-golay\", point = 5 }]\n"),
            "plan.toml:9: [pretreatment] steps 2 \"savitzky-golay\": point: unknown key (did you mean "
            "\"points\"?)");
  EXPECT_EQ(refusal_of("steps = [{ step = \"snv\", points = 5 }]\n"),
            "plan.toml:6: [[component]] 1 \"water\": steps 1 \"snv\": points: unknown key (known: \"step\")");
}

TEST(PlanRefusals, SavitzkyGolayOptionsThatDoNotFit) {
  const auto with = [](const std::string& options) {
    return refusal_of("[pretreatment]\nsteps = [{ step = \"savitzky-golay\", " + options + " }]\n");
  };
  const std::string where = "plan.toml:7: [pretreatment] steps 1 \"savitzky-golay\": ";
  EXPECT_EQ(with("points = 1"), where + "points: 1 must be between 3 and 201");
  EXPECT_EQ(with("points = 10"), where + "points: 10 must be odd");
  EXPECT_EQ(with("points = 5, polynomial = 5"), where + "polynomial: 5 must be below points (5)");
  EXPECT_EQ(with("derivative = 3"), where + "derivative: 3 must be at most polynomial (2)");
}

TEST(PlanRefusals, Regression) {
  EXPECT_EQ(refusal_of("[regression]\nkind = \"plsr\"\n"),
            "plan.toml:7: [regression] kind: \"plsr\" is not known (did you mean \"pls\"?)");
  EXPECT_EQ(refusal_of("[regression]\nfactors = \"f-tset\"\n"),
            "plan.toml:7: [regression] factors: \"f-tset\" is not known (did you mean \"f-test\"?)");
  EXPECT_EQ(refusal_of("[regression]\nfactors = 2.5\n"),
            "plan.toml:7: [regression] factors: must be a whole number or one of \"f-test\" | \"minimum\" | "
            "\"one-standard-error\", not 2.5");
  EXPECT_EQ(refusal_of("[regression]\nfactors = 0\n"),
            "plan.toml:7: [regression] factors: 0 must be between 1 and 1000");
  EXPECT_EQ(refusal_of("[regression]\nmax_factors = 2.5\n"),
            "plan.toml:7: [regression] max_factors: must be a whole number, not 2.5");
  EXPECT_EQ(refusal_of("[regression]\nmax_factors = 6\nfactors = 7\n"),
            "plan.toml:8: [regression] factors: 7 is more than [regression] max_factors, 6 "
            "(ask for fewer factors or raise max_factors)");
  EXPECT_EQ(refusal_of("factors = 16\n"),
            "plan.toml:6: [[component]] 1 \"water\": factors: 16 is more than [regression] max_factors, 15 "
            "(ask for fewer factors or raise max_factors)");
  EXPECT_EQ(
      refusal_of("scaling = true\n"),
      "plan.toml:6: [[component]] 1 \"water\": scaling: must be one of \"centre\" | \"unit-variance\" | "
      "\"none\", not true");
}

TEST(PlanRefusals, UnitsOfTwoLettersAreNotGuessed) {
  EXPECT_EQ(refusal("[standards]\nspectra = [\"a\"]\nreference = \"b\"\naxis = \"um\"\n" + kWater),
            "plan.toml:4: [standards] axis: \"um\" is not known (known: \"cm-1\", \"nm\")");
}

TEST(PlanRefusals, CrossValidationKeysThatWouldHaveNoEffect) {
  EXPECT_EQ(
      refusal_of("[cross_validation]\nfolds = 5\n"),
      "plan.toml:7: [cross_validation] folds: only applies to blocks, interleaved, random, monte-carlo; the "
      "scheme is leave-one-out by default (remove the key or choose another scheme)");
  EXPECT_EQ(
      refusal_of("[cross_validation]\nscheme = \"blocks\"\nrepeats = 5\n"),
      "plan.toml:8: [cross_validation] repeats: only applies to random, monte-carlo; the scheme is blocks "
      "(remove the key or choose another scheme)");
  EXPECT_EQ(
      refusal_of("[cross_validation]\nscheme = \"interleaved\"\nseed = 5\n"),
      "plan.toml:8: [cross_validation] seed: only applies to random, monte-carlo; the scheme is interleaved "
      "(remove the key or choose another scheme)");
  EXPECT_EQ(
      refusal_of("[cross_validation]\nscheme = \"random\"\nshare_left_out = 0.3\n"),
      "plan.toml:8: [cross_validation] share_left_out: only applies to monte-carlo; the scheme is random "
      "(remove the key or choose another scheme)");
}

TEST(PlanRefusals, CrossValidation) {
  EXPECT_EQ(refusal_of("[cross_validation]\nscheme = \"leave-group-out\"\n"),
            "plan.toml:7: [cross_validation] scheme: leave-group-out needs to know the groups "
            "([standards] group names the column of the reference table that holds them)");
  EXPECT_EQ(refusal_of("[cross_validation]\nscheme = \"random\"\nfolds = 2.5\n"),
            "plan.toml:8: [cross_validation] folds: must be a whole number, not 2.5");
  EXPECT_EQ(refusal_of("[cross_validation]\nscheme = \"random\"\nfolds = 1\n"),
            "plan.toml:8: [cross_validation] folds: 1 must be between 2 and 100000");
  EXPECT_EQ(refusal_of("[cross_validation]\nscheme = \"monte-carlo\"\nshare_left_out = 1\n"),
            "plan.toml:8: [cross_validation] share_left_out: 1 must be between 0 and 1, ends excluded");
}

TEST(PlanRefusals, IntervalDecisionLimits) {
  EXPECT_EQ(
      refusal_of("lab_error = 0.1\n[[component]]\nname = \"fat\"\n[[component]]\nname = \"protein\"\n"
                 "[interval]\nabout = \"true\"\n"),
      "plan.toml:12: [interval] about: \"true\" needs the lab_error of every component; it is missing for "
      "\"fat\", \"protein\" (add lab_error, or write about = \"reference\")");
  EXPECT_EQ(refusal_of("lab_error = \"water_sd\"\n[interval]\nabout = \"true\"\n"),
            "plan.toml:8: [interval] about: \"true\" needs lab_error as numbers; for \"water\" it is a "
            "column, which says "
            "nothing of new samples (write lab_error = { absolute = ..., relative = ... })");
  EXPECT_EQ(refusal_of("[interval]\nlevel = 95\n"),
            "plan.toml:7: [interval] level: 95 must be between 0.5 and 1, ends excluded");
  EXPECT_EQ(refusal_of("[decision]\nrisk = \"0.05\"\n"),
            "plan.toml:7: [decision] risk: must be a number, not \"0.05\" (write it without quotes)");
  EXPECT_EQ(refusal_of("[limits]\nmax_absorbance = -inf\n"),
            "plan.toml:7: [limits] max_absorbance: must be a finite number, not -inf");
  EXPECT_EQ(refusal_of("[limits]\nmax_absorbance = 2026-01-01\n"),
            "plan.toml:7: [limits] max_absorbance: must be a number, not a date or time");
}

TEST(PlanRefusals, Exclusions) {
  EXPECT_EQ(refusal_of("[[exclude]]\nsample = \"S1\"\n"),
            "plan.toml:6: [[exclude]] 1 \"S1\": reason: missing (why; shown in every report)");
  EXPECT_EQ(refusal_of("[[exclude]]\nsample = \"S1\"\nreason = \"\"\n"),
            "plan.toml:8: [[exclude]] 1 \"S1\": reason: must not be empty");
  EXPECT_EQ(refusal_of("[[exclude]]\nreason = \"leak\"\n"),
            "plan.toml:6: [[exclude]] 1: names neither sample nor spectrum (give one of the two)");
  EXPECT_EQ(refusal_of("[[exclude]]\nsample = \"S1\"\nspectrum = \"S1-r1\"\nreason = \"leak\"\n"),
            "plan.toml:8: [[exclude]] 1 \"S1\": spectrum: stands beside sample (give one of the two in each "
            "[[exclude]])");
  EXPECT_EQ(refusal_of("[[exclude]]\nspectrum = \"\"\nreason = \"leak\"\n"),
            "plan.toml:7: [[exclude]] 1: spectrum: must not be empty");
  EXPECT_EQ(
      refusal_of(
          "[[exclude]]\nsample = \"S1\"\nreason = \"a\"\n[[exclude]]\nsample = \"S1\"\nreason = \"b\"\n"),
      "plan.toml:10: [[exclude]] 2 \"S1\": sample: \"S1\" is excluded already");
}

TEST(PlanRefusals, Validation) {
  EXPECT_EQ(
      refusal_of("[validation]\n"),
      "plan.toml:6: [validation] spectra: missing (files of spectra, globs allowed, relative to the plan)");
  EXPECT_EQ(
      refusal_of("[validation]\nreplicate = \"-r\"\n[validation.accept]\nsep_max = 1\n"),
      "plan.toml:6: [validation] spectra: missing (files of spectra, globs allowed, relative to the plan)");
  EXPECT_EQ(refusal_of("[validation]\nspectra = [\"c\"]\n"),
            "plan.toml:6: [validation] reference: missing (composition of the samples, one row a sample)");
  EXPECT_EQ(refusal_of("[validation]\nacept.sep_max = 1\nspectra = [\"c\"]\nreference = \"d\"\n"),
            "plan.toml:7: [validation] acept: unknown key (did you mean \"accept\"?)");
}

TEST(PlanRefusals, ValidationAccept) {
  const std::string known =
      "\"sep_max\", \"rmsep_max\", \"bias_margin\", \"coverage_min\", \"n_min\", \"range_min\", \"r2_min\"";
  EXPECT_EQ(refusal_of("[validation.accept]\n"),
            "plan.toml:6: [validation.accept]: sets no criterion (known: " + known + ")");
  EXPECT_EQ(refusal_of("[validation.accept]\nsep_mx = 1\n"),
            "plan.toml:7: [validation.accept] sep_mx: unknown key (did you mean \"sep_max\"?)");
  EXPECT_EQ(refusal_of("[validation.accept]\nn_min = 1\n"),
            "plan.toml:7: [validation.accept] n_min: 1 must be at least 2");
  EXPECT_EQ(
      refusal_of("[validation.accept]\nper_component = [{ component = \"watr\", sep_max = 1 }]\n"),
      "plan.toml:7: [validation.accept] per_component 1 \"watr\": component: no component is called \"watr\" "
      "(did you mean \"water\"?)");
  EXPECT_EQ(
      refusal_of("[validation.accept]\nper_component = [{ component = \"water\" }]\n"),
      "plan.toml:7: [validation.accept] per_component 1 \"water\": sets no criterion (known: " + known + ")");
  EXPECT_EQ(refusal_of("[validation.accept]\nper_component = [{ sep_max = 1 }]\n"),
            "plan.toml:7: [validation.accept] per_component 1: component: missing (the name of a component)");
  EXPECT_EQ(refusal_of("[validation.accept]\nper_component = { component = \"water\", sep_max = 1 }\n"),
            "plan.toml:7: [validation.accept] per_component: must be a list of tables, not a table "
            "(write [[validation.accept.per_component]] above each of them)");
  EXPECT_EQ(refusal_of("[validation.accept]\nper_component = [\n{ component = \"water\", sep_max = 1 },\n"
                       "{ component = \"water\", sep_max = 2 }]\n"),
            "plan.toml:9: [validation.accept] per_component 2 \"water\": component: \"water\" has an entry "
            "already");
  EXPECT_EQ(refusal_of("[validation.accept]\nper_component = [\n{ component = \"water\", sep_max = 0 }]\n"),
            "plan.toml:8: [validation.accept] per_component 1 \"water\": sep_max: 0 must be more than 0");
}

}  // namespace
}  // namespace bandwright
