// SPDX-License-Identifier: Apache-2.0
#include "base/options.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include "support/error_text.hpp"

namespace bandwright {

enum class Colour { Red, Green };
template <>
struct EnumTexts<Colour> {
  static constexpr std::array entries{std::pair{Colour::Red, std::string_view{"red"}},
                                      std::pair{Colour::Green, std::string_view{"green"}}};
};

namespace {

struct Options {
  Index count = 3;
  std::optional<double> share;
  std::vector<double> weights{1.0};
  bool flag = false;

  template <class Visitor>
  static void describe(Visitor&& visit) {
    visit("count", &Options::count, between(1, 9), "");
    visit("share", &Options::share, strictly_between(0, 1), "");
    visit("weights", &Options::weights, more_than(0), "");
    visit("flag", &Options::flag, at_least(5), "");  // bounds mean nothing for a bool
  }
};

TEST(Bounds, TextAndContentAgree) {
  EXPECT_EQ(any_value().text(), "");
  EXPECT_EQ(between(3, 201).text(), "between 3 and 201");
  EXPECT_EQ(strictly_between(0, 0.5).text(), "between 0 and 0.5, ends excluded");
  EXPECT_EQ(at_least(2).text(), "at least 2");
  EXPECT_EQ(more_than(0).text(), "more than 0");
  EXPECT_TRUE(between(3, 201).contain(3) && between(3, 201).contain(201) && !between(3, 201).contain(2.999));
  EXPECT_TRUE(strictly_between(0, 1).contain(0.5) && !strictly_between(0, 1).contain(0) &&
              !strictly_between(0, 1).contain(1));
  EXPECT_TRUE(at_least(2).contain(2) && !at_least(2).contain(1));
  EXPECT_TRUE(more_than(0).contain(1e-300) && !more_than(0).contain(0));
  EXPECT_FALSE(between(0, 1).contain(std::numeric_limits<double>::quiet_NaN()));
}

TEST(Options, ValuesOutsideTheirBoundsAreNamed) {
  const auto refused = [](auto change) {
    Options options;
    change(options);
    return error_text(ErrorKind::Usage, [&] { check_options(options); });
  };
  EXPECT_NO_THROW(check_options(Options{}));
  EXPECT_EQ(refused([](Options& o) { o.count = 10; }), "count: 10 must be between 1 and 9");
  EXPECT_EQ(refused([](Options& o) { o.share = 1.0; }), "share: 1 must be between 0 and 1, ends excluded");
  EXPECT_EQ(refused([](Options& o) { o.weights = {2.0, 0.0}; }), "weights: 0 must be more than 0");
}

TEST(Options, EnumWords) {
  EXPECT_EQ(text_of(Colour::Green), "green");
  EXPECT_EQ(enum_from_text<Colour>("red"), Colour::Red);
  EXPECT_EQ(enum_from_text<Colour>("Red"), std::nullopt);
  EXPECT_THAT(enum_words<Colour>(), testing::ElementsAre("red", "green"));
  EXPECT_EQ(alternatives_text(enum_words<Colour>()), "\"red\" | \"green\"");
  EXPECT_EQ(alternatives_text({}), "");
}

TEST(NearestWord, FindsSlipsOfThePen) {
  const std::vector<std::string> words{"spectra", "reference", "replicate", "group", "axis"};
  EXPECT_EQ(nearest_word("spectr", words), "spectra");   // one missing
  EXPECT_EQ(nearest_word("spetcra", words), "spectra");  // two swapped
  EXPECT_EQ(nearest_word("referense", words), "reference");
  EXPECT_EQ(nearest_word("Axis", words), "axis");
  EXPECT_EQ(nearest_word("replicates", words), "replicate");
  EXPECT_EQ(nearest_word("axis", words), "axis");
}

TEST(NearestWord, LeavesOtherWordsAlone) {
  const std::vector<std::string> words{"spectra", "group", "axis", "nm"};
  EXPECT_EQ(nearest_word("windows", words), "");
  EXPECT_EQ(nearest_word("xy", words), "");  // two letters replaced make any word of two
  EXPECT_EQ(nearest_word("", words), "");
  EXPECT_EQ(nearest_word("axis", {}), "");
  EXPECT_EQ(nearest_word(std::string(10000, 'a'), words), "");
}

}  // namespace
}  // namespace bandwright
