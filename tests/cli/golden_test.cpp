// SPDX-License-Identifier: Apache-2.0
// The comparison of golden files must itself notice what it is there to notice. Worked by hand.
#include "cli/golden.hpp"

#include <gtest/gtest.h>

namespace bandwright::cli_tests {
namespace {

TEST(CliGolden, NumbersMayMoveByOneLastDigit) {
  EXPECT_EQ(text_difference("RMSEC  1.74\n", "RMSEC  1.75\n"), "");
  EXPECT_EQ(text_difference("Q 9.412e-08", "Q 9.413e-08"), "");
  EXPECT_EQ(text_difference("n 19", "n 20"), "");
  EXPECT_NE(text_difference("RMSEC  1.74\n", "RMSEC  1.76\n"), "");
  EXPECT_NE(text_difference("Q 9.412e-08", "Q 9.412e-09"), "");
}

TEST(CliGolden, ASignThatAppearsTakesABlankOfThePadding) {
  EXPECT_EQ(text_difference("a   0.00  b", "a  -0.01  b"), "");
  EXPECT_NE(text_difference("a   0.00  b", "a   -0.01  b"), "");
}

TEST(CliGolden, TextAndNamesAreExact) {
  EXPECT_NE(text_difference("water  1.0", "waters  1.0"), "");
  EXPECT_NE(text_difference("S01-r1", "S01-r2"), "");
  EXPECT_NE(text_difference("model 245d81538a8a", "model 245d81538a8b"), "");
  EXPECT_NE(text_difference("T2 limit", "T3 limit"), "");
  EXPECT_NE(text_difference("a\nb\n", "a\nb\nc\n"), "");
}

TEST(CliGolden, JsonNumbersAgreeToTheNinthDigitOfTheLargestInTheirList) {
  EXPECT_EQ(json_difference(R"({"a":[1.0,1e-12]})", R"({"a":[1.0000000001,2e-12]})"), "");
  EXPECT_NE(json_difference(R"({"a":[1.0,1e-12]})", R"({"a":[1.00000001,1e-12]})"), "");
  EXPECT_NE(json_difference(R"({"a":1e-12})", R"({"a":2e-12})"), "");
  EXPECT_NE(json_difference(R"({"a":1})", R"({"a":null})"), "");
  EXPECT_NE(json_difference(R"({"a":1})", R"({"a":1,"b":2})"), "");
  EXPECT_NE(json_difference(R"({"a":"x"})", R"({"a":"y"})"), "");
}

}  // namespace
}  // namespace bandwright::cli_tests
