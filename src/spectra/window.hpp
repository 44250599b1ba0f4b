// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <string>
#include <vector>

#include "base/options.hpp"
#include "spectra/axis.hpp"

namespace bandwright {

/// A closed stretch of the axis, ends in either order, in the unit of the axis.
struct Stretch {
  double from = 0.0;
  double to = 0.0;

  [[nodiscard]] bool contains(double position) const {
    return from <= to ? position >= from && position <= to : position >= to && position <= from;
  }
};

/// A part of the spectrum that a model looks at.
struct Window {
  std::string name;
  double from = 0.0;
  double to = 0.0;
  std::vector<Stretch> except;  ///< stretches inside the window that are left out

  template <class Visitor>
  static void describe(Visitor&& visit) {
    visit("name", &Window::name, any_value(), "how components and reports call the window");
    visit("from", &Window::from, more_than(0), "one end, in the unit of the axis");
    visit("to", &Window::to, more_than(0), "the other end");
    visit("except", &Window::except, more_than(0), "stretches left out, [[from, to], ...]");
  }
};

/// The points first .. first + count - 1 of an axis.
struct PointRange {
  Index first = 0;
  Index count = 0;
};

/// The contiguous runs of points inside the window, in axis order.
/// Throws Error(Usage) if the window reaches beyond the axis by more than its spacing there, or
/// holds no point.
[[nodiscard]] std::vector<PointRange> points_in(const Window& window, const Axis& axis);

/// A window over the whole axis, for plans that name none.
[[nodiscard]] Window whole_axis(const Axis& axis);

}  // namespace bandwright
