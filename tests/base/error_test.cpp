// SPDX-License-Identifier: Apache-2.0
#include "base/error.hpp"

#include <gtest/gtest.h>

namespace bandwright {
namespace {

std::string line_of(const std::string& message, ErrorContext context) {
  return Error(ErrorKind::Input, message, std::move(context)).what();
}

TEST(Error, LineHoldsWhatIsKnownInOneOrder) {
  EXPECT_EQ(line_of("bad", {}), "bad");
  EXPECT_EQ(line_of("bad", {.file = "a.csv", .line = 0, .field = {}, .hint = {}}), "a.csv: bad");
  EXPECT_EQ(line_of("bad", {.file = "a.csv", .line = 12, .field = {}, .hint = {}}), "a.csv:12: bad");
  EXPECT_EQ(line_of("bad", {.file = {}, .line = 12, .field = {}, .hint = {}}), "line 12: bad");
  EXPECT_EQ(line_of("bad", {.file = {}, .line = 0, .field = "points", .hint = {}}), "points: bad");
  EXPECT_EQ(line_of("bad", {.file = "a.csv", .line = 3, .field = "water", .hint = "mend it"}),
            "a.csv:3: water: bad (mend it)");
}

TEST(Error, LineStaysOneLineWhateverTheNamesHold) {
  EXPECT_EQ(line_of("name \"x\ny\"", {.file = "a\x1b[2J.csv", .line = 1, .field = "\t", .hint = "\r"}),
            "a\\x1b[2J.csv:1: \\x09: name \"x\\x0ay\" (\\x0d)");
}

TEST(Error, OuterContextFillsOnlyWhatWasUnknown) {
  const Error inner(ErrorKind::Numerical, "bad", {.file = {}, .line = 0, .field = "inner", .hint = {}});
  const Error outer = inner.within({.file = "a.csv", .line = 7, .field = "outer", .hint = "look"});
  EXPECT_STREQ(outer.what(), "a.csv:7: inner: bad (look)");
  EXPECT_EQ(outer.kind(), ErrorKind::Numerical);
  EXPECT_EQ(outer.message(), "bad");
  EXPECT_EQ(outer.context().field, "inner");
  EXPECT_STREQ(inner.what(), "inner: bad");
}

TEST(Error, WarningIsALineToo) {
  EXPECT_EQ((Warning{"odd\n", "a.csv", 4}.one_line()), "a.csv:4: odd\\x0a");
  EXPECT_EQ((Warning{"odd", {}, 0}.one_line()), "odd");
}

TEST(Printable, KeepsTextAndEscapesTheRest) {
  EXPECT_EQ(printable("S07 °C µm ä €"), "S07 °C µm ä €");
  EXPECT_EQ(printable("\U0001F52C"), "\U0001F52C");
  EXPECT_EQ(printable(std::string_view("a\0b", 3)), "a\\x00b");
  EXPECT_EQ(printable("\x7f"), "\\x7f");
  EXPECT_EQ(printable("\xc2\x9b"), "\\xc2\\x9b");  // U+009B steers terminals as ESC [ does
  EXPECT_EQ(printable("\xe4"), "\\xe4");           // Latin-1
  EXPECT_EQ(printable("\xe2\x82"), "\\xe2\\x82");  // cut off
}

// Well-formed sequences are those of the Unicode Standard, table 3-7.
TEST(IsUtf8, FollowsTheTable) {
  for (const char* good : {"", "abc", "\xc2\x80", "\xdf\xbf", "\xe0\xa0\x80", "\xed\x9f\xbf", "\xee\x80\x80",
                           "\xef\xbf\xbf", "\xf0\x90\x80\x80", "\xf4\x8f\xbf\xbf"})
    EXPECT_TRUE(is_utf8(good)) << printable(good);
  for (const char* bad :
       {"\x80", "\xc0\x80", "\xc1\xbf", "\xc2", "\xc2\x41", "\xe0\x9f\xbf", "\xed\xa0\x80", "\xe2\x82",
        "\xf0\x8f\xbf\xbf", "\xf4\x90\x80\x80", "\xf5\x80\x80\x80", "\xff", "a\xe4z"})
    EXPECT_FALSE(is_utf8(bad)) << printable(bad);
}

}  // namespace
}  // namespace bandwright
