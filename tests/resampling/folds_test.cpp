// SPDX-License-Identifier: Apache-2.0
#include "resampling/folds.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <set>

#include "base/error.hpp"
#include "support/error_text.hpp"
#include "support/test_data.hpp"

namespace bandwright {
namespace {

using testing::ElementsAre;
using Rows = std::vector<Index>;

CrossValidation scheme(FoldScheme scheme, Index folds = 10) {
  CrossValidation options;
  options.scheme = scheme;
  options.folds = folds;
  return options;
}

std::vector<Rows> held_out(const std::vector<Fold>& folds) {
  std::vector<Rows> rows;
  for (const Fold& fold : folds) rows.push_back(fold.held_out);
  return rows;
}

/// fold_of[i] of each sample, -1 if it is never held out.
Rows fold_numbers(const std::vector<Fold>& folds, Index samples) {
  Rows numbers(static_cast<std::size_t>(samples), -1);
  for (std::size_t f = 0; f < folds.size(); ++f)
    for (const Index i : folds[f].held_out) numbers[static_cast<std::size_t>(i)] = static_cast<Index>(f);
  return numbers;
}

/// Each repeat holds every sample out exactly once.
void expect_partition(const std::vector<Fold>& folds, Index samples, Index repeats) {
  std::vector<Rows> times(static_cast<std::size_t>(repeats), Rows(static_cast<std::size_t>(samples)));
  for (const Fold& fold : folds)
    for (const Index i : fold.held_out)
      ++times.at(static_cast<std::size_t>(fold.repeat)).at(static_cast<std::size_t>(i));
  for (const Rows& of_repeat : times) EXPECT_THAT(of_repeat, testing::Each(1));
}

TEST(Folds, LeaveOneOutHoldsEachSampleOutAlone) {
  EXPECT_THAT(held_out(make_folds(scheme(FoldScheme::LeaveOneOut), 3, {})),
              ElementsAre(Rows{0}, Rows{1}, Rows{2}));
}

TEST(Folds, BlocksAreConsecutiveAndTheFirstAreLonger) {
  EXPECT_THAT(held_out(make_folds(scheme(FoldScheme::Blocks, 3), 8, {})),
              ElementsAre(Rows{0, 1, 2}, Rows{3, 4, 5}, Rows{6, 7}));
  EXPECT_THAT(held_out(make_folds(scheme(FoldScheme::Blocks, 2), 4, {})),
              ElementsAre(Rows{0, 1}, Rows{2, 3}));
}

TEST(Folds, InterleavedPutsSampleIInFoldIModFolds) {
  EXPECT_THAT(held_out(make_folds(scheme(FoldScheme::Interleaved, 3), 8, {})),
              ElementsAre(Rows{0, 3, 6}, Rows{1, 4, 7}, Rows{2, 5}));
}

TEST(Folds, FoldNumbersOfTheOpenDataSets) {  // split.json of both folders
  for (const OpenData* data : {&meats(), &beerlambert4()}) {
    SCOPED_TRACE(data->folder);
    const ReferenceResults split = data->results("split");
    const auto n = static_cast<Index>(data->training.size());
    for (const auto& [name, options] :
         {std::pair{"loo", scheme(FoldScheme::LeaveOneOut)}, std::pair{"block10", scheme(FoldScheme::Blocks)},
          std::pair{"venetian10", scheme(FoldScheme::Interleaved)}}) {
      const Vector want = split.numbers({"cross_validation_fold_of_each_training_sample", name});
      const Rows got = fold_numbers(make_folds(options, n, {}), n);
      ASSERT_EQ(want.size(), n);
      for (Index i = 0; i < n; ++i)
        EXPECT_EQ(got[static_cast<std::size_t>(i)], static_cast<Index>(want[i])) << name << i;
    }
  }
}

TEST(Folds, LeaveGroupOutHoldsGroupsOutInOrderOfFirstAppearance) {
  const std::vector<std::string> batches{"b", "a", "b", "c", "a"};
  EXPECT_THAT(held_out(make_folds(scheme(FoldScheme::LeaveGroupOut), 5, batches)),
              ElementsAre(Rows{0, 2}, Rows{1, 4}, Rows{3}));
}

TEST(Folds, GroupsAreTheDefaultWhereTheyExist) {
  EXPECT_EQ(scheme_in_force({}, true), FoldScheme::LeaveGroupOut);
  EXPECT_EQ(scheme_in_force({}, false), FoldScheme::LeaveOneOut);
  EXPECT_EQ(scheme_in_force(scheme(FoldScheme::Blocks), true), FoldScheme::Blocks);
  EXPECT_EQ(make_folds({}, 5, {"b", "a", "b", "c", "a"}).size(), 3u);
}

TEST(Folds, EverySchemeKeepsGroupsTogether) {
  const std::vector<std::string> batches{"a", "b", "c", "d", "a", "b", "e", "f", "e", "c", "d"};
  for (const auto& [kind, text] : EnumTexts<FoldScheme>::entries) {
    SCOPED_TRACE(text);
    const std::vector<Fold> folds = make_folds(scheme(kind, 3), 11, batches);
    for (const Fold& fold : folds) {
      const std::set<Index> out(fold.held_out.begin(), fold.held_out.end());
      for (std::size_t i = 0; i < batches.size(); ++i)
        for (std::size_t j = 0; j < i; ++j) {
          const bool together = out.contains(static_cast<Index>(i)) == out.contains(static_cast<Index>(j));
          EXPECT_TRUE(together || batches[i] != batches[j]) << i << ", " << j;
        }
    }
  }
}

TEST(Folds, BlocksAndInterleavedCountGroups) {
  const std::vector<std::string> batches{"a", "a", "a", "b", "c", "d"};
  EXPECT_THAT(held_out(make_folds(scheme(FoldScheme::Blocks, 2), 6, batches)),
              ElementsAre(Rows{0, 1, 2, 3}, Rows{4, 5}));
  EXPECT_THAT(held_out(make_folds(scheme(FoldScheme::Interleaved, 2), 6, batches)),
              ElementsAre(Rows{0, 1, 2, 4}, Rows{3, 5}));
}

TEST(Folds, RandomRepeatsArePartitionsOfEvenSizeAndDiffer) {
  CrossValidation options = scheme(FoldScheme::Random, 4);
  options.repeats = 3;
  const std::vector<Fold> folds = make_folds(options, 23, {});
  ASSERT_EQ(folds.size(), 12u);
  expect_partition(folds, 23, 3);
  for (const Fold& fold : folds) {
    EXPECT_TRUE(std::is_sorted(fold.held_out.begin(), fold.held_out.end()));
    EXPECT_TRUE(fold.held_out.size() == 5 || fold.held_out.size() == 6);
  }
  EXPECT_NE(folds[0].held_out, folds[4].held_out);
  EXPECT_NE(folds[4].held_out, folds[8].held_out);
}

TEST(Folds, SameSeedSameFoldsOtherSeedOtherFolds) {
  for (const FoldScheme kind : {FoldScheme::Random, FoldScheme::MonteCarlo}) {
    CrossValidation options = scheme(kind, 5);
    const auto first = held_out(make_folds(options, 40, {}));
    EXPECT_EQ(first, held_out(make_folds(options, 40, {})));
    options.seed = 2;
    EXPECT_NE(first, held_out(make_folds(options, 40, {})));
  }
}

TEST(Folds, MonteCarloDrawsTheShareAndEveryDrawIsARepeat) {
  CrossValidation options = scheme(FoldScheme::MonteCarlo, 50);
  options.repeats = 4;
  options.share_left_out = 0.3;
  const std::vector<Fold> folds = make_folds(options, 20, {});
  ASSERT_EQ(folds.size(), 200u);
  Rows times(20);
  for (std::size_t f = 0; f < folds.size(); ++f) {
    EXPECT_EQ(folds[f].repeat, static_cast<Index>(f));
    EXPECT_EQ(std::set<Index>(folds[f].held_out.begin(), folds[f].held_out.end()).size(), 6u);
    for (const Index i : folds[f].held_out) ++times[static_cast<std::size_t>(i)];
  }
  // Each count is binomial(200, 0.3): mean 60, standard deviation 6.5. The seed is fixed.
  for (const Index count : times) EXPECT_NEAR(static_cast<double>(count), 60.0, 5 * 6.5);
}

TEST(Folds, MonteCarloNeverLeavesOutNoneOrAll) {
  CrossValidation options = scheme(FoldScheme::MonteCarlo, 20);
  for (const double share : {0.001, 0.999}) {
    options.share_left_out = share;
    for (const Fold& fold : make_folds(options, 5, {}))
      EXPECT_EQ(fold.held_out.size(), share < 0.5 ? 1u : 4u);
  }
}

struct Refusal {
  CrossValidation options;
  Index samples;
  std::vector<std::string> groups;
  std::string text;
};

TEST(Folds, RefusalsSayWhatIsWrong) {
  CrossValidation repeated = scheme(FoldScheme::Blocks, 2);
  repeated.repeats = 2;
  const std::vector<Refusal> cases{
      {scheme(FoldScheme::LeaveOneOut), 1, {}, "[cross_validation] scheme: 1 sample(s) cannot be split"},
      {scheme(FoldScheme::LeaveOneOut), 0, {}, "[cross_validation] scheme: 0 sample(s) cannot be split"},
      {{}, 3, {"a", "a", "a"}, "[cross_validation] scheme: 1 group(s) cannot be split"},
      {scheme(FoldScheme::LeaveGroupOut),
       3,
       {},
       "[cross_validation] scheme: leave-group-out needs [standards] group"},
      {scheme(FoldScheme::Blocks), 9, {}, "[cross_validation] folds: 10 folds, but only 9 samples"},
      {scheme(FoldScheme::Interleaved, 3),
       4,
       {"a", "a", "b", "b"},
       "[cross_validation] folds: 3 folds, but only 2 groups"},
      {scheme(FoldScheme::Random), 9, {}, "[cross_validation] folds: 10 folds, but only 9 samples"},
      {repeated,
       9,
       {},
       "[cross_validation] repeats: blocks gives the same folds every time; only random and monte-carlo "
       "repeat"}};
  for (const Refusal& refusal : cases)
    EXPECT_EQ(
        error_text(ErrorKind::Usage,
                   [&] { static_cast<void>(make_folds(refusal.options, refusal.samples, refusal.groups)); }),
        refusal.text);
}

}  // namespace
}  // namespace bandwright
