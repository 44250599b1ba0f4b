// SPDX-License-Identifier: Apache-2.0
#include "pretreatment/layout.hpp"

#include <gtest/gtest.h>

namespace bandwright {
namespace {

Axis ten_points() { return {Vector::LinSpaced(10, 1.0, 10.0), AxisUnit::Nanometre}; }

Segment only_segment(const Window& window, Index margin) {
  const std::vector<WindowLayout> layout = lay_out({window}, ten_points(), margin);
  EXPECT_EQ(layout.size(), 1u);
  EXPECT_EQ(layout[0].segments.size(), 1u);
  return layout[0].segments[0];
}

void expect_segment(const Segment& got, Index first, Index left, Index core, Index right) {
  EXPECT_EQ(got.first, first);
  EXPECT_EQ(got.left_margin, left);
  EXPECT_EQ(got.core, core);
  EXPECT_EQ(got.right_margin, right);
  EXPECT_EQ(got.extent(), left + core + right);
}

TEST(Layout, MarginsReachAsFarAsAskedAndAsThereArePoints) {
  expect_segment(only_segment({"w", 4, 6, {}}, 2), 1, 2, 3, 2);
  expect_segment(only_segment({"w", 4, 6, {}}, 0), 3, 0, 3, 0);
  expect_segment(only_segment({"w", 2, 9, {}}, 5), 0, 1, 8, 1);
  expect_segment(only_segment({"w", 10, 1, {}}, 5), 0, 0, 10, 0);
}

TEST(Layout, GapsCutWindowsAndStopMargins) {
  const std::vector<WindowLayout> layout = lay_out({{"w", 2, 9, {{5, 6}}}}, ten_points(), 3);
  ASSERT_EQ(layout[0].segments.size(), 2u);
  expect_segment(layout[0].segments[0], 0, 1, 3, 0);  // points 2 3 4, margin 1
  expect_segment(layout[0].segments[1], 6, 0, 3, 1);  // points 7 8 9, margin 10
  EXPECT_EQ(layout[0].core_points(), 6);
}

TEST(Layout, GapOutsideTheWindowStopsTheMargin) {
  expect_segment(only_segment({"w", 5, 7, {{3, 3}, {10, 10}}}, 4), 3, 1, 3, 2);
}

}  // namespace
}  // namespace bandwright
