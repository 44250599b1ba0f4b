// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <array>
#include <optional>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

#include "base/matrix.hpp"
#include "base/options.hpp"

namespace bandwright {

enum class FoldScheme { LeaveOneOut, LeaveGroupOut, Blocks, Interleaved, Random, MonteCarlo };

template <>
struct EnumTexts<FoldScheme> {
  static constexpr std::array entries{
      std::pair{FoldScheme::LeaveOneOut, std::string_view{"leave-one-out"}},
      std::pair{FoldScheme::LeaveGroupOut, std::string_view{"leave-group-out"}},
      std::pair{FoldScheme::Blocks, std::string_view{"blocks"}},
      std::pair{FoldScheme::Interleaved, std::string_view{"interleaved"}},
      std::pair{FoldScheme::Random, std::string_view{"random"}},
      std::pair{FoldScheme::MonteCarlo, std::string_view{"monte-carlo"}}};
};

/// How samples are held out.
struct CrossValidation {
  /// Default: leave-group-out when the standards have groups, else leave-one-out.
  std::optional<FoldScheme> scheme;
  Index folds = 10;              ///< blocks, interleaved, random: number of folds; monte-carlo: of draws
  Index repeats = 1;             ///< random: how often with new folds; monte-carlo: times `folds` draws
  Index seed = 1;                ///< random and monte-carlo: same seed, same folds
  double share_left_out = 0.25;  ///< monte-carlo: share of the samples (or groups) left out in a draw

  template <class Visitor>
  static void describe(Visitor&& visit) {
    visit("scheme", &CrossValidation::scheme, any_value(),
          "how samples are held out; default leave-group-out where the standards have groups, else "
          "leave-one-out");
    visit("folds", &CrossValidation::folds, between(2, 100000),
          "number of folds (blocks, interleaved, random) or of draws (monte-carlo)");
    visit("repeats", &CrossValidation::repeats, between(1, 100000), "repeats with new random folds");
    visit("seed", &CrossValidation::seed, between(0, 9007199254740991.0), "same seed, same folds");
    visit("share_left_out", &CrossValidation::share_left_out, strictly_between(0, 1),
          "share of the samples left out in a draw (monte-carlo only)");
  }
};

/// One split: the samples held out, rising; all others train.
struct Fold {
  std::vector<Index> held_out;
  Index repeat = 0;  ///< 0-based; each sample is held out at most once within a repeat
};

/// Assigns samples 0 .. n - 1 (the order of the reference table) to folds. `groups` is empty or
/// has one label a sample; then samples of one label share their folds in every scheme, and blocks,
/// interleaved, random and monte-carlo deal out groups in order of first appearance.
///   blocks: consecutive, the first (units mod folds) one unit longer.
///   interleaved: unit i (from 0) in fold i mod folds.
///   random: units shuffled by Random(seed, repeat), then dealt like blocks.
///   monte-carlo: each draw leaves out round(share * units) units, at least 1 and not all; every draw is
///     a repeat.
/// Throws Error(Usage) when there are fewer than two units, more folds than units, repeats with a
/// scheme that has no chance in it, or leave-group-out without groups.
[[nodiscard]] std::vector<Fold> make_folds(const CrossValidation& options, Index samples,
                                           const std::vector<std::string>& groups);

/// The scheme in force: the one asked for, or the default for data with or without groups.
[[nodiscard]] FoldScheme scheme_in_force(const CrossValidation& options, bool has_groups);

}  // namespace bandwright
