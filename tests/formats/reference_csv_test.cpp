// SPDX-License-Identifier: Apache-2.0
#include "formats/reference_csv.hpp"

#include <gtest/gtest.h>
#include <rapidcheck/gtest.h>

#include <cmath>
#include <limits>
#include <string>
#include <vector>

#include "formats/files.hpp"
#include "formats/refusal.hpp"

namespace bandwright {
namespace {

constexpr std::size_t kLargestTestFile = 1 << 24;
constexpr double kNotDetermined = std::numeric_limits<double>::quiet_NaN();

ReferenceTable parse(std::string_view text, const ReferenceColumns& wanted) {
  return parse_reference_table(text, "ref.csv", wanted).table;
}

std::string refusal_of(std::string_view text, const ReferenceColumns& wanted) {
  return refusal([&] { static_cast<void>(parse(text, wanted)); });
}

ReferenceColumns only(std::vector<std::string> components) { return {.components = std::move(components)}; }

TEST(ReferenceCsv, ReadsTheColumnsAskedForWithTheirUnits) {
  const ReferenceTable table = parse(
      "sample,fat [wt%],remark,water[ g/L ],batch,sd\nS1,1.5,\"ok, fine\",60,B1,0.1\n\nS2,,n/a,61.5,B2,\n",
      {.components = {"water", "fat"}, .group = "batch", .further = {"sd", "water"}});
  EXPECT_EQ(table.samples, (std::vector<std::string>{"S1", "S2"}));
  EXPECT_EQ(table.origins[1].line, 4U);
  EXPECT_EQ(table.origins[1].file, "ref.csv");
  ASSERT_EQ(table.columns.size(), 3U);
  EXPECT_EQ(table.columns[0].name, "water");
  EXPECT_EQ(table.columns[0].unit, "g/L");
  EXPECT_EQ(table.columns[0].values, Eigen::Vector2d(60, 61.5));
  EXPECT_EQ(table.columns[1].unit, "wt%");
  EXPECT_EQ(table.columns[1].values[0], 1.5);
  EXPECT_TRUE(std::isnan(table.columns[1].values[1]));
  EXPECT_EQ(table.columns[2].name, "sd");
  EXPECT_TRUE(table.columns[2].unit.empty());
  EXPECT_EQ(table.groups, (std::vector<std::string>{"B1", "B2"}));
}

TEST(ReferenceCsv, EveryDialectGivesTheSameTable) {
  for (const char* text :
       {"sample,water\nS1,0.5\nS2,\n", "id;water\r\nS1;0,5\r\nS2;\r\n", "\twater\rS1\t0,5\rS2\t\r",
        "\xEF\xBB\xBF\"a b\",\"water\"\n\"S1\",\"0.5\"\n\"S2\",\" \"\n"}) {
    const ReferenceTable table = parse(text, only({"water"}));
    EXPECT_EQ(table.samples, (std::vector<std::string>{"S1", "S2"})) << text;
    EXPECT_EQ(table.columns[0].values[0], 0.5) << text;
    EXPECT_TRUE(std::isnan(table.columns[0].values[1])) << text;
  }
}

TEST(ReferenceCsv, LatinHeadingsAreConvertedWithAWarning) {
  const ReferenceCsv result = parse_reference_table("Probe;S\xE4ure\n1;2\n", "ref.csv", only({"S\u00E4ure"}));
  EXPECT_EQ(result.table.columns[0].values[0], 2.0);
  ASSERT_EQ(result.warnings.size(), 1U);
  EXPECT_EQ(result.warnings[0].one_line(), "ref.csv: the text is not UTF-8; it was read as Windows-1252");
}

TEST(ReferenceCsv, HeadingsAreListedWithTheirUnits) {
  const std::vector<ReferenceHeading> headings =
      reference_headings("sample,a [b] [c],[d],,e []\n", "ref.csv");
  ASSERT_EQ(headings.size(), 4U);
  EXPECT_EQ(headings[0].name, "a [b]");
  EXPECT_EQ(headings[0].unit, "c");
  EXPECT_EQ(headings[1].name, "[d]");
  EXPECT_EQ(headings[2].name, "");
  EXPECT_EQ(headings[3].name, "e");
  EXPECT_EQ(headings[3].unit, "");
}

TEST(ReferenceCsv, NoColumnNeedBeAskedFor) {
  EXPECT_EQ(parse("sample\nS1\nS2\n", {}).samples.size(), 2U);
  EXPECT_EQ(parse("sample,batch\nS1,B1\n", {.components = {}, .group = "batch"}).groups.front(), "B1");
}

struct Refusal {
  const char* text;
  ReferenceColumns wanted;
  const char* message;
};

TEST(ReferenceCsv, RefusesWithOneClearLine) {
  const ReferenceColumns water = only({"water"});
  const std::vector<Refusal> table = {
      {"", water, "ref.csv: the file is empty"},
      {"sample,water\n", water, "ref.csv:1: no samples below the heading"},
      {"sample,watr,fat\nS1,1,2\n", water,
       "ref.csv:1: there is no column \"water\" (did you mean \"watr\"? columns: \"watr\", \"fat\")"},
      {"sample,fat [g]\nS1,2\n", water, "ref.csv:1: there is no column \"water\" (columns: \"fat\")"},
      {"sample,fat [g]\nS1,2\n", only({"fat [g]"}),
       "ref.csv:1: there is no column \"fat [g]\" (did you mean \"fat\"? columns: \"fat\")"},
      {"sample\nS1\n", water,
       "ref.csv:1: there is no column \"water\" (there are no columns besides the sample ids)"},
      {"sample,a,b,c,d,e,f,g,h,i,j,k,l,m,n\n", water,
       "ref.csv:1: there is no column \"water\" (columns: \"a\", \"b\", \"c\", \"d\", \"e\", \"f\", \"g\", "
       "\"h\", \"i\", "
       "\"j\", \"k\", \"l\" and 2 more)"},
      {"sample,water,water [g]\nS1,1,2\n", water,
       "ref.csv:1: field 3: the heading \"water\" is already at field 2"},
      {"sample,water\nS1,<0.5\n", water,
       "ref.csv:2: column \"water\": \"<0.5\" is not a number (leave the cell empty if the value was not "
       "determined)"},
      {"sample,water\nS1,nan\n", water,
       "ref.csv:2: column \"water\": \"nan\" is not a finite number (leave the cell empty if the value was "
       "not "
       "determined)"},
      {"sample;water\nS1;1.234,5\n", water,
       "ref.csv:2: column \"water\": \"1.234,5\" holds both a point and a comma (write numbers without "
       "thousands "
       "separators)"},
      {"sample,water\nS1,1\nS2,2\n\nS1,3\n", water,
       "ref.csv:5: field 1: the sample \"S1\" is already at line 2 (one row a sample)"},
      {"sample,water\n,1\n", water, "ref.csv:2: field 1: the sample has no id"},
      {"sample,water\nS1,1,2\n", water, "ref.csv:2: the line has 3 fields, the heading has 2"},
      {"sample,water\nS1\n", water, "ref.csv:2: the line has 1 fields, the heading has 2"},
      {"sample,batch\nS1,B1\nS2,\n",
       {.components = {}, .group = "batch"},
       "ref.csv:3: column \"batch\": the group of the sample is missing (every sample needs a group; one of "
       "its own will "
       "do)"},
      {"sample,water\nS1,1\n",
       {.components = {"water"}, .group = {}, .further = {"water sd"}},
       "ref.csv:1: there is no column \"water sd\" (columns: \"water\")"},
  };
  for (const Refusal& line : table) EXPECT_EQ(refusal_of(line.text, line.wanted), line.message);
}

TEST(ReferenceCsv, MeatsAndBeerLambertAreReadWhole) {
  const std::string meats = BANDWRIGHT_TEST_DATA "/meats/reference.csv";
  const ReferenceTable table =
      parse(read_text_file(meats, kLargestTestFile), only({"water", "fat", "protein"}));
  EXPECT_EQ(table.samples.size(), 215U);
  EXPECT_EQ(table.columns[1].unit, "%");
  EXPECT_EQ(table.columns[1].values[0], 22.5);  // second line of the file
  for (const ReferenceColumn& column : table.columns) EXPECT_TRUE(column.values.allFinite());
  const std::string synthetic = BANDWRIGHT_TEST_DATA "/beerlambert4/reference.csv";
  const ReferenceTable amounts =
      parse(read_text_file(synthetic, kLargestTestFile), only({"A", "B", "C", "D"}));
  EXPECT_EQ(amounts.samples.size(), 41U);
  EXPECT_EQ(amounts.columns[3].unit, "g/L");
  EXPECT_EQ(amounts.columns[3].values[0], 10.0);
}

TEST(ReferenceCsv, WriterGivesOneRowASample) {
  const ReferenceTable table{.samples = {"S1", "-2"},
                             .origins = {{}, {}},
                             .columns = {{"water", "wt%", Eigen::Vector2d(0.1, kNotDetermined)},
                                         {"x [a]", "", Eigen::Vector2d(1e-300, -3)}},
                             .groups = {"B,1", "=B2"}};
  EXPECT_EQ(format_reference_table(table, "batch"),
            "sample,water [wt%],x [a] [],batch\nS1,0.1,1e-300,\"B,1\"\n'-2,,-3,'=B2\n");
}

rc::Gen<std::string> any_name() {
  return rc::gen::suchThat(
      rc::gen::container<std::string>(rc::gen::element('a', 'b', '[', ']', ',', ';', '"', '=', '\'', ' ')),
      [](const std::string& name) { return !name.empty() && name.front() != ' ' && name.back() != ' '; });
}

RC_GTEST_PROP(ReferenceCsv, WhatIsWrittenReadsBack, ()) {
  const auto samples = *rc::gen::nonEmpty(rc::gen::unique<std::vector<std::string>>(any_name()));
  const auto names = *rc::gen::unique<std::vector<std::string>>(any_name());
  ReferenceTable table{.samples = samples, .origins = {}, .columns = {}, .groups = {}};
  ReferenceColumns wanted = only(names);
  for (const std::string& name : names) {
    ReferenceColumn column{name, *rc::gen::element<std::string>("", "wt%", "g/L"),
                           Vector(static_cast<Index>(samples.size()))};
    for (double& value : column.values) {
      const bool determined = *rc::gen::arbitrary<bool>();
      value = determined ? static_cast<double>(*rc::gen::arbitrary<int>()) / 3.0 : kNotDetermined;
    }
    table.columns.push_back(column);
  }
  if (*rc::gen::arbitrary<bool>()) {
    wanted.group = "the group";
    for (std::size_t i = 0; i < samples.size(); ++i) table.groups.push_back(*any_name());
  }
  const ReferenceTable back = parse(format_reference_table(table, "the group"), wanted);
  RC_ASSERT(back.samples == table.samples);
  RC_ASSERT(back.groups == table.groups);
  RC_ASSERT(back.columns.size() == table.columns.size());
  for (std::size_t k = 0; k < names.size(); ++k) {
    RC_ASSERT(back.columns[k].name == names[k]);
    RC_ASSERT(back.columns[k].unit == table.columns[k].unit);
    for (Index i = 0; i < table.columns[k].values.size(); ++i) {
      const double want = table.columns[k].values[i];
      const double got = back.columns[k].values[i];
      RC_ASSERT((std::isnan(want) && std::isnan(got)) || got == want);
    }
  }
}

}  // namespace
}  // namespace bandwright
