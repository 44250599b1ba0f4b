// SPDX-License-Identifier: Apache-2.0
#include "records/json.hpp"

#include <gtest/gtest.h>

#include <bit>
#include <cmath>
#include <limits>
#include <nlohmann/json.hpp>

#include "regression/regression.hpp"
#include "resampling/factor_rules.hpp"
#include "support/error_text.hpp"

namespace bandwright {
namespace {

std::string refusal(std::string_view text) {
  return error_text(ErrorKind::Input, [&] { static_cast<void>(parse_json(text, "a.json")); });
}

/// What `read` throws on the value of the member "x" of the document.
template <class Read>
std::string refusal_of(std::string_view text, Read&& read) {
  const Json document = parse_json(text, "a.json");
  return error_text(ErrorKind::Input, [&] { static_cast<void>(read(JsonValue(document)["x"])); });
}

TEST(Json, BrokenSyntaxIsRefusedAtItsLineAndColumn) {
  EXPECT_EQ(refusal("{\n \"x\": 1,\n \"y\" 2}"), "a.json:3: not valid JSON at column 6");
  EXPECT_EQ(refusal(""), "a.json:1: not valid JSON at column 1");
  EXPECT_EQ(refusal("{} {}"), "a.json:1: not valid JSON at column 4");
  EXPECT_EQ(refusal("{\"x\": NaN}"), "a.json:1: not valid JSON at column 7");
  EXPECT_EQ(refusal("{\"x\": \"\xC3(\"}"), "a.json:1: not valid JSON at column 9");
}

TEST(Json, AKeyThatComesTwiceIsRefused) {
  EXPECT_EQ(refusal(R"({"a": {"x": 1, "y": 2, "x": 3}})"), "a.json: a.x: the key comes twice");
  EXPECT_NO_THROW(static_cast<void>(parse_json(R"([{"x": 1}, {"x": 2}])", "a.json")));
}

TEST(Json, NestingIsReadToItsLimitAndNoDeeper) {
  const auto nested = [](std::size_t levels) { return std::string(levels, '[') + std::string(levels, ']'); };
  EXPECT_NO_THROW(static_cast<void>(parse_json(nested(16), "a.json")));
  EXPECT_EQ(refusal(nested(17)), "a.json: nested more than 16 levels deep");
  EXPECT_EQ(refusal(nested(1000000)), "a.json: nested more than 16 levels deep");
}

TEST(Json, TooManyMembersAreRefused) {
  std::string text = "{\"k\":0";
  for (int i = 0; i < 2000; ++i) text += ",\"" + std::to_string(i) + "\":0";
  EXPECT_EQ(refusal(text + "}"), "a.json: 1999: an object with more than 2000 members");
}

TEST(Json, ANumberBeyondTheRangeOfADoubleIsRefused) {
  EXPECT_EQ(refusal("[1e999]"), "a.json: holds a number beyond the range of a double");
}

TEST(Json, DoublesSurviveBitForBit) {
  const double values[] = {-0.0,
                           0.0,
                           5e-324,
                           -2.2250738585072014e-308,
                           1.0 / 3.0,
                           0.1,
                           1e22,
                           1e23,
                           9007199254740993.0,
                           1.7976931348623157e308,
                           -1.7976931348623157e308,
                           123456789.0};
  Vector vector(std::size(values));
  for (Index i = 0; i < vector.size(); ++i) vector[i] = values[i];
  const Json read = parse_json(json_text(Json{{"x", json_list(vector)}}), "a.json");
  const Vector back = JsonValue(read)["x"].vector(vector.size());
  for (Index i = 0; i < vector.size(); ++i)
    EXPECT_EQ(std::bit_cast<std::uint64_t>(back[i]), std::bit_cast<std::uint64_t>(vector[i])) << vector[i];
}

TEST(Json, WhatIsNotFiniteIsNullBothWays) {
  const double infinity = std::numeric_limits<double>::infinity();
  EXPECT_EQ(json_text(json_list(Vector{{1.5, std::nan(""), infinity}})), "[1.5,null,null]");
  const Json read = parse_json(R"({"x": [1.5, null]})", "a.json");
  const Vector back = JsonValue(read)["x"].vector_or_null(2);
  EXPECT_EQ(back[0], 1.5);
  EXPECT_TRUE(std::isnan(back[1]));
}

TEST(Json, MatricesAreListsOfRows) {
  const Matrix matrix{{1.0, 2.0, 3.0}, {4.0, 5.0, 6.0}};
  EXPECT_EQ(json_text(json_rows(matrix)), "[[1.0,2.0,3.0],[4.0,5.0,6.0]]");
  const Json read = parse_json(R"({"x": [[1, 2, 3], [4, 5, 6]]})", "a.json");
  EXPECT_EQ(JsonValue(read)["x"].matrix(2, 3), matrix);
}

TEST(Json, ATextThatIsNotUtf8IsNotWritten) {
  EXPECT_EQ(error_text(ErrorKind::Input, [] { static_cast<void>(json_text(Json("\xFF"))); }),
            "a text is not UTF-8 and cannot be written");
}

TEST(JsonValue, WrongTypesNameThePathAndWhatStandsThere) {
  EXPECT_EQ(refusal_of(R"({"x": "1"})", [](const JsonValue& x) { return x.number(); }),
            "x: must be a number, not \"1\"");
  EXPECT_EQ(refusal_of(R"({"x": true})", [](const JsonValue& x) { return x.number_or_null(); }),
            "x: must be a number or null, not true");
  EXPECT_EQ(refusal_of(R"({"x": {}})", [](const JsonValue& x) { return x.text(); }),
            "x: must be a text, not an object");
  EXPECT_EQ(refusal_of(R"({"x": 5})", [](const JsonValue& x) { return x["y"]; }),
            "x: must be an object, not 5");
  EXPECT_EQ(refusal_of(R"({"x": null})", [](const JsonValue& x) { return x.list(); }),
            "x: must be a list, not null");
  EXPECT_EQ(refusal_of(R"({"x": ["a", 2]})", [](const JsonValue& x) { return x.texts(); }),
            "x[1]: must be a text, not 2");
}

TEST(JsonValue, AMissingMemberIsNamed) {
  EXPECT_EQ(refusal_of(R"({"x": {"y": 1}})", [](const JsonValue& x) { return x["z"]; }), "x.z: missing");
}

TEST(JsonValue, WholeNumbersAreWhole) {
  const auto whole = [](const JsonValue& x) { return x.whole(1); };
  EXPECT_EQ(refusal_of(R"({"x": 2.7})", whole), "x: must be a whole number of at least 1, not 2.7");
  EXPECT_EQ(refusal_of(R"({"x": 2.0})", whole), "x: must be a whole number of at least 1, not 2.0");
  EXPECT_EQ(refusal_of(R"({"x": 0})", whole), "x: must be a whole number of at least 1, not 0");
  EXPECT_EQ(refusal_of(R"({"x": -1})", whole), "x: must be a whole number of at least 1, not -1");
  EXPECT_EQ(refusal_of(R"({"x": 18446744073709551615})", whole),
            "x: must be a whole number of at least 1, not 18446744073709551615");
  const Json largest = parse_json(R"({"x": 9007199254740992})", "a.json");
  EXPECT_EQ(JsonValue(largest)["x"].whole(), Index{9007199254740992});
}

TEST(JsonValue, ListsAndMatricesOfTheWrongShapeAreRefused) {
  EXPECT_EQ(refusal_of(R"({"x": [1, 2]})", [](const JsonValue& x) { return x.vector(3); }),
            "x: must be a list of 3, not of 2");
  EXPECT_EQ(refusal_of(R"({"x": [1, null]})", [](const JsonValue& x) { return x.vector(2); }),
            "x[1]: must be a number, not null");
  EXPECT_EQ(refusal_of(R"({"x": [[1, 2], [3]]})", [](const JsonValue& x) { return x.matrix(2, 2); }),
            "x[1]: must be a list of 2, not of 1");
  EXPECT_EQ(refusal_of(R"({"x": [[1, 2], 3]})", [](const JsonValue& x) { return x.matrix(2, 2); }),
            "x[1]: must be a list of 2, not 3");
}

TEST(JsonValue, WordsOfAnEnumAreChecked) {
  EXPECT_EQ(refusal_of(R"({"x": "f-tset"})", [](const JsonValue& x) { return x.word<FactorRule>(); }),
            R"(x: must be "f-test" | "minimum" | "one-standard-error", not "f-tset")");
}

TEST(JsonValue, UnknownMembersAreNamedWithTheNearestKnownOne) {
  const auto check = [](const JsonValue& x) {
    x.allow_only({"factors", "rule"});
    return 0;
  };
  EXPECT_EQ(refusal_of(R"({"x": {"factor": 1}})", check),
            R"(x: the member "factor" is not known (did you mean "factors"?))");
  EXPECT_EQ(refusal_of(R"({"x": {"colour": 1}})", check), R"(x: the member "colour" is not known)");
}

}  // namespace
}  // namespace bandwright
