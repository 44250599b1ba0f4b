// SPDX-License-Identifier: Apache-2.0
#include "formats/csv_orientation.hpp"

#include <gtest/gtest.h>

#include <string>
#include <vector>

#include "formats/refusal.hpp"

namespace bandwright {
namespace {

struct Found {
  Orientation orientation;
  std::vector<Warning> warnings;
};

Found found(std::string_view text) {
  const DelimitedText csv(text, "x.csv");
  std::vector<Warning> warnings;
  const Orientation orientation = orientation_of(csv, warnings);
  return {orientation, std::move(warnings)};
}

std::string refusal_of(std::string_view text) {
  return refusal([&] { found(text); });
}

const std::string kForm =
    " (the first row is a label, then the axis values; every further row an id, then the ordinates)";

TEST(CsvOrientation, FollowsFromWhereTheAxisStands) {
  for (const char* rows : {"sample,4000,3998\nS1,1,2\n", "sample,4000,3998\n17,1,2\n3,1,2\n9,1,2\n",
                           ",4000,3998\nS1,1,2\n", "x,4000\nS1,1\n", "nm;1,5;2,5\nA;1;2\n"}) {
    const Found result = found(rows);
    EXPECT_EQ(result.orientation, Orientation::Rows) << rows;
    EXPECT_TRUE(result.warnings.empty()) << rows;
  }
  for (const char* columns : {"cm-1,S1,S2\n4000,1,2\n3998,1,2\n", "nm,S1\n1000,1\n",
                              "x;S1;2\n1000,5;1;2\n1001,5;1;2\n", "x,S1,S2\n4000,1,2\nn/a,1,2\n"}) {
    const Found result = found(columns);
    EXPECT_EQ(result.orientation, Orientation::Columns) << columns;
    EXPECT_TRUE(result.warnings.empty()) << columns;
  }
}

TEST(CsvOrientation, NumbersBelowTheInfraredAreIdsIfTheOthersAreNot) {
  const Found rows = found("sample,4000,3998\n1,0.1,0.2\n2,0.1,0.2\n");
  EXPECT_EQ(rows.orientation, Orientation::Rows);
  ASSERT_EQ(rows.warnings.size(), 1U);
  EXPECT_EQ(rows.warnings.front().one_line(),
            "x.csv: the first row and the first column are both numbers; the row was read as the axis and "
            "the column as "
            "ids, because an infrared axis has no value below 10");
  for (const char* text : {"nm,1,2,3\n1000,1,2,3\n1002,1,2,3\n", "nm,17,3,9\n1000,1,2,3\n1002,1,2,3\n"}) {
    const Found columns = found(text);
    EXPECT_EQ(columns.orientation, Orientation::Columns);
    ASSERT_EQ(columns.warnings.size(), 1U);
    EXPECT_EQ(columns.warnings.front().one_line(),
              "x.csv: the first row and the first column are both numbers; the column was read as the axis "
              "and the row as "
              "ids, because an infrared axis has no value below 10");
  }
}

TEST(CsvOrientation, RefusesWhatCannotBeToldApart) {
  const std::string reason =
      "line 1: the first row and the first column could both be the axis (give the spectra ids that are not "
      "numbers, "
      "such as S101)";
  EXPECT_EQ(refusal_of("sample,4000,3998\n101,1,2\n102,1,2\n"), reason);
  EXPECT_EQ(refusal_of("sample,1,2\n1,1,2\n2,1,2\n"), reason);
}

TEST(CsvOrientation, OwnLabelSettlesIt) {
  EXPECT_EQ(found("spectrum id [nm],4000,3998\n101,1,2\n102,1,2\n").orientation, Orientation::Rows);
  EXPECT_EQ(found("spectrum id,1,2\n100,1,2\n102,1,2\n").orientation, Orientation::Rows);
}

TEST(CsvOrientation, AHeadingOfMostlyNumbersIsAFaultyAxis) {
  EXPECT_EQ(found("sample,4000,399B,3996\n101,1,2,3\n").orientation, Orientation::Rows);
  EXPECT_EQ(found("sample,4000,3996,3998\n101,1,2,3\n102,1,2,3\n").orientation, Orientation::Rows);
}

TEST(CsvOrientation, RefusesFilesWithoutAxisOrHeading) {
  EXPECT_EQ(refusal_of("sample,water,fat\nS1,1,2\n"),
            "line 1: neither the first row nor the first column holds an axis" + kForm);
  EXPECT_EQ(refusal_of("4000,0.1\n3998,0.2\n"),
            "line 1: field 1: the heading begins with the number \"4000\" where a label is expected (comma "
            "between the "
            "fields)" +
                kForm);
  EXPECT_EQ(refusal_of("sample 4000 3998\nS1 1 2\n"),
            "line 1: the heading has one field only, so there is no axis (fields are separated by comma, "
            "semicolon or tab)");
}

}  // namespace
}  // namespace bandwright
