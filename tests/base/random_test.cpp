// SPDX-License-Identifier: Apache-2.0
#include "base/random.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <set>

namespace bandwright {
namespace {

/// SplitMix64 as published (Steele, Lea and Flood, OOPSLA 2014, fig. 14), written down again.
struct PlainSplitMix {
  std::uint64_t state;
  std::uint64_t next() {
    state += 0x9E3779B97F4A7C15U;
    return mix(state);
  }
  static std::uint64_t mix(std::uint64_t z) {
    z = (z ^ (z >> 30U)) * 0xBF58476D1CE4E5B9U;
    z = (z ^ (z >> 27U)) * 0x94D049BB133111EBU;
    return z ^ (z >> 31U);
  }
};

/// y of z = y ^ (y >> shift).
std::uint64_t without_shift(std::uint64_t z, unsigned shift) {
  std::uint64_t y = z;
  for (unsigned known = shift; known < 64; known += shift) y = z ^ (y >> shift);
  return y;
}

/// Inverse of an odd number modulo 2^64 (Newton; each round doubles the correct bits).
std::uint64_t inverse(std::uint64_t odd) {
  std::uint64_t x = odd;
  for (int round = 0; round < 6; ++round) x *= 2 - odd * x;
  return x;
}

/// The argument of PlainSplitMix::mix, which is one-to-one.
std::uint64_t unmixed(std::uint64_t z) {
  z = without_shift(z, 31) * inverse(0x94D049BB133111EBU);
  z = without_shift(z, 27) * inverse(0xBF58476D1CE4E5B9U);
  return without_shift(z, 30);
}

/// The seed whose stream 0 starts at `state`: seed and stream are mixed into the state one-to-one.
std::uint64_t seed_for_state(std::uint64_t state) {
  const std::uint64_t of_stream = PlainSplitMix::mix(PlainSplitMix::mix(1) + 0x9E3779B97F4A7C15U);
  return unmixed(state ^ of_stream) - 0x9E3779B97F4A7C15U;
}

// The widely published test vector of the plain generator with state 1234567 (from memory).
TEST(Random, GivesThePublishedNumbers) {
  Random random(seed_for_state(1234567));
  for (const std::uint64_t want : {6457827717110365317U, 3203168211198807973U, 9817491932198370423U,
                                   4593380528125082431U, 16408922859458223821U})
    EXPECT_EQ(random.next(), want);
}

TEST(Random, StreamsOfOneSeedHaveNothingInCommon) {
  std::set<std::uint64_t> seen;
  for (std::uint64_t seed = 0; seed < 20; ++seed)
    for (std::uint64_t stream = 0; stream < 20; ++stream) {
      Random random(seed, stream);
      for (int i = 0; i < 5; ++i) seen.insert(random.next());
    }
  EXPECT_EQ(seen.size(), 20u * 20u * 5u);
}

TEST(Random, SameSeedSameNumbers) {
  Random one(5, 3);
  Random other(5, 3);
  for (int i = 0; i < 10; ++i) EXPECT_EQ(one.next(), other.next());
}

TEST(Random, BelowStaysBelowAndIsUniform) {
  Random random(1);
  for (int i = 0; i < 100; ++i) EXPECT_EQ(random.below(1), 0u);
  std::vector<int> count(6);
  for (int i = 0; i < 60000; ++i) ++count.at(random.below(6));
  for (const int c : count) EXPECT_NEAR(c, 10000, 5 * 92);  // binomial: sd 91; the seed is fixed
}

// Bounds above 2^63 throw almost half of the draws away: a plain remainder would favour the lower half.
TEST(Random, BelowHasNoBiasForHugeBounds) {
  Random random(2);
  constexpr std::uint64_t kBound =
      3U * (std::uint64_t{1} << 62U);  // 3/4 of all: the remainder doubles the lowest third
  int lowest_third = 0;
  for (int i = 0; i < 30000; ++i) {
    const std::uint64_t drawn = random.below(kBound);
    EXPECT_LT(drawn, kBound);
    if (drawn < kBound / 3) ++lowest_third;
  }
  EXPECT_NEAR(lowest_third, 10000, 5 * 82);
}

TEST(Random, PermutationHoldsEveryNumberOnce) {
  for (const Index n : {0, 1, 2, 10, 1000}) {
    std::vector<Index> order = Random(7).permutation(n);
    std::sort(order.begin(), order.end());
    ASSERT_EQ(static_cast<Index>(order.size()), n);
    for (Index i = 0; i < n; ++i) EXPECT_EQ(order[static_cast<std::size_t>(i)], i);
  }
}

TEST(Random, AllPermutationsAreEquallyLikely) {
  Random random(11);
  std::vector<int> count(6);
  for (int i = 0; i < 60000; ++i) {
    const std::vector<Index> order = random.permutation(3);
    ++count.at(static_cast<std::size_t>(2 * order[0] + (order[1] > order[2] ? 1 : 0)));
  }
  for (const int c : count) EXPECT_NEAR(c, 10000, 5 * 92);
}

}  // namespace
}  // namespace bandwright
