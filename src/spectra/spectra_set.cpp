// SPDX-License-Identifier: Apache-2.0
#include "spectra/spectra_set.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <unordered_map>

#include "base/error.hpp"

namespace bandwright {
namespace {

ErrorContext at(const Origin& origin) {
  return {.file = origin.file, .line = origin.line, .field = {}, .hint = {}};
}

void check_unique_ids(const SpectraSet& spectra) {
  std::unordered_map<std::string_view, Index> seen;
  for (Index i = 0; i < spectra.size(); ++i) {
    const auto row = static_cast<std::size_t>(i);
    const auto [earlier, is_new] = seen.emplace(spectra.ids[row], i);
    if (is_new) continue;
    const Origin& first = spectra.origins[static_cast<std::size_t>(earlier->second)];
    throw Error(ErrorKind::Input,
                fmt::format("spectrum \"{}\" is already at {}:{}", spectra.ids[row], first.file, first.line),
                at(spectra.origins[row]));
  }
}

void check_same_kind(const SpectraSet& first, const SpectraSet& part) {
  if (part.size() == 0) return;
  const ErrorContext where{.file = part.origins.front().file,
                           .line = 0,
                           .field = {},
                           .hint = "all spectra of one set need the same axis and ordinate"};
  if (!first.axis.matches(part.axis)) {
    throw Error(
        ErrorKind::Input,
        fmt::format("the axis ({} points from {} to {}) differs from that of {} ({} points from {} to {})",
                    part.points(), part.axis[0], part.axis[part.points() - 1], first.origins.front().file,
                    first.points(), first.axis[0], first.axis[first.points() - 1]),
        where);
  }
  if (first.ordinate != part.ordinate)
    throw Error(ErrorKind::Input, "the ordinate differs from that of " + first.origins.front().file, where);
}

}  // namespace

SpectraSet joined(std::vector<SpectraSet> parts) {
  if (parts.empty()) return {};
  SpectraSet all = std::move(parts.front());
  if (parts.size() > 1) {
    Index rows = all.size();
    for (std::size_t k = 1; k < parts.size(); ++k) {
      check_same_kind(all, parts[k]);
      rows += parts[k].size();
    }
    Index filled = all.size();
    all.values.conservativeResize(rows, all.points());
    for (std::size_t k = 1; k < parts.size(); ++k) {
      all.values.middleRows(filled, parts[k].size()) = parts[k].values;
      filled += parts[k].size();
      std::move(parts[k].ids.begin(), parts[k].ids.end(), std::back_inserter(all.ids));
      std::move(parts[k].origins.begin(), parts[k].origins.end(), std::back_inserter(all.origins));
    }
  }
  check_unique_ids(all);
  return all;
}

SpectraSet subset(const SpectraSet& spectra, const std::vector<Index>& rows) {
  SpectraSet chosen{
      .axis = spectra.axis, .ordinate = spectra.ordinate, .ids = {}, .origins = {}, .values = {}};
  chosen.values.resize(static_cast<Index>(rows.size()), spectra.points());
  for (std::size_t i = 0; i < rows.size(); ++i) {
    chosen.values.row(static_cast<Index>(i)) = spectra.values.row(rows[i]);
    chosen.ids.push_back(spectra.ids[static_cast<std::size_t>(rows[i])]);
    chosen.origins.push_back(spectra.origins[static_cast<std::size_t>(rows[i])]);
  }
  return chosen;
}

std::string sample_of(std::string_view spectrum_id, std::string_view mark) {
  if (mark.empty()) return std::string(spectrum_id);
  const auto at = spectrum_id.rfind(mark);
  if (at == std::string_view::npos || at == 0) return std::string(spectrum_id);
  const std::string_view number = spectrum_id.substr(at + mark.size());
  const bool digits = !number.empty() &&
                      std::all_of(number.begin(), number.end(), [](char c) { return c >= '0' && c <= '9'; });
  return std::string(digits ? spectrum_id.substr(0, at) : spectrum_id);
}

}  // namespace bandwright
