// SPDX-License-Identifier: Apache-2.0
#include "pretreatment/layout.hpp"

#include <algorithm>

namespace bandwright {
namespace {

bool left_out(const Window& window, double position) {
  return std::any_of(window.except.begin(), window.except.end(),
                     [&](const Stretch& s) { return s.contains(position); });
}

/// Points that may be used from `start` outwards in the direction `step`, at most `margin`.
Index usable(const Window& window, const Axis& axis, Index start, Index step, Index margin) {
  Index count = 0;
  for (Index i = start; count < margin && i >= 0 && i < axis.size(); i += step) {
    if (left_out(window, axis[i])) break;
    ++count;
  }
  return count;
}

}  // namespace

Index WindowLayout::core_points() const {
  Index points = 0;
  for (const Segment& segment : segments) points += segment.core;
  return points;
}

std::vector<WindowLayout> lay_out(const std::vector<Window>& windows, const Axis& axis, Index margin) {
  std::vector<WindowLayout> layouts;
  for (const Window& window : windows) {
    WindowLayout layout{.name = window.name, .segments = {}};
    for (const PointRange& run : points_in(window, axis)) {
      const Index left = usable(window, axis, run.first - 1, -1, margin);
      const Index right = usable(window, axis, run.first + run.count, 1, margin);
      layout.segments.push_back(
          {.first = run.first - left, .left_margin = left, .core = run.count, .right_margin = right});
    }
    layouts.push_back(std::move(layout));
  }
  return layouts;
}

}  // namespace bandwright
