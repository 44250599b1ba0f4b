// SPDX-License-Identifier: Apache-2.0
#include "base/number_text.hpp"

#include <gtest/gtest.h>

#include <bit>
#include <cmath>
#include <limits>

#include "base/random.hpp"

namespace bandwright {
namespace {

constexpr double kInfinity = std::numeric_limits<double>::infinity();
constexpr double kNan = std::numeric_limits<double>::quiet_NaN();

TEST(NumberText, ReadsDecimalNumbers) {
  EXPECT_EQ(parse_number("0.1"), 0.1);
  EXPECT_EQ(parse_number("-12"), -12.0);
  EXPECT_EQ(parse_number("+3.5"), 3.5);
  EXPECT_EQ(parse_number(" \t1e-3 "), 1e-3);
  EXPECT_EQ(parse_number("1E5"), 1e5);
  EXPECT_EQ(parse_number(".5"), 0.5);
  EXPECT_EQ(parse_number("5."), 5.0);
  EXPECT_EQ(parse_number("1.7976931348623157e308"), std::numeric_limits<double>::max());
  EXPECT_EQ(parse_number("5e-324"), std::numeric_limits<double>::denorm_min());
  const auto zero = parse_number("-0");
  ASSERT_TRUE(zero.has_value());
  EXPECT_TRUE(std::signbit(*zero));
}

TEST(NumberText, RefusesEverythingElse) {
  for (const char* text : {"",       " ",      "+",   "-",   "++1",   "+-1", "1,5", "1.2.3",    "12a",
                           "a",      "0x10",   "1 2", "inf", "-inf",  "nan", "NaN", "infinity", "1e400",
                           "-1e400", "1e-400", "1e",  ".",   "1_000", "\n1", "١"})
    EXPECT_FALSE(parse_number(text).has_value()) << '"' << text << '"';
  EXPECT_FALSE(parse_number(std::string_view("1\0", 2)).has_value());
}

TEST(NumberText, ExactTextReadsBackAsTheSameBits) {
  for (const double value :
       {0.1, -0.0, 1.0 / 3.0, 5e-324, 1.7976931348623157e308, 123456789012345680.0, 1e21})
    EXPECT_EQ(std::bit_cast<std::uint64_t>(parse_number(exact_text(value)).value()),
              std::bit_cast<std::uint64_t>(value));
  Random random(1);
  for (int i = 0; i < 20000; ++i) {
    const auto value = std::bit_cast<double>(random.next());
    if (!std::isfinite(value)) continue;
    EXPECT_EQ(std::bit_cast<std::uint64_t>(parse_number(exact_text(value)).value()),
              std::bit_cast<std::uint64_t>(value));
  }
}

TEST(NumberText, ExactTextIsShort) {
  EXPECT_EQ(exact_text(0.1), "0.1");
  EXPECT_EQ(exact_text(-2.5), "-2.5");
  EXPECT_EQ(exact_text(1e-9), "1e-09");
}

TEST(NumberText, RoundsTheBinaryValue) {
  EXPECT_EQ(rounded_text(2.345, 2), "2.35");  // 2.34500000000000019984
  EXPECT_EQ(rounded_text(1.005, 2), "1.00");  // 1.00499999999999989342
  EXPECT_EQ(rounded_text(0.125, 2), "0.12");  // a tie goes to the even digit
  EXPECT_EQ(rounded_text(0.375, 2), "0.38");
  EXPECT_EQ(rounded_text(999.96, 1), "1000.0");
  EXPECT_EQ(rounded_text(1234567.0, 0), "1234567");
  EXPECT_EQ(rounded_text(12.3, -2), "12");
}

TEST(NumberText, ZeroHasNoSignAndNonsenseIsADash) {
  EXPECT_EQ(rounded_text(-0.001, 2), "0.00");
  EXPECT_EQ(rounded_text(-0.0, 0), "0");
  EXPECT_EQ(rounded_text(-0.006, 2), "-0.01");
  for (const double value : {kNan, kInfinity, -kInfinity}) {
    EXPECT_EQ(rounded_text(value, 3), "-");
    EXPECT_EQ(significant_text(value, 3), "-");
  }
}

TEST(NumberText, SignificantDigits) {
  EXPECT_EQ(significant_text(0.0, 3), "0");
  EXPECT_EQ(significant_text(12.345, 3), "12.3");
  EXPECT_EQ(significant_text(-0.00012345, 3), "-0.000123");
  EXPECT_EQ(significant_text(0.000012345, 3), "1.23e-05");
  EXPECT_EQ(significant_text(1234567.0, 3), "1.23e+06");
  EXPECT_EQ(significant_text(123456.0, 3), "123456");
  EXPECT_EQ(significant_text(1.0, 1), "1");
}

TEST(NumberText, RoundingUpToTheNextPowerAddsNoDigit) {
  EXPECT_EQ(significant_text(9.999, 3), "10.0");
  EXPECT_EQ(significant_text(0.09999, 3), "0.100");
  EXPECT_EQ(significant_text(999999.9, 3), "1.00e+06");
  EXPECT_EQ(significant_text(0.00009999, 3), "0.000100");
}

TEST(NumberText, DecimalsFollowTheError) {
  EXPECT_EQ(decimals_for_error(0.0123), 4);
  EXPECT_EQ(decimals_for_error(0.1), 3);
  EXPECT_EQ(decimals_for_error(1.0), 2);
  EXPECT_EQ(decimals_for_error(25.0), 1);
  EXPECT_EQ(decimals_for_error(12345.0), 0);
  EXPECT_EQ(decimals_for_error(1e-20), 10);
  for (const double none : {0.0, -1.0, kNan, kInfinity}) EXPECT_EQ(decimals_for_error(none), 3);
}

}  // namespace
}  // namespace bandwright
