// SPDX-License-Identifier: Apache-2.0
#include "spectra/axis.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "base/error.hpp"

namespace bandwright {
namespace {

constexpr double kEvenTolerance = 1e-2;   // of the step
constexpr double kMatchTolerance = 1e-3;  // of the step

void check_positions(const Vector& positions) {
  for (Index i = 0; i < positions.size(); ++i) {
    if (!std::isfinite(positions[i]) || positions[i] <= 0.0)
      throw Error(ErrorKind::Input,
                  fmt::format("axis value {} is {}; it must be a positive number", i + 1, positions[i]));
  }
  if (positions.size() < 2) return;
  const bool falling = positions[1] < positions[0];
  for (Index i = 1; i < positions.size(); ++i) {
    const bool ordered = falling ? positions[i] < positions[i - 1] : positions[i] > positions[i - 1];
    if (!ordered) {
      throw Error(ErrorKind::Input,
                  fmt::format("axis values {} and {} ({} and {}) break the {} order", i, i + 1,
                              positions[i - 1], positions[i], falling ? "falling" : "rising"));
    }
  }
}

}  // namespace

Axis::Axis(Vector positions, std::optional<AxisUnit> unit) : positions_(std::move(positions)), unit_(unit) {
  check_positions(positions_);
}

std::optional<double> Axis::even_step(Index first, Index count) const {
  if (count < 2) return std::nullopt;
  const double step = (positions_[first + count - 1] - positions_[first]) / static_cast<double>(count - 1);
  for (Index i = first + 1; i < first + count; ++i) {
    if (std::abs(positions_[i] - positions_[i - 1] - step) > kEvenTolerance * std::abs(step))
      return std::nullopt;
  }
  return step;
}

bool Axis::matches(const Axis& other) const {
  if (size() != other.size()) return false;
  if (unit_ && other.unit_ && *unit_ != *other.unit_) return false;
  for (Index i = 0; i < size(); ++i) {
    const Index neighbour = i + 1 < size() ? i + 1 : i - 1;
    const double spacing = neighbour < 0 ? 1.0 : std::abs(positions_[neighbour] - positions_[i]);
    if (std::abs(positions_[i] - other.positions_[i]) > kMatchTolerance * spacing) return false;
  }
  return true;
}

}  // namespace bandwright
