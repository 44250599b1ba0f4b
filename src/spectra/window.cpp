// SPDX-License-Identifier: Apache-2.0
#include "spectra/window.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "base/error.hpp"

namespace bandwright {
namespace {

void check_reach(const Window& window, const Axis& axis) {
  const double low = std::min(window.from, window.to);
  const double high = std::max(window.from, window.to);
  const Index last = axis.size() - 1;
  const double first_spacing = last > 0 ? std::abs(axis[1] - axis[0]) : 0.0;
  const double last_spacing = last > 0 ? std::abs(axis[last] - axis[last - 1]) : 0.0;
  const double low_spacing = axis.falling() ? last_spacing : first_spacing;
  const double high_spacing = axis.falling() ? first_spacing : last_spacing;
  if (low < axis.lowest() - low_spacing || high > axis.highest() + high_spacing) {
    throw Error(ErrorKind::Usage,
                fmt::format("the window {} to {} reaches beyond the spectra, which cover {} to {}",
                            window.from, window.to, axis.lowest(), axis.highest()),
                {.file = {}, .line = 0, .field = fmt::format("window \"{}\"", window.name), .hint = {}});
  }
}

}  // namespace

std::vector<PointRange> points_in(const Window& window, const Axis& axis) {
  check_reach(window, axis);
  const Stretch whole{window.from, window.to};
  std::vector<PointRange> runs;
  bool inside_run = false;
  for (Index i = 0; i < axis.size(); ++i) {
    const bool taken =
        whole.contains(axis[i]) && std::none_of(window.except.begin(), window.except.end(),
                                                [&](const Stretch& s) { return s.contains(axis[i]); });
    if (taken && !inside_run) runs.push_back({i, 0});
    if (taken) ++runs.back().count;
    inside_run = taken;
  }
  if (runs.empty()) {
    throw Error(ErrorKind::Usage,
                fmt::format("no point of the spectra lies between {} and {}", window.from, window.to),
                {.file = {}, .line = 0, .field = fmt::format("window \"{}\"", window.name), .hint = {}});
  }
  return runs;
}

Window whole_axis(const Axis& axis) {
  return {.name = "all", .from = axis.lowest(), .to = axis.highest(), .except = {}};
}

}  // namespace bandwright
