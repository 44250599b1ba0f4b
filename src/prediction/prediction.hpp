// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <array>
#include <optional>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

#include "base/options.hpp"
#include "base/worker_pool.hpp"
#include "model/model.hpp"
#include "spectra/spectra_set.hpp"

namespace bandwright {

/// Why a result must not be trusted.
enum class Flag {
  OutsideRange,     ///< the value lies outside the calibrated range
  UnlikeStandards,  ///< T2 above its limit
  Unexplained,      ///< Q above its limit
  Saturated,        ///< a point inside the windows is above max_absorbance
};

template <>
struct EnumTexts<Flag> {
  static constexpr std::array entries{
      std::pair{Flag::OutsideRange, std::string_view{"outside range"}},
      std::pair{Flag::UnlikeStandards, std::string_view{"unlike the standards"}},
      std::pair{Flag::Unexplained, std::string_view{"unexplained spectrum"}},
      std::pair{Flag::Saturated, std::string_view{"saturated"}}};
};

/// Judgement by spectrum against the specification limits, with a guard band. Never a release.
enum class Verdict { Within, Outside, TooClose, NoLimits, NotTrusted };

template <>
struct EnumTexts<Verdict> {
  static constexpr std::array entries{std::pair{Verdict::Within, std::string_view{"within limits"}},
                                      std::pair{Verdict::Outside, std::string_view{"out of limits"}},
                                      std::pair{Verdict::TooClose, std::string_view{"too close to call"}},
                                      std::pair{Verdict::NoLimits, std::string_view{"no limits"}},
                                      std::pair{Verdict::NotTrusted, std::string_view{"not trusted"}}};
};

/// One component of one spectrum or sample, in the unit of the component.
struct ComponentResult {
  double value = 0.0;
  double low = 0.0;  ///< ends of the interval
  double high = 0.0;
  double standard_error = 0.0;
  double degrees_of_freedom = 0.0;
  double leverage = 0.0;  ///< without 1/n
  double t2 = 0.0;
  double q = 0.0;
  bool interval_floored = false;  ///< see Uncertainty::floored
  std::vector<Flag> flags;
  Verdict verdict = Verdict::NoLimits;
  std::optional<double> largest_difference;  ///< between replicates of the sample
};

/// One spectrum; `components` follow those of the model and are empty when it was refused.
struct SpectrumResult {
  std::string sample;
  std::string spectrum;
  std::optional<std::string> refused;  ///< the reason
  std::vector<ComponentResult> components;
};

/// One sample: values and verdicts are those of the mean of its usable replicates. Leverage, T2 and Q
/// are the largest of them, flags those of any of them and of the mean.
struct SampleResult {
  std::string sample;
  Index replicates = 0;                ///< usable ones
  std::optional<std::string> refused;  ///< when none was usable
  std::vector<ComponentResult> components;
};

struct Prediction {
  std::vector<SpectrumResult> spectra;  ///< in order of the input
  std::vector<SampleResult> samples;    ///< in order of first appearance
};

/// Estimates the composition of spectra. A spectrum that a step cannot treat is refused in its own
/// record, the others go on. Each record depends on its spectra alone, bit for bit.
/// Throws Error(Input) if the axis or the ordinate contradicts the model.
[[nodiscard]] Prediction predict(const Model& model, const SpectraSet& spectra, WorkerPool& pool);

/// Throws Error(Input) that says how the axis or ordinate of the spectra contradicts the model's.
void check_measured_alike(const Model& model, const SpectraSet& spectra);

/// Samples out of spectrum records; `spectra` may hold refused records from elsewhere.
[[nodiscard]] std::vector<SampleResult> by_sample(const Model& model,
                                                  const std::vector<SpectrumResult>& spectra);

/// Verdict for a value with standard error s: within when value + w <= spec_max and value - w >=
/// spec_min, outside when value - w > spec_max or value + w < spec_min, else too close;
/// w = t(1 - risk; df) s. Guard band with one-sided risk, formula of ILAC-G8:09/2019 with Student's t
/// for the unknown standard deviation. Any flag: not trusted.
[[nodiscard]] Verdict judge(const ComponentResult& result, const ComponentRecipe& limits, double risk);

}  // namespace bandwright
