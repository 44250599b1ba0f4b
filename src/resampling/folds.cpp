// SPDX-License-Identifier: Apache-2.0
#include "resampling/folds.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <numeric>
#include <unordered_map>

#include "base/error.hpp"
#include "base/random.hpp"

namespace bandwright {
namespace {

/// The samples that must share their folds: single samples, or groups in order of first appearance.
using Units = std::vector<std::vector<Index>>;

[[noreturn]] void refuse(const char* field, std::string message) {
  throw Error(ErrorKind::Usage, std::move(message),
              {.file = {}, .line = 0, .field = std::string("[cross_validation] ") + field, .hint = {}});
}

Units units_of(Index samples, const std::vector<std::string>& groups) {
  Units units;
  std::unordered_map<std::string_view, std::size_t> unit_of_group;
  for (Index i = 0; i < samples; ++i) {
    if (groups.empty()) {
      units.push_back({i});
      continue;
    }
    const auto [found, is_new] = unit_of_group.emplace(groups[static_cast<std::size_t>(i)], units.size());
    if (is_new) units.emplace_back();
    units[found->second].push_back(i);
  }
  return units;
}

/// One fold out of the units at `positions` of `order`.
Fold fold_of(const Units& units, const std::vector<Index>& order, Index first, Index count, Index repeat) {
  Fold fold{.held_out = {}, .repeat = repeat};
  for (Index u = first; u < first + count; ++u) {
    const auto& unit = units[static_cast<std::size_t>(order[static_cast<std::size_t>(u)])];
    fold.held_out.insert(fold.held_out.end(), unit.begin(), unit.end());
  }
  std::sort(fold.held_out.begin(), fold.held_out.end());
  return fold;
}

/// `order` cut into `folds` consecutive parts, the first (units mod folds) one unit longer.
void add_blocks(std::vector<Fold>& out, const Units& units, const std::vector<Index>& order, Index folds,
                Index repeat) {
  const auto count = static_cast<Index>(order.size());
  Index first = 0;
  for (Index f = 0; f < folds; ++f) {
    const Index length = count / folds + (f < count % folds ? 1 : 0);
    out.push_back(fold_of(units, order, first, length, repeat));
    first += length;
  }
}

std::vector<Index> in_order(Index count) {
  std::vector<Index> order(static_cast<std::size_t>(count));
  std::iota(order.begin(), order.end(), Index{0});
  return order;
}

/// Every folds-th unit together: interleaving is blocks over a rearranged order.
std::vector<Index> dealt_out(Index count, Index folds) {
  std::vector<Index> order;
  for (Index f = 0; f < folds; ++f)
    for (Index u = f; u < count; u += folds) order.push_back(u);
  return order;
}

void check_options_fit(const CrossValidation& options, FoldScheme scheme, Index units, bool has_groups) {
  if (units < 2)
    refuse("scheme", fmt::format("{} {} cannot be split", units, has_groups ? "group(s)" : "sample(s)"));
  if (scheme == FoldScheme::LeaveGroupOut && !has_groups)
    refuse("scheme", "leave-group-out needs [standards] group");
  const bool counted =
      scheme == FoldScheme::Blocks || scheme == FoldScheme::Interleaved || scheme == FoldScheme::Random;
  if (counted && options.folds > units)
    refuse("folds",
           fmt::format("{} folds, but only {} {}", options.folds, units, has_groups ? "groups" : "samples"));
  const bool by_chance = scheme == FoldScheme::Random || scheme == FoldScheme::MonteCarlo;
  if (!by_chance && options.repeats > 1)
    refuse("repeats", fmt::format("{} gives the same folds every time; only random and monte-carlo repeat",
                                  text_of(scheme)));
}

}  // namespace

FoldScheme scheme_in_force(const CrossValidation& options, bool has_groups) {
  return options.scheme.value_or(has_groups ? FoldScheme::LeaveGroupOut : FoldScheme::LeaveOneOut);
}

std::vector<Fold> make_folds(const CrossValidation& options, Index samples,
                             const std::vector<std::string>& groups) {
  const bool has_groups = !groups.empty();
  const FoldScheme scheme = scheme_in_force(options, has_groups);
  const Units units = units_of(samples, groups);
  const auto count = static_cast<Index>(units.size());
  check_options_fit(options, scheme, count, has_groups);

  std::vector<Fold> folds;
  switch (scheme) {
    case FoldScheme::LeaveOneOut:
    case FoldScheme::LeaveGroupOut:
      add_blocks(folds, units, in_order(count), count, 0);
      break;
    case FoldScheme::Blocks:
      add_blocks(folds, units, in_order(count), options.folds, 0);
      break;
    case FoldScheme::Interleaved:
      add_blocks(folds, units, dealt_out(count, options.folds), options.folds, 0);
      break;
    case FoldScheme::Random:
      for (Index repeat = 0; repeat < options.repeats; ++repeat) {
        Random random(static_cast<std::uint64_t>(options.seed), static_cast<std::uint64_t>(repeat));
        add_blocks(folds, units, random.permutation(count), options.folds, repeat);
      }
      break;
    case FoldScheme::MonteCarlo: {
      const auto wanted =
          static_cast<Index>(std::lround(options.share_left_out * static_cast<double>(count)));
      const Index left_out = std::clamp<Index>(wanted, 1, count - 1);
      for (Index draw = 0; draw < options.folds * options.repeats; ++draw) {
        Random random(static_cast<std::uint64_t>(options.seed), static_cast<std::uint64_t>(draw));
        folds.push_back(fold_of(units, random.permutation(count), 0, left_out, draw));
      }
      break;
    }
  }
  return folds;
}

}  // namespace bandwright
