// SPDX-License-Identifier: Apache-2.0
#include "cli/text_table.hpp"

#include <gtest/gtest.h>

#include "base/error.hpp"

namespace bandwright::cli {
namespace {

TextTable small_table() {
  TextTable table;
  table.add_column("name", Align::Left);
  table.add_column("value");
  table.add_column("flags", Align::Left);
  return table;
}

TEST(TextTable, AlignsEachColumnAndEndsNoLineInBlanks) {
  TextTable table = small_table();
  table.add_row({"acid", "1.25", "saturated"});
  table.add_row({"water content", "-10.5", ""});
  EXPECT_EQ(table.text(),
            "name           value  flags\n"
            "acid            1.25  saturated\n"
            "water content  -10.5\n");
  EXPECT_EQ(table.text(2).substr(0, 8), "  name  ");
}

TEST(TextTable, CountsLettersAndNotBytes) {
  TextTable table = small_table();
  table.add_row({"S\xC3\xA4ure", "1", "x"});
  table.add_row({"Wassr", "2", "y"});
  EXPECT_EQ(table.text(),
            "name   value  flags\n"
            "S\xC3\xA4ure      1  x\n"
            "Wassr      2  y\n");
}

TEST(TextTable, CellsCannotSteerATerminalOrBreakALine) {
  TextTable table = small_table();
  table.add_row({"a\033[31m\nb", "1", ""});
  EXPECT_EQ(table.text(),
            "name            value  flags\n"
            "a\\x1b[31m\\x0ab      1\n");
}

TEST(TextTable, WithoutRowsIsEmpty) {
  TextTable table = small_table();
  EXPECT_TRUE(table.empty());
  EXPECT_EQ(table.text(), "name  value  flags\n");
}

TEST(TextTable, RefusesARowOfTheWrongLength) {
  TextTable table = small_table();
  EXPECT_THROW(table.add_row({"a"}), Error);
}

}  // namespace
}  // namespace bandwright::cli
