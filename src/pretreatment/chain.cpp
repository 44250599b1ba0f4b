// SPDX-License-Identifier: Apache-2.0
#include "pretreatment/chain.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "base/error.hpp"
#include "numerics/sums.hpp"

namespace bandwright {
namespace {

/// Points that the moving windows of all steps reach beyond a point.
Index total_half_width(const std::vector<Step>& steps) {
  Index total = 0;
  for (const Step& step : steps)
    if (const auto* filter = std::get_if<SavitzkyGolay>(&step)) total += filter->half_width();
  return total;
}

[[noreturn]] void refuse_window(const std::string& window, std::string message) {
  throw Error(ErrorKind::Usage, std::move(message),
              {.file = {}, .line = 0, .field = fmt::format("window \"{}\"", window), .hint = {}});
}

}  // namespace

/// One window of one spectrum on its way through the steps: the segments with their margins, one
/// after the other.
struct PretreatmentChain::WindowBuffer {
  const WindowLayout& layout;
  const std::vector<double>& point_steps;
  std::vector<double> values;
  std::vector<double> scratch;
};

PretreatmentChain::PretreatmentChain(std::vector<Step> steps, std::vector<Window> windows, const Axis& axis)
    : steps_(std::move(steps)), windows_(std::move(windows)) {
  layout_ = lay_out(windows_, axis, total_half_width(steps_));
  std::vector<double> positions;
  for (const WindowLayout& window : layout_) {
    std::vector<double>& point_steps = point_steps_.emplace_back();
    for (const Segment& segment : window.segments) {
      point_steps.push_back(axis.even_step(segment.first, segment.extent()).value_or(0.0));
      for (Index i = 0; i < segment.core; ++i)
        positions.push_back(axis[segment.first + segment.left_margin + i]);
    }
  }
  positions_ = Eigen::Map<const Vector>(positions.data(), static_cast<Index>(positions.size()));
  for (const Step& step : steps_) {
    PreparedSavitzkyGolay& prepared = filters_.emplace_back();
    if (const auto* filter = std::get_if<SavitzkyGolay>(&step))
      prepared = {filter->half_width(), filter->derivative, savitzky_golay_weights(*filter)};
  }
  check_fit(axis);
}

void PretreatmentChain::check_fit(const Axis& axis) const {
  for (std::size_t w = 0; w < layout_.size(); ++w) {
    for (std::size_t s = 0; s < layout_[w].segments.size(); ++s) {
      const Segment& segment = layout_[w].segments[s];
      const double from = axis[segment.first];
      const double to = axis[segment.first + segment.extent() - 1];
      for (const PreparedSavitzkyGolay& filter : filters_) {
        if (filter.weights.size() == 0) continue;
        if (segment.extent() < filter.weights.rows())
          refuse_window(layout_[w].name,
                        fmt::format("the stretch from {} to {} has {} points; savitzky-golay needs {}", from,
                                    to, segment.extent(), filter.weights.rows()));
        if (point_steps_[w][s] == 0.0)
          refuse_window(
              layout_[w].name,
              fmt::format("the points from {} to {} are not evenly spaced; savitzky-golay needs that", from,
                          to));
      }
    }
    const bool has_snv = std::any_of(steps_.begin(), steps_.end(),
                                     [](const Step& step) { return std::holds_alternative<Snv>(step); });
    if (has_snv && layout_[w].core_points() < 2)
      refuse_window(layout_[w].name, "snv needs at least two points");
  }
}

/// Interior points by the convolution row, the outermost half-width by the polynomial of the end
/// window (Savitzky and Golay leave these out; the end-window polynomial is the usual completion).
void PretreatmentChain::smooth(const PreparedSavitzkyGolay& filter, WindowBuffer& buffer) const {
  const Index m = filter.weights.rows();
  const Index h = filter.half_width;
  buffer.scratch.resize(buffer.values.size());
  Index at = 0;
  for (std::size_t s = 0; s < buffer.layout.segments.size(); ++s) {
    const Index extent = buffer.layout.segments[s].extent();
    const double unit = std::pow(buffer.point_steps[s], -static_cast<double>(filter.derivative));
    for (Index i = 0; i < extent; ++i) {
      const Index window_start = std::clamp<Index>(i - h, 0, extent - m);
      const std::span<const double> points{buffer.values.data() + at + window_start,
                                           static_cast<std::size_t>(m)};
      buffer.scratch[static_cast<std::size_t>(at + i)] =
          dot(row_of(filter.weights, i - window_start), points) * unit;
    }
    at += extent;
  }
  buffer.values.swap(buffer.scratch);
}

/// Mean and standard deviation over the cores, applied to cores and margins alike.
void PretreatmentChain::standardise(WindowBuffer& buffer) {
  buffer.scratch.clear();
  std::size_t at = 0;
  for (const Segment& segment : buffer.layout.segments) {
    const auto core = buffer.values.begin() + static_cast<std::ptrdiff_t>(at) + segment.left_margin;
    buffer.scratch.insert(buffer.scratch.end(), core, core + segment.core);
    at += static_cast<std::size_t>(segment.extent());
  }
  const double centre = mean(buffer.scratch);
  const double spread = standard_deviation(buffer.scratch);
  // Rounding alone gives a constant stretch a spread of some 1e-16 of its height.
  constexpr double kRounding = 1e-14;
  if (!(spread > kRounding * std::abs(centre)))
    throw Error(
        ErrorKind::Numerical,
        fmt::format("snv cannot be computed: the spectrum is constant in window \"{}\"", buffer.layout.name));
  for (double& value : buffer.values) value = (value - centre) / spread;
}

void PretreatmentChain::apply_to_one(std::span<const double> spectrum, std::span<double> pretreated) const {
  auto out = pretreated.begin();
  for (std::size_t w = 0; w < layout_.size(); ++w) {
    WindowBuffer buffer{.layout = layout_[w], .point_steps = point_steps_[w], .values = {}, .scratch = {}};
    for (const Segment& segment : layout_[w].segments) {
      const auto first = spectrum.begin() + segment.first;
      buffer.values.insert(buffer.values.end(), first, first + segment.extent());
    }
    for (std::size_t k = 0; k < steps_.size(); ++k) {
      if (std::holds_alternative<SavitzkyGolay>(steps_[k])) smooth(filters_[k], buffer);
      if (std::holds_alternative<Snv>(steps_[k])) standardise(buffer);
    }
    Index at = 0;
    for (const Segment& segment : layout_[w].segments) {
      const auto core = buffer.values.begin() + at + segment.left_margin;
      out = std::copy(core, core + segment.core, out);
      at += segment.extent();
    }
  }
}

Matrix PretreatmentChain::apply(const MatrixView& X) const {
  Matrix pretreated(X.rows(), points());
  for (Index i = 0; i < X.rows(); ++i) {
    try {
      apply_to_one(row_of(X, i), {pretreated.row(i).data(), static_cast<std::size_t>(points())});
    } catch (const Error& error) {
      throw error.within({.file = {}, .line = 0, .field = fmt::format("spectrum {}", i + 1), .hint = {}});
    }
  }
  return pretreated;
}

double PretreatmentChain::largest_inside(std::span<const double> spectrum) const {
  double largest = -std::numeric_limits<double>::infinity();
  for (const WindowLayout& window : layout_) {
    for (const Segment& segment : window.segments) {
      const auto core = spectrum.begin() + segment.first + segment.left_margin;
      largest = std::max(largest, *std::max_element(core, core + segment.core));
    }
  }
  return largest;
}

}  // namespace bandwright
