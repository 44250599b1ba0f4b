// SPDX-License-Identifier: Apache-2.0
#include "formats/cells.hpp"

#include <gtest/gtest.h>
#include <rapidcheck/gtest.h>

#include <cmath>
#include <string>

#include "base/number_text.hpp"
#include "formats/refusal.hpp"

namespace bandwright {
namespace {

const char* const kCommas = "a,b\n";
const char* const kSemicolons = "a;b\n";

double number(const char* heading, std::string_view cell) {
  const DelimitedText csv(heading, "x.csv");
  return NumberCells(csv).read(cell, 7, 3);
}

std::string refusal_of(const char* heading, std::string_view cell) {
  return refusal([&] { static_cast<void>(number(heading, cell)); });
}

TEST(NumberCells, ReadsPointsAndWhereItIsPossibleCommas) {
  EXPECT_EQ(number(kCommas, "0.5"), 0.5);
  EXPECT_EQ(number(kCommas, "+2"), 2.0);
  EXPECT_EQ(number(kCommas, "-1.5e-3"), -0.0015);
  EXPECT_EQ(number(kSemicolons, "0.5"), 0.5);
  EXPECT_EQ(number(kSemicolons, "0,5"), 0.5);
  EXPECT_EQ(number(kSemicolons, "-1,5E-3"), -0.0015);
  EXPECT_EQ(number("a\tb\n", ",5"), 0.5);
  EXPECT_EQ(number(kCommas, "5e-324"), 5e-324);
}

TEST(NumberCells, RefusesWhatIsNoFiniteNumberAndSaysWhy) {
  EXPECT_EQ(refusal_of(kCommas, ""), "line 7: field 3: the field is empty where a number is expected");
  EXPECT_EQ(refusal_of(kCommas, "n/a"), "line 7: field 3: \"n/a\" is not a number");
  EXPECT_EQ(refusal_of(kCommas, "<0.5"), "line 7: field 3: \"<0.5\" is not a number");
  EXPECT_EQ(refusal_of(kCommas, "0.5 %"), "line 7: field 3: \"0.5 %\" is not a number");
  EXPECT_EQ(refusal_of(kCommas, "0x10"), "line 7: field 3: \"0x10\" is not a number");
  EXPECT_EQ(refusal_of(kCommas, "e"), "line 7: field 3: \"e\" is not a number");
  EXPECT_EQ(refusal_of(kCommas, "inf"), "line 7: field 3: \"inf\" is not a finite number");
  EXPECT_EQ(refusal_of(kCommas, "-Infinity"), "line 7: field 3: \"-Infinity\" is not a finite number");
  EXPECT_EQ(refusal_of(kSemicolons, "NaN"), "line 7: field 3: \"NaN\" is not a finite number");
  EXPECT_EQ(refusal_of(kCommas, "1e400"),
            "line 7: field 3: \"1e400\" is outside the range of double-precision numbers");
  EXPECT_EQ(refusal_of(kCommas, "-1e-400"),
            "line 7: field 3: \"-1e-400\" is outside the range of double-precision numbers");
  EXPECT_EQ(refusal_of(kCommas, "\x1b[31m"), "line 7: field 3: \"\\x1b[31m\" is not a number");
}

TEST(NumberCells, ACommaIsNeverGuessedAt) {
  EXPECT_EQ(refusal_of(kCommas, "0,5"),
            "line 7: field 3: \"0,5\" is not a number (a decimal comma needs semicolons or tabs between the "
            "fields)");
  EXPECT_EQ(refusal_of(kSemicolons, "1.234,5"),
            "line 7: field 3: \"1.234,5\" holds both a point and a comma (write numbers without thousands "
            "separators)");
  EXPECT_EQ(refusal_of(kSemicolons, "1,234,5"), "line 7: field 3: \"1,234,5\" is not a number");
}

TEST(NumberCells, OneTextUsesOneDecimalSign) {
  const DelimitedText csv(kSemicolons, "x.csv");
  NumberCells numbers(csv);
  EXPECT_EQ(numbers.read("7", 1, 1), 7.0);
  EXPECT_EQ(numbers.read("0,5", 2, 3), 0.5);
  EXPECT_EQ(refusal([&] { static_cast<void>(numbers.read("1.234", 4, 2)); }),
            "line 4: field 2: \"1.234\" has a decimal point, but line 2, field 3 has a decimal comma (one "
            "file uses one "
            "decimal sign)");
  EXPECT_EQ(refusal([&] { static_cast<void>(numbers.read("n.d.", 5, 2)); }),
            "line 5: field 2: \"n.d.\" is not a number");
  EXPECT_EQ(numbers.read("0,25", 6, 3), 0.25);
}

TEST(CellText, IsPrintableAndCutBetweenCharacters) {
  EXPECT_EQ(cell_text("n/a"), "\"n/a\"");
  EXPECT_EQ(cell_text("a\nb"), "\"a\\x0ab\"");
  EXPECT_EQ(cell_text(std::string(40, 'x')), "\"" + std::string(40, 'x') + "\"");
  EXPECT_EQ(cell_text(std::string(41, 'x')), "\"" + std::string(40, 'x') + "...\"");
  EXPECT_EQ(cell_text(std::string(39, 'x') + "\u00E4\u00E4"), "\"" + std::string(39, 'x') + "...\"");
}

TEST(CellOfName, QuotesWhatTheSplitterWouldTakeApart) {
  EXPECT_EQ(cell_of_name("S01-r2"), "S01-r2");
  EXPECT_EQ(cell_of_name("a,b"), "\"a,b\"");
  EXPECT_EQ(cell_of_name("a;b"), "\"a;b\"");  // else the heading would be split at the semicolon
  EXPECT_EQ(cell_of_name("a\"b"), "\"a\"\"b\"");
  EXPECT_EQ(cell_of_name(" a"), "\" a\"");
  EXPECT_EQ(cell_of_name("a\r\nb"), "\"a\r\nb\"");
}

TEST(CellOfName, NoNameRunsAsAFormula) {
  EXPECT_EQ(cell_of_name("=1+1"), "'=1+1");
  EXPECT_EQ(cell_of_name("-5"), "'-5");
  EXPECT_EQ(cell_of_name("@a"), "'@a");
  EXPECT_EQ(cell_of_name("+a"), "'+a");
  EXPECT_EQ(cell_of_name("'=a"), "''=a");
  EXPECT_EQ(cell_of_name("'tis"), "'tis");
  EXPECT_EQ(name_of_cell("'=1+1"), "=1+1");
  EXPECT_EQ(name_of_cell("'tis"), "'tis");
  EXPECT_EQ(name_of_cell("=1+1"), "=1+1");
}

TEST(CellOfName, RefusesNamesThatCannotComeBack) {
  const std::string reason = " cannot be written to a CSV file: it is blank or holds bytes that are not text";
  EXPECT_EQ(refusal([] { static_cast<void>(cell_of_name("")); }, ErrorKind::Output),
            "the name \"\"" + reason);
  EXPECT_EQ(refusal([] { static_cast<void>(cell_of_name(" \n")); }, ErrorKind::Output),
            "the name \" \\x0a\"" + reason);
  EXPECT_EQ(refusal([] { static_cast<void>(cell_of_name("a\x01")); }, ErrorKind::Output),
            "the name \"a\\x01\"" + reason);
  EXPECT_EQ(refusal([] { static_cast<void>(cell_of_name("\xE4")); }, ErrorKind::Output),
            "the name \"\\xe4\"" + reason);
}

RC_GTEST_PROP(CellOfName, NamesComeBackThroughTheSplitterAndStartNoFormula, ()) {
  const std::string name =
      *rc::gen::suchThat(rc::gen::container<std::string>(rc::gen::element('a', '\'', '=', '-', ',', ';', '"',
                                                                          ' ', '\t', '\n', '\r', '@')),
                         [](const std::string& text) { return !is_blank(text); });
  const std::string cell = cell_of_name(name);
  RC_ASSERT(std::string_view("=+-@\t\r\n").find(cell[0] == '"' ? cell[1] : cell[0]) ==
            std::string_view::npos);
  const std::string text = "x," + cell + ",y\n";
  const DelimitedText csv(text, "x.csv");
  RecordReader records(csv);
  RC_ASSERT(records.next());
  RC_ASSERT(records.fields().size() == 3U);
  RC_ASSERT(std::string(name_of_cell(records.fields()[1])) == name);
}

/// Whatever the decimal sign, a cell reads as the same double.
RC_GTEST_PROP(NumberCells, CommaAndPointAgree, (int mantissa)) {
  const int exponent = *rc::gen::inRange(-12, 12);
  const double value = static_cast<double>(mantissa) * std::pow(10.0, exponent);
  const std::string with_point = exact_text(value);
  std::string with_comma = with_point;
  if (const auto at = with_comma.find('.'); at != std::string::npos) with_comma[at] = ',';
  RC_ASSERT(number(kCommas, with_point) == value);
  RC_ASSERT(number(kSemicolons, with_comma) == value);
}

}  // namespace
}  // namespace bandwright
