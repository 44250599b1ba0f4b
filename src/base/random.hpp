// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <cstdint>
#include <vector>

#include "base/matrix.hpp"

namespace bandwright {

/// Seeded random numbers that are the same on every platform: SplitMix64 (Steele, Lea and Flood,
/// OOPSLA 2014, fig. 14). One generator a job, seeded from the plan's seed and the job's number;
/// never one generator shared by workers.
class Random {
 public:
  explicit Random(std::uint64_t seed, std::uint64_t stream = 0);

  [[nodiscard]] std::uint64_t next();
  /// Uniform over 0 .. bound - 1, without the bias of a plain remainder. Requires bound > 0.
  [[nodiscard]] std::uint64_t below(std::uint64_t bound);
  /// 0 .. count - 1 in random order (Fisher and Yates).
  [[nodiscard]] std::vector<Index> permutation(Index count);

 private:
  std::uint64_t state_;
};

}  // namespace bandwright
