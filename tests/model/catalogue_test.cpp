// SPDX-License-Identifier: Apache-2.0
#include "model/catalogue.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <cstdlib>
#include <fstream>
#include <limits>
#include <set>
#include <sstream>
#include <string>

#include "base/error.hpp"

namespace bandwright {
namespace {

TEST(Catalogue, EveryStatisticIsExplainedOnceWithItsSource) {
  std::set<std::string_view> keys;
  std::set<std::string_view> labels;
  for (const Statistic& s : catalogue()) {
    EXPECT_TRUE(keys.insert(s.key).second) << s.key;
    EXPECT_TRUE(labels.insert(s.label).second) << s.label;
    EXPECT_FALSE(s.definition.empty()) << s.key;
    EXPECT_FALSE(s.source.empty()) << s.key;
  }
}

TEST(Catalogue, NoSourceClaimsConformity) {
  for (const Statistic& s : catalogue()) {
    EXPECT_EQ(s.source.find("conform"), std::string_view::npos) << s.key;
    const bool standard =
        s.source.find("ASTM") != std::string_view::npos || s.source.find("ISO") != std::string_view::npos;
    EXPECT_TRUE(!standard || s.source.starts_with("formula of ")) << s.key;
  }
}

TEST(Catalogue, DigitsFollowTheKindOfQuantity) {
  EXPECT_EQ(shown(statistic("rmsecv"), 0.012345, component_decimals(0.012345)), "0.0123");
  EXPECT_EQ(shown(statistic("bias"), -0.00001, component_decimals(0.012345)), "0.0000");  // no negative zero
  EXPECT_EQ(shown(statistic("r2"), 0.99456, 2), "0.9946");
  EXPECT_EQ(shown(statistic("n"), 24.0, 2), "24");
  EXPECT_EQ(shown(statistic("t2"), 9.856873, 2), "9.857");
  EXPECT_EQ(shown(statistic("q"), 1.23456e-7, 2), "1.235e-07");
  EXPECT_EQ(shown(statistic("sep"), std::numeric_limits<double>::quiet_NaN(), 2), "-");
}

TEST(Catalogue, UnknownKeyIsAFaultOfTheProgram) {
  try {
    static_cast<void>(statistic("rmse"));
    FAIL() << "an unknown key was found";
  } catch (const Error& error) {
    EXPECT_EQ(error.kind(), ErrorKind::Internal);
    EXPECT_STREQ(error.what(), "no statistic \"rmse\" in the catalogue");
  }
}

std::string statistics_page() {
  std::string page =
      "# Statistics\n\nEvery statistic that the program shows, in its own words. Errors are predicted - "
      "reference. \"From memory\" "
      "means\nthat the formula was not checked against a copy of the document it comes from; \"common "
      "practice\" that no single\n"
      "source is followed. Numbers are computed with these formulas; no conformity with any standard is "
      "claimed.\n\n"
      "| statistic | key | definition | source |\n|---|---|---|---|\n";
  for (const Statistic& s : catalogue()) {
    std::string definition(s.definition);
    for (std::size_t at = definition.find('|'); at != std::string::npos; at = definition.find('|', at + 2))
      definition.insert(at, "\\");
    page += "| " + std::string(s.label) + " | `" + std::string(s.key) + "` | " + definition + " | " +
            std::string(s.source) + " |\n";
  }
  return page;
}

TEST(Catalogue, DocumentationPageIsMadeFromIt) {
  const std::string path = std::string(BANDWRIGHT_TEST_DATA) + "/../../docs/statistics.md";
  if (std::getenv("BANDWRIGHT_REGENERATE") != nullptr) std::ofstream(path) << statistics_page();
  std::ostringstream text;
  text << std::ifstream(path).rdbuf();
  EXPECT_EQ(text.str(), statistics_page())
      << "run this test with BANDWRIGHT_REGENERATE=1 to write docs/statistics.md again";
}

}  // namespace
}  // namespace bandwright
