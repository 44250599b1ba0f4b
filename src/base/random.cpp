// SPDX-License-Identifier: Apache-2.0
#include "base/random.hpp"

#include <numeric>
#include <utility>

namespace bandwright {
namespace {
constexpr std::uint64_t kGoldenGamma = 0x9E3779B97F4A7C15U;

std::uint64_t mixed(std::uint64_t z) {
  z = (z ^ (z >> 30U)) * 0xBF58476D1CE4E5B9U;
  z = (z ^ (z >> 27U)) * 0x94D049BB133111EBU;
  return z ^ (z >> 31U);
}
}  // namespace

// Mixing the stream in keeps streams of neighbouring numbers apart.
Random::Random(std::uint64_t seed, std::uint64_t stream)
    : state_(mixed(seed + kGoldenGamma) ^ mixed(mixed(stream + 1) + kGoldenGamma)) {}

std::uint64_t Random::next() {
  state_ += kGoldenGamma;
  return mixed(state_);
}

std::uint64_t Random::below(std::uint64_t bound) {
  // Values below 2^64 mod bound would make small results more likely: draw again.
  const std::uint64_t threshold = (0 - bound) % bound;
  for (;;) {
    const std::uint64_t drawn = next();
    if (drawn >= threshold) return drawn % bound;
  }
}

std::vector<Index> Random::permutation(Index count) {
  std::vector<Index> order(static_cast<std::size_t>(count));
  std::iota(order.begin(), order.end(), Index{0});
  for (std::size_t i = order.size(); i > 1; --i)
    std::swap(order[i - 1], order[static_cast<std::size_t>(below(i))]);
  return order;
}

}  // namespace bandwright
