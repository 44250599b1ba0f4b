// SPDX-License-Identifier: Apache-2.0
#include "base/options.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

namespace bandwright {
namespace {

/// Optimal string alignment distance: insert, delete, replace, or swap two neighbours.
std::size_t edit_distance(std::string_view a, std::string_view b) {
  const std::size_t width = b.size() + 1;
  std::vector<std::size_t> cost((a.size() + 1) * width);
  const auto at = [&](std::size_t i, std::size_t j) -> std::size_t& { return cost[i * width + j]; };
  for (std::size_t i = 0; i <= a.size(); ++i) at(i, 0) = i;
  for (std::size_t j = 0; j <= b.size(); ++j) at(0, j) = j;
  for (std::size_t i = 1; i <= a.size(); ++i) {
    for (std::size_t j = 1; j <= b.size(); ++j) {
      const std::size_t replaced = at(i - 1, j - 1) + (a[i - 1] == b[j - 1] ? 0 : 1);
      at(i, j) = std::min({at(i - 1, j) + 1, at(i, j - 1) + 1, replaced});
      if (i > 1 && j > 1 && a[i - 1] == b[j - 2] && a[i - 2] == b[j - 1])
        at(i, j) = std::min(at(i, j), at(i - 2, j - 2) + 1);
    }
  }
  return at(a.size(), b.size());
}

}  // namespace

std::string Bounds::text() const {
  const bool has_low = std::isfinite(low);
  const bool has_high = std::isfinite(high);
  if (has_low && has_high) {
    const char* exclusive = low_excluded || high_excluded ? ", ends excluded" : "";
    return fmt::format("between {} and {}{}", low, high, exclusive);
  }
  if (has_low) return fmt::format("{} {}", low_excluded ? "more than" : "at least", low);
  if (has_high) return fmt::format("{} {}", high_excluded ? "less than" : "at most", high);
  return {};
}

std::string nearest_word(std::string_view word, std::span<const std::string> candidates) {
  constexpr std::size_t kLongestWord = 64;  // longer words are no slips, and the table is quadratic
  if (word.size() > kLongestWord) return {};
  std::string best;
  std::size_t best_distance = std::max<std::size_t>(2, word.size() / 3) + 1;
  for (const std::string& candidate : candidates) {
    if (candidate.size() > kLongestWord) continue;
    const std::size_t distance = edit_distance(word, candidate);
    if (distance < best_distance && distance < candidate.size()) {
      best_distance = distance;
      best = candidate;
    }
  }
  return best;
}

std::string alternatives_text(std::span<const std::string> words) {
  std::string text;
  for (const std::string& word : words) text += fmt::format("{}\"{}\"", text.empty() ? "" : " | ", word);
  return text;
}

namespace options_detail {

void throw_out_of_bounds(std::string_view field, double value, const Bounds& bounds) {
  throw Error(ErrorKind::Usage, fmt::format("{} must be {}", value, bounds.text()),
              {.file = {}, .line = 0, .field = std::string(field), .hint = {}});
}

}  // namespace options_detail
}  // namespace bandwright
