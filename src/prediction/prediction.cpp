// SPDX-License-Identifier: Apache-2.0
#include "prediction/prediction.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <limits>
#include <unordered_map>

#include "base/error.hpp"
#include "calibration/calibration.hpp"
#include "model/interval.hpp"
#include "numerics/distributions.hpp"
#include "numerics/sums.hpp"

namespace bandwright {
namespace {

void add_flag(std::vector<Flag>& flags, Flag flag) {
  if (std::find(flags.begin(), flags.end(), flag) == flags.end()) flags.push_back(flag);
}

void flag_range(ComponentResult& result, const OutlierLimits& limits) {
  if (result.value < limits.value_min || result.value > limits.value_max)
    add_flag(result.flags, Flag::OutsideRange);
}

/// Interval and verdict follow from value, leverage and flags.
void conclude(ComponentResult& result, const Model& model, const ComponentModel& component) {
  const Uncertainty u = uncertainty_of(component, model.recipe, result.value, result.leverage);
  result.standard_error = u.standard_error;
  result.degrees_of_freedom = u.degrees_of_freedom;
  result.interval_floored = u.floored;
  result.low = result.value - u.half_width;
  result.high = result.value + u.half_width;
  flag_range(result, component.limits);
  std::sort(result.flags.begin(), result.flags.end());
  result.verdict = judge(result, model.asked(component), model.recipe.decision.risk);
}

ComponentResult component_result(const Model& model, const ComponentModel& component,
                                 const Projection& projection, Index i, double largest_point) {
  ComponentResult result;
  result.value = projection.value[i];
  result.leverage = projection.leverage[i];
  result.t2 = static_cast<double>(component.statistics.samples - 1) * result.leverage;
  result.q = projection.q[i];
  if (result.t2 > component.limits.t2) result.flags.push_back(Flag::UnlikeStandards);
  if (result.q > component.limits.q) result.flags.push_back(Flag::Unexplained);
  if (largest_point > model.recipe.limits.max_absorbance) result.flags.push_back(Flag::Saturated);
  conclude(result, model, component);
  return result;
}

/// Rows first .. first + count - 1 for all components. Throws if one of them cannot be treated.
void predict_rows(const Model& model, const SpectraSet& spectra, Index first, Index count,
                  std::vector<SpectrumResult>& out) {
  const auto rows = spectra.values.middleRows(first, count);
  for (const ComponentModel& component : model.components) {
    const Projection projection = project(component.calibration, rows, component.factors());
    for (Index i = 0; i < count; ++i) {
      const double largest = component.calibration.chain.largest_inside(row_of(rows, i));
      out[static_cast<std::size_t>(first + i)].components.push_back(
          component_result(model, component, projection, i, largest));
    }
  }
}

/// As predict_rows, but a spectrum that cannot be treated gets a reason instead of values.
void predict_block(const Model& model, const SpectraSet& spectra, Index first, Index count,
                   std::vector<SpectrumResult>& out) {
  try {
    predict_rows(model, spectra, first, count, out);
    return;
  } catch (const Error& error) {
    if (error.kind() != ErrorKind::Numerical) throw;
  }
  for (Index i = first; i < first + count; ++i) {
    SpectrumResult& record = out[static_cast<std::size_t>(i)];
    record.components.clear();
    try {
      predict_rows(model, spectra, i, 1, out);
    } catch (const Error& error) {
      if (error.kind() != ErrorKind::Numerical) throw;
      record.components.clear();
      record.refused = error.message();
    }
  }
}

/// The mean of a sample's usable replicates for the component at position c.
ComponentResult mean_result(const Model& model, std::size_t c,
                            const std::vector<const SpectrumResult*>& replicates) {
  ComponentResult mean_of;
  double smallest = std::numeric_limits<double>::infinity();
  double largest = -smallest;
  for (const SpectrumResult* replicate : replicates) {
    const ComponentResult& one = replicate->components[c];
    mean_of.value += one.value / static_cast<double>(replicates.size());
    mean_of.leverage = std::max(mean_of.leverage, one.leverage);
    mean_of.t2 = std::max(mean_of.t2, one.t2);
    mean_of.q = std::max(mean_of.q, one.q);
    smallest = std::min(smallest, one.value);
    largest = std::max(largest, one.value);
    for (const Flag flag : one.flags) add_flag(mean_of.flags, flag);
  }
  if (replicates.size() > 1) mean_of.largest_difference = largest - smallest;
  conclude(mean_of, model, model.components[c]);
  return mean_of;
}

}  // namespace

void check_measured_alike(const Model& model, const SpectraSet& spectra) {
  if (spectra.ordinate && *spectra.ordinate != model.ordinate)
    throw Error(ErrorKind::Input, fmt::format("the spectra are in {}, the model was built on {}",
                                              text_of(*spectra.ordinate), text_of(model.ordinate)));
  if (!model.axis.matches(spectra.axis)) {
    const auto unit = [](const Axis& axis) {
      return axis.unit() ? " " + std::string(text_of(*axis.unit())) : std::string{};
    };
    throw Error(
        ErrorKind::Input,
        fmt::format(
            "the axis ({} points from {} to {}{}) is not that of the model ({} points from {} to {}{})",
            spectra.points(), spectra.axis[0], spectra.axis[spectra.points() - 1], unit(spectra.axis),
            model.axis.size(), model.axis[0], model.axis[model.axis.size() - 1], unit(model.axis)));
  }
}

Prediction predict(const Model& model, const SpectraSet& spectra, WorkerPool& pool) {
  check_measured_alike(model, spectra);
  Prediction out;
  for (const std::string& id : spectra.ids)
    out.spectra.push_back({.sample = sample_of(id, model.recipe.replicate_mark),
                           .spectrum = id,
                           .refused = {},
                           .components = {}});
  constexpr Index kBlock = 32;  // rows a job; cut by the data, never by the number of workers
  const Index blocks = (spectra.size() + kBlock - 1) / kBlock;
  pool.for_each_index(static_cast<std::size_t>(blocks), [&](std::size_t b) {
    const Index first = static_cast<Index>(b) * kBlock;
    predict_block(model, spectra, first, std::min(kBlock, spectra.size() - first), out.spectra);
  });
  out.samples = by_sample(model, out.spectra);
  return out;
}

std::vector<SampleResult> by_sample(const Model& model, const std::vector<SpectrumResult>& spectra) {
  std::vector<SampleResult> samples;
  std::vector<std::vector<const SpectrumResult*>> usable;
  std::unordered_map<std::string, std::size_t> position;
  for (const SpectrumResult& record : spectra) {
    const auto [found, is_new] = position.emplace(record.sample, samples.size());
    if (is_new) {
      samples.push_back({.sample = record.sample, .replicates = 0, .refused = {}, .components = {}});
      usable.emplace_back();
    }
    SampleResult& sample = samples[found->second];
    if (record.refused) {
      sample.refused = record.refused;
      continue;
    }
    ++sample.replicates;
    usable[found->second].push_back(&record);
  }
  for (std::size_t s = 0; s < samples.size(); ++s) {
    if (usable[s].empty()) continue;
    samples[s].refused.reset();
    for (std::size_t c = 0; c < model.components.size(); ++c)
      samples[s].components.push_back(mean_result(model, c, usable[s]));
  }
  return samples;
}

Verdict judge(const ComponentResult& result, const ComponentRecipe& limits, double risk) {
  if (!result.flags.empty()) return Verdict::NotTrusted;
  if (!limits.spec_min && !limits.spec_max) return Verdict::NoLimits;
  const double guard = t_upper_quantile(risk, result.degrees_of_freedom) * result.standard_error;
  const bool surely_outside = (limits.spec_max && result.value - guard > *limits.spec_max) ||
                              (limits.spec_min && result.value + guard < *limits.spec_min);
  if (surely_outside) return Verdict::Outside;
  const bool surely_within = (!limits.spec_max || result.value + guard <= *limits.spec_max) &&
                             (!limits.spec_min || result.value - guard >= *limits.spec_min);
  return surely_within ? Verdict::Within : Verdict::TooClose;
}

}  // namespace bandwright
