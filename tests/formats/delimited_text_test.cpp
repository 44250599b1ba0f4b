// SPDX-License-Identifier: Apache-2.0
#include "formats/delimited_text.hpp"

#include <gtest/gtest.h>
#include <rapidcheck/gtest.h>

#include <string>
#include <vector>

#include "formats/refusal.hpp"

namespace bandwright {
namespace {

using Fields = std::vector<std::string>;

struct Line {
  std::size_t number;
  Fields fields;
  bool operator==(const Line&) const = default;
};

std::vector<Line> lines_of(std::string_view text) {
  const DelimitedText csv(text, "x.csv");
  RecordReader records(csv);
  std::vector<Line> lines;
  while (records.next())
    lines.push_back({records.line(), Fields(records.fields().begin(), records.fields().end())});
  return lines;
}

std::string refusal_of(std::string_view text) {
  return refusal([&] { lines_of(text); });
}

TEST(DelimitedText, EveryLineEndCountsAsOneLine) {
  const std::vector<Line> want = {{1, {"a", "b"}}, {2, {"1", "2"}}, {4, {"3", "4"}}};
  EXPECT_EQ(lines_of("a,b\n1,2\n\n3,4\n"), want);
  EXPECT_EQ(lines_of("a,b\r\n1,2\r\n\r\n3,4"), want);
  EXPECT_EQ(lines_of("a,b\r1,2\r\r3,4\r"), want);
  EXPECT_EQ(lines_of("a,b\r\n1,2\r\r3,4\n"), want);
}

TEST(DelimitedText, SeparatorComesFromTheHeading) {
  EXPECT_EQ(lines_of("a;b,c\n1;2\n"), (std::vector<Line>{{1, {"a", "b,c"}}, {2, {"1", "2"}}}));
  EXPECT_EQ(lines_of("a\tb,c\n1\t2;3\n"), (std::vector<Line>{{1, {"a", "b,c"}}, {2, {"1", "2;3"}}}));
  EXPECT_EQ(lines_of("a,b\n1,2;3\n"), (std::vector<Line>{{1, {"a", "b"}}, {2, {"1", "2;3"}}}));
  EXPECT_EQ(DelimitedText("a\n1;2\n", "x.csv").separator_name(), "comma");
  EXPECT_EQ(DelimitedText("\n  \na;b\n", "x.csv").separator_name(), "semicolon");
  EXPECT_EQ(DelimitedText("a\tb", "x.csv").separator_name(), "tab");
}

TEST(DelimitedText, SeparatorInsideQuotesIsNone) {
  EXPECT_EQ(lines_of("\"a;\"\"b\",c\n1,2\n"), (std::vector<Line>{{1, {"a;\"b", "c"}}, {2, {"1", "2"}}}));
  EXPECT_EQ(lines_of("\"a\n;b\",c\n1,2\n"), (std::vector<Line>{{1, {"a\n;b", "c"}}, {3, {"1", "2"}}}));
}

TEST(DelimitedText, QuotesHoldSeparatorsQuotesAndLineEnds) {
  EXPECT_EQ(
      lines_of("a,b\n\"x,y\" , \" z \"\n\"p\r\nq\rr\",\"\"\"\"\n1,2\n"),
      (std::vector<Line>{{1, {"a", "b"}}, {2, {"x,y", " z "}}, {3, {"p\r\nq\rr", "\""}}, {6, {"1", "2"}}}));
}

TEST(DelimitedText, QuoteInsideAPlainFieldIsOrdinary) {
  EXPECT_EQ(lines_of("a,b\n12\" cell,5\"\n"),
            (std::vector<Line>{{1, {"a", "b"}}, {2, {"12\" cell", "5\""}}}));
  EXPECT_EQ(lines_of("12\" a;b\n1;2\n"), (std::vector<Line>{{1, {"12\" a", "b"}}, {2, {"1", "2"}}}));
}

TEST(DelimitedText, BlanksAroundFieldsAndRecordsWithoutTextAreCut) {
  EXPECT_EQ(lines_of(" a , b \n , \n\"\",\n \t \n\t1\t,\n"),
            (std::vector<Line>{{1, {"a", "b"}}, {5, {"1", ""}}}));
  EXPECT_EQ(lines_of("a\t\tb\n"), (std::vector<Line>{{1, {"a", "", "b"}}}));
}

TEST(DelimitedText, TextsWithoutRecords) {
  for (const char* text : {"", "\n", " \r\n\t\r", "\xEF\xBB\xBF", ",,,\n"})
    EXPECT_TRUE(lines_of(text).empty()) << text;
}

TEST(DelimitedText, ByteOrderMarkIsCut) {
  EXPECT_EQ(lines_of("\xEF\xBB\xBF\"a\",b\n"), (std::vector<Line>{{1, {"a", "b"}}}));
}

TEST(DelimitedText, OtherTextsThanUtf8AreReadAsWindows1252WithAWarning) {
  const DelimitedText csv(
      "\xB0"
      "C,\x80,\xE4,\x9F\n",
      "x.csv");  // degree C, euro, a umlaut, Y diaeresis
  EXPECT_EQ(csv.text(), "\u00B0C,\u20AC,\u00E4,\u0178\n");
  ASSERT_EQ(csv.warnings().size(), 1U);
  EXPECT_EQ(csv.warnings().front().one_line(), "x.csv: the text is not UTF-8; it was read as Windows-1252");
  EXPECT_TRUE(DelimitedText("\u00B0C,b\n", "x.csv").warnings().empty());
}

TEST(DelimitedText, RefusesWhatIsNoText) {
  using namespace std::string_view_literals;
  EXPECT_EQ(
      refusal_of("a,b\r\n1,2\r3,\0\n"sv),
      "x.csv:3: byte 0x00 does not belong in a text (a CSV file is plain text; is this another format?)");
  EXPECT_EQ(
      refusal_of("PK\x03\x04 and so on"sv),
      "x.csv:1: byte 0x03 does not belong in a text (a CSV file is plain text; is this another format?)");
  EXPECT_EQ(refusal_of("\xFF\xFE"
                       "a\0,\0"sv),
            "x.csv: the text is UTF-16 (save it as CSV in UTF-8)");
}

TEST(DelimitedText, RefusesFaultyQuotes) {
  EXPECT_EQ(refusal_of("a,b\n1,\"2\n3,4\n"), "x.csv:2: field 2: a quote is opened and never closed");
  EXPECT_EQ(
      refusal_of("a,b\n\"1\"x,2\n"),
      "x.csv:2: field 1: text follows a closing quote (a quote inside a quoted field is written twice)");
}

TEST(DelimitedText, FieldsAndRecordsAreBounded) {
  const std::string longest(kLongestField, 'x');
  EXPECT_EQ(lines_of("a," + longest + "\n").front().fields.back().size(), kLongestField);
  EXPECT_EQ(refusal_of("a," + longest + "x\n"), "x.csv:1: field 2: longer than 65536 bytes");
  EXPECT_EQ(refusal_of("a,b\n1,\"" + longest + longest + "xx"),
            "x.csv:2: field 2: longer than 65536 bytes (is its quote ever closed?)");
  const std::string widest(kMostFields - 1, ',');
  EXPECT_EQ(lines_of("a" + widest).front().fields.size(), kMostFields);
  EXPECT_EQ(refusal_of("a," + widest), "x.csv:1: field 1000001: a line of more than 1000000 fields");
}

TEST(DelimitedText, TextIsBounded) {
  // The bytes are not looked at, so a view of the wrong length serves.
  const std::string_view too_large("a,b", kLargestText + 1);
  EXPECT_EQ(refusal([&] { const DelimitedText csv(too_large, "x.csv"); }),
            "x.csv: the text has 1073741825 bytes, more than the 1073741824 that are read");
}

/// Texts of the bytes that matter to the splitter.
rc::Gen<std::string> rough_text() {
  return rc::gen::container<std::string>(
      rc::gen::element('a', '1', ',', ';', '\t', ' ', '"', '\n', '\r', '.'));
}

RC_GTEST_PROP(DelimitedText, RecordsNeverOutnumberTheBoundAndLinesRise, ()) {
  const std::string text = *rough_text();
  try {
    const DelimitedText csv(text, "x.csv");
    RecordReader records(csv);
    std::size_t count = 0;
    std::size_t last = 0;
    while (records.next()) {
      ++count;
      RC_ASSERT(records.line() > last);
      last = records.line();
      for (const std::string_view field : records.fields()) RC_ASSERT(field.size() <= text.size());
    }
    RC_ASSERT(count <= csv.most_records());
  } catch (const Error& error) {
    RC_ASSERT(error.context().line > 0U);
  }
}

/// Splitting by a second, simple way: quotes aside, a field is what stands between separators.
RC_GTEST_PROP(DelimitedText, WithoutQuotesFieldsAreTheStretchesBetweenSeparators, ()) {
  const auto word = rc::gen::container<std::string>(rc::gen::element('a', 'b', '1', '.', '-'));
  const auto rows =
      *rc::gen::container<std::vector<Fields>>(rc::gen::nonEmpty(rc::gen::container<Fields>(word)));
  const char separator = *rc::gen::element(',', ';', '\t');
  const std::string line_end = *rc::gen::element<std::string>("\n", "\r\n", "\r");
  std::string text = std::string("h") + separator + "h" + line_end;
  std::vector<Line> want = {{1, {"h", "h"}}};
  for (std::size_t i = 0; i < rows.size(); ++i) {
    bool has_text = false;
    for (std::size_t j = 0; j < rows[i].size(); ++j) {
      text += (j > 0 ? std::string(1, separator) : "") + rows[i][j];
      has_text = has_text || !rows[i][j].empty();
    }
    text += line_end;
    if (has_text) want.push_back({i + 2, rows[i]});
  }
  RC_ASSERT(lines_of(text) == want);
}

}  // namespace
}  // namespace bandwright
