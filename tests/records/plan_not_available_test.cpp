// SPDX-License-Identifier: Apache-2.0
// Parts of the grammar that this version knows but does not compute are refused by name. Whoever
// builds one deletes its line here and in not_available.cpp.
#include <gtest/gtest.h>

#include <string>

#include "base/error.hpp"
#include "records/not_available.hpp"
#include "records/plan.hpp"

namespace bandwright {
namespace {

/// The line that `lines`, after the smallest plan of five lines, end in.
std::string refusal_of(const std::string& lines, const std::string& standards_line = {}) {
  try {
    static_cast<void>(parse_plan("[standards]\nspectra = [\"a.csv\"]\nreference = \"b.csv\"\n" +
                                     standards_line + "[[component]]\nname = \"water\"\n" + lines,
                                 "plan.toml"));
  } catch (const Error& error) {
    EXPECT_EQ(error.kind(), ErrorKind::Usage);
    return error.what();
  }
  return "no refusal";
}

TEST(PlanNotAvailable, KindsOfRegression) {
  for (const std::string kind : {"pls2", "pcr", "cls"}) {
    EXPECT_EQ(
        refusal_of("[regression]\nkind = \"" + kind + "\"\n"),
        "plan.toml:7: [regression] kind: \"" + kind + "\" is not available in this version (use \"pls\")");
    EXPECT_EQ(refusal_of("kind = \"" + kind + "\"\n"),
              "plan.toml:6: [[component]] 1 \"water\": kind: \"" + kind +
                  "\" is not available in this version (use \"pls\")");
  }
}

TEST(PlanNotAvailable, FactorRules) {
  const std::string available =
      "\"randomisation\" is not available in this version (available: \"f-test\" | \"minimum\" | "
      "\"one-standard-error\")";
  EXPECT_EQ(refusal_of("[regression]\nfactors = \"randomisation\"\n"),
            "plan.toml:7: [regression] factors: " + available);
  EXPECT_EQ(refusal_of("factors = \"randomisation\"\n"),
            "plan.toml:6: [[component]] 1 \"water\": factors: " + available);
}

TEST(PlanNotAvailable, Steps) {
  for (const std::string step : {"msc", "emsc", "detrend", "baseline", "offset", "normalise"}) {
    const std::string rest =
        "\"" + step + "\" is not available in this version (available: \"savitzky-golay\" | \"snv\")";
    EXPECT_EQ(refusal_of("[pretreatment]\nsteps = [\"snv\", \"" + step + "\"]\n"),
              "plan.toml:7: [pretreatment] steps 2: " + rest);
    EXPECT_EQ(refusal_of("steps = [{ step = \"" + step + "\", by = \"area\" }]\n"),
              "plan.toml:6: [[component]] 1 \"water\": steps 1: step: " + rest);
  }
  EXPECT_EQ(refusal_of("[pretreatment]\nsteps = [\"absorbance\"]\n"),
            "plan.toml:7: [pretreatment] steps 1: \"absorbance\" is not available in this version "
            "(convert the spectra to absorbance first)");
}

TEST(PlanNotAvailable, Ordinates) {
  for (const std::string ordinate : {"transmittance", "percent-transmittance", "reflectance"}) {
    const std::string rest = "ordinate: \"" + ordinate +
                             "\" is not available in this version (convert the spectra to absorbance first)";
    EXPECT_EQ(refusal_of({}, "ordinate = \"" + ordinate + "\"\n"), "plan.toml:4: [standards] " + rest);
    EXPECT_EQ(
        refusal_of("[validation]\nordinate = \"" + ordinate + "\"\nspectra = [\"a\"]\nreference = \"b\"\n"),
        "plan.toml:7: [validation] " + rest);
  }
}

TEST(PlanNotAvailable, Intervals) {
  EXPECT_EQ(refusal_of("[interval]\nkind = \"cross-validated\"\n"),
            "plan.toml:7: [interval] kind: \"cross-validated\" is not available in this version (use "
            "\"propagated\")");
}

TEST(PlanNotAvailable, Keys) {
  EXPECT_EQ(refusal_of("report_as = \"acid value\"\n"),
            "plan.toml:6: [[component]] 1 \"water\": report_as: not available in this version "
            "(remove this key; give reference values and limits in the unit to report)");
  EXPECT_EQ(
      refusal_of("molar_mass = 18.015\n"),
      "plan.toml:6: [[component]] 1 \"water\": molar_mass: not available in this version (remove this key)");
  EXPECT_EQ(refusal_of("[regression]\ncompare = [\"pcr\"]\n"),
            "plan.toml:7: [regression] compare: not available in this version (remove this key)");
}

TEST(PlanNotAvailable, Tables) {
  EXPECT_EQ(refusal_of("[[pure]]\ncomponent = \"water\"\nfile = \"water.csv\"\n"),
            "plan.toml:6: [[pure]]: not available in this version (remove this table from the plan)");
  EXPECT_EQ(refusal_of("[disturbance]\nspectra = [\"t.csv\"]\n"),
            "plan.toml:6: [disturbance]: not available in this version (remove this table from the plan)");
  EXPECT_EQ(refusal_of("[revalidation]\n"),
            "plan.toml:6: [revalidation]: not available in this version (remove this table from the plan)");
}

TEST(PlanNotAvailable, AWordBelongsToItsOwnKeyOnly) {
  EXPECT_NE(find_not_available("regression", "kind", "pls2"), nullptr);
  EXPECT_EQ(find_not_available("interval", "kind", "pls2"), nullptr);
  EXPECT_EQ(find_not_available("regression", "kind", "pls"), nullptr);
  EXPECT_EQ(find_not_available("regression", "kind"), nullptr);
}

}  // namespace
}  // namespace bandwright
