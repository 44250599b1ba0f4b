// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <string_view>

namespace bandwright {

/// Standard normal variate: each spectrum, window by window, minus its mean and divided by its
/// standard deviation with n - 1 (Barnes, Dhanoa and Lister, Appl. Spectrosc. 43 (1989) 772).
struct Snv {
  static constexpr std::string_view kName = "snv";

  template <class Visitor>
  static void describe(Visitor&&) {}  // no options
};

}  // namespace bandwright
