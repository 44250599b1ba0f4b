// SPDX-License-Identifier: Apache-2.0
#include <gtest/gtest.h>

#include <cstdlib>
#include <fstream>
#include <sstream>
#include <string>
#include <vector>

#include "records/plan.hpp"

namespace bandwright {
namespace {

const std::string kReadme = std::string(BANDWRIGHT_TEST_DATA) + "/../../README.md";
const std::string kPage = std::string(BANDWRIGHT_TEST_DATA) + "/../../docs/plan.md";
constexpr std::string_view kBegin = "<!-- option tables: generated, do not edit -->\n";
constexpr std::string_view kEnd = "<!-- end of the option tables -->\n";

std::string read_page(const std::string& path = kPage) {
  std::ifstream file(path, std::ios::binary);
  std::ostringstream text;
  text << file.rdbuf();
  return text.str();
}

/// The texts between "```toml" and "```".
std::vector<std::string> example_plans(const std::string& page) {
  constexpr std::string_view kOpen = "```toml\n";
  std::vector<std::string> plans;
  for (std::size_t at = page.find(kOpen); at != std::string::npos; at = page.find(kOpen, at)) {
    at += kOpen.size();
    const std::size_t end = page.find("```", at);
    plans.push_back(page.substr(at, end - at));
    at = end;
  }
  return plans;
}

// With BANDWRIGHT_REGENERATE=1 in the environment the page is rewritten; look at the difference.
TEST(PlanDocs, OptionTablesAreThoseOfTheProgram) {
  std::string page = read_page();
  const std::size_t begin = page.find(kBegin);
  const std::size_t end = page.find(kEnd);
  ASSERT_NE(begin, std::string::npos) << kPage;
  ASSERT_NE(end, std::string::npos) << kPage;
  const std::size_t from = begin + kBegin.size();
  const std::string wanted = "\n" + plan_reference_markdown() + "\n";
  if (std::getenv("BANDWRIGHT_REGENERATE") != nullptr) {
    page.replace(from, end - from, wanted);
    std::ofstream(kPage, std::ios::binary) << page;
    return;
  }
  EXPECT_EQ(page.substr(from, end - from), wanted)
      << "docs/plan.md is behind the program: run this test once with BANDWRIGHT_REGENERATE=1";
}

TEST(PlanDocs, EveryExampleIsAPlan) {
  const std::vector<std::string> plans = example_plans(read_page());
  ASSERT_EQ(plans.size(), 2u);
  for (const std::string& text : plans) {
    const Plan plan = parse_plan(text, "docs/plan.md");
    EXPECT_FALSE(plan.recipe.title.empty());
    EXPECT_EQ(plan.recipe.components.size(), 3u);
  }
}

TEST(PlanDocs, TheTourInTheReadmeIsAPlan) {
  const std::vector<std::string> plans = example_plans(read_page(kReadme));
  ASSERT_EQ(plans.size(), 1u);
  const Plan plan = parse_plan(plans[0], "README.md");
  EXPECT_EQ(plan.recipe.windows.size(), 2u);
  EXPECT_EQ(plan.recipe.components[0].spec_max, 0.30);
}

}  // namespace
}  // namespace bandwright
