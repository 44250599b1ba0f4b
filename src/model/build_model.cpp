// SPDX-License-Identifier: Apache-2.0
#include "model/build_model.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <limits>

#include "base/error.hpp"
#include "base/number_text.hpp"
#include "model/outlier_limits.hpp"
#include "model/standards.hpp"
#include "numerics/distributions.hpp"
#include "numerics/sums.hpp"
#include "resampling/factor_rules.hpp"
#include "resampling/folds.hpp"
#include "resampling/held_out.hpp"

namespace bandwright {
namespace {

double weighted_sum(const VectorView& values, const VectorView& weights) {
  return dot(values_of(values), values_of(weights));
}

/// sum of weight * (value - mean)^2.
double weighted_spread(const Vector& values, const Vector& weights) {
  const double centre = weighted_sum(values, weights) / sum(values_of(weights));
  const Vector deviations = values.array() - centre;
  return weighted_sum(deviations.cwiseAbs2(), weights);
}

/// Everything that is known of a component before its number of factors is chosen.
struct Candidates {
  TrainingData data;
  std::vector<Index> used_rows;  ///< of the matched spectra
  Calibration full;              ///< path over all factor numbers
  PathProjection fitted;
  HeldOut held_out;
  Matrix squared_errors;  ///< held-out, samples x a
  Index factors = 0;      ///< how many numbers of factors can be compared
};

Index center_df(Scaling scaling) { return scaling == Scaling::None ? 0 : 1; }

Candidates try_all_factors(const CalibrationRecipe& recipe, TrainingData data, const std::vector<Fold>& folds,
                           WorkerPool& pool, const Progress& progress) {
  Candidates c;
  c.data = std::move(data);
  c.full = fit_calibration(recipe, c.data.axis, c.data.spectra, c.data.reference, c.data.row_weights);
  c.fitted = project_path(c.full, c.data.spectra);
  c.held_out = refit_folds(recipe, c.data, folds, pool, progress);
  c.squared_errors = squared_errors_by_sample(c.held_out, c.data);
  // One degree of freedom must be left, or SEC and the intervals do not exist.
  const Index with_freedom = c.data.samples() - center_df(recipe.scaling) - 1;
  c.factors = std::min({c.full.factors(), c.held_out.factors(), with_freedom});
  if (c.held_out.row.empty() || c.factors < 1)
    throw Error(ErrorKind::Numerical, "no sample is held out by the cross-validation");
  c.squared_errors = Matrix(c.squared_errors.leftCols(c.factors));
  return c;
}

FactorDecision decide_factors(const FactorChoice& asked, const Candidates& candidates) {
  FactorDecision decision;
  for (const auto& [rule, text] : EnumTexts<FactorRule>::entries)
    decision.choices.push_back({rule, choose_factors(rule, candidates.squared_errors)});
  if (const auto* number = std::get_if<Index>(&asked)) {
    if (*number > candidates.factors)
      throw Error(ErrorKind::Numerical,
                  fmt::format("{} factors are asked for, but these standards carry no more than {}", *number,
                              candidates.factors));
    decision.factors = *number;
  } else {
    decision.rule = std::get<FactorRule>(asked);
    decision.factors = choose_factors(*decision.rule, candidates.squared_errors);
  }
  return decision;
}

/// Mean over samples of held-out value - reference.
double held_out_bias(const Candidates& c, Index k) {
  double total = 0.0;
  double weight = 0.0;
  for (std::size_t e = 0; e < c.held_out.row.size(); ++e) {
    const Index i = c.held_out.row[e];
    total +=
        c.data.row_weights[i] * (c.held_out.predicted(static_cast<Index>(e), k - 1) - c.data.reference[i]);
    weight += c.data.row_weights[i];
  }
  return total / weight;
}

CurvePoint curve_point(const Candidates& c, Index k) {
  const Vector errors = c.fitted.values.col(k - 1) - c.data.reference;
  const auto n = static_cast<double>(c.data.samples());
  const Vector squares = c.squared_errors.col(k - 1);
  const double press = sum(values_of(squares));
  return {.factors = k,
          .rmsec = std::sqrt(weighted_sum(errors.cwiseAbs2(), c.data.row_weights) / n),
          .rmsecv = std::sqrt(press / static_cast<double>(squares.size())),
          .press = press,
          .bias_cv = held_out_bias(c, k)};
}

CalibrationStatistics statistics_of(const Candidates& c, const CurvePoint& chosen, Scaling scaling) {
  CalibrationStatistics s;
  s.samples = c.data.samples();
  s.spectra = c.data.spectra.rows();
  const auto n = static_cast<double>(s.samples);
  const double spread = weighted_spread(c.data.reference, c.data.row_weights);
  const double sse = chosen.rmsec * chosen.rmsec * n;
  s.reference_sd = std::sqrt(spread / (n - 1.0));
  s.rmsec = chosen.rmsec;
  s.sec_df = n - static_cast<double>(chosen.factors + center_df(scaling));
  s.sec = s.sec_df > 0.0 ? std::sqrt(sse / s.sec_df) : std::numeric_limits<double>::quiet_NaN();
  s.r2 = 1.0 - sse / spread;
  s.rmsecv = chosen.rmsecv;
  s.press = chosen.press;
  s.bias_cv = chosen.bias_cv;
  const auto m = static_cast<double>(c.squared_errors.rows());
  s.secv = std::sqrt(std::max(0.0, (chosen.press - m * chosen.bias_cv * chosen.bias_cv) / (m - 1.0)));
  s.r2_cv = 1.0 - chosen.press * (n / m) / spread;
  return s;
}

/// Refuses by name a spectrum that the chain cannot treat, before folds know it by a number only.
void check_pretreatment(const CalibrationRecipe& recipe, const MatchedStandards& matched,
                        const std::vector<Index>& used_rows, const SpectraSet& spectra) {
  const PretreatmentChain chain(recipe.steps, recipe.windows, spectra.axis);
  for (const Index used : used_rows) {
    const Index row = matched.spectrum_rows[static_cast<std::size_t>(used)];
    try {
      static_cast<void>(chain.apply(spectra.values.row(row)));
    } catch (const Error& error) {
      const Origin& origin = spectra.origins[static_cast<std::size_t>(row)];
      throw Error(error.kind(), error.message(),
                  {.file = origin.file,
                   .line = origin.line,
                   .field = fmt::format("spectrum \"{}\"", spectra.ids[static_cast<std::size_t>(row)]),
                   .hint = "leave it out with [[exclude]]"});
    }
  }
}

StandardsEvidence evidence_of(const Candidates& c, const MatchedStandards& matched, const SpectraSet& spectra,
                              const ReferenceTable& reference, const CalibrationStatistics& statistics,
                              Index k) {
  StandardsEvidence out;
  const auto n = static_cast<double>(statistics.samples);
  out.reference = c.data.reference;
  out.fitted = c.fitted.values.col(k - 1);
  out.cross_validated = c.held_out.mean_predicted(c.data.spectra.rows()).col(k - 1);
  out.leverage = c.fitted.leverage.col(k - 1);
  out.t2 = (n - 1.0) * out.leverage;
  out.q = c.fitted.q.col(k - 1);
  out.studentised.resize(out.fitted.size());
  for (Index i = 0; i < out.fitted.size(); ++i) {
    const double room = 1.0 - out.leverage[i] - 1.0 / n;
    out.studentised[i] = room > 0.0 ? (out.fitted[i] - out.reference[i]) / (statistics.sec * std::sqrt(room))
                                    : std::numeric_limits<double>::quiet_NaN();
    const auto used = static_cast<std::size_t>(c.used_rows[static_cast<std::size_t>(i)]);
    out.spectrum_ids.push_back(spectra.ids[static_cast<std::size_t>(matched.spectrum_rows[used])]);
    const Index table_row = matched.table_rows[static_cast<std::size_t>(matched.sample_of_spectrum[used])];
    out.samples.push_back(reference.samples[static_cast<std::size_t>(table_row)]);
  }
  return out;
}

OutlierLimits limits_of(const Candidates& c, const Calibration& chosen, double significance) {
  const Index k = chosen.factors();
  const Index n = c.data.samples();
  OutlierLimits limits;
  limits.value_min = c.data.reference.minCoeff();
  limits.value_max = c.data.reference.maxCoeff();
  limits.leverage_max = c.fitted.leverage.col(k - 1).maxCoeff();
  limits.t2 = t2_limit_new(n, k, significance);
  limits.t2_calibration = t2_limit_calibration(n, k, significance);
  const bool has_residual = k < chosen.path.variables();
  if (!has_residual) {
    limits.q = limits.q_calibration = limits.q_jackson_mudholkar = std::numeric_limits<double>::quiet_NaN();
    return limits;
  }
  const Vector held_out_q = c.held_out.q.col(k - 1);
  const Vector fitted_q = c.fitted.q.col(k - 1);
  limits.q = q_limit_from_values(values_of(held_out_q), significance);
  limits.q_calibration = q_limit_from_values(values_of(fitted_q), significance);
  Matrix residuals = spectral_residuals(chosen, c.data.spectra, k);
  for (Index i = 0; i < residuals.rows(); ++i) residuals.row(i) *= std::sqrt(c.data.row_weights[i]);
  limits.q_jackson_mudholkar =
      q_limit_jackson_mudholkar(values_of(residual_eigenvalues(residuals, n)), significance);
  return limits;
}

/// Smallest number of standards asked for by infrared practice: 6 (k + 1) when centred, else 6 k, at
/// least 24. Formula of ASTM E1655 (from memory).
Index standards_asked_for(Index factors, Scaling scaling) {
  constexpr Index kPerFactor = 6;
  constexpr Index kLeast = 24;
  return std::max(kLeast, kPerFactor * (factors + center_df(scaling)));
}

void warn_about(const ComponentModel& component, Index max_factors, double max_absorbance,
                const Candidates& c, std::vector<Warning>& warnings) {
  const auto warn = [&](std::string text) {
    warnings.push_back({component.name + ": " + std::move(text), {}, 0});
  };
  const Index asked = standards_asked_for(component.factors(), component.recipe.scaling);
  if (component.statistics.samples < asked)
    warn(fmt::format("{} for {}; infrared practice asks for {} or more",
                     counted(component.statistics.samples, "standard", "standards"),
                     counted(component.factors(), "factor", "factors"), asked));
  const auto length = static_cast<Index>(component.curve.size());
  if (length < max_factors)
    warn(fmt::format("the error curve ends at {} factors, not {}: the standards carry no more", length,
                     max_factors));
  if (component.decision.rule && component.factors() == length && length > 1)
    warn(fmt::format(
        "the rule chose the largest number of factors tried ({}); raise max_factors to see whether more "
        "would help",
        length));
  Index saturated = 0;
  for (Index i = 0; i < c.data.spectra.rows(); ++i)
    if (component.calibration.chain.largest_inside(row_of(c.data.spectra, i)) > max_absorbance) ++saturated;
  if (saturated > 0)
    warn(fmt::format("saturated inside the windows (above {}): {}", max_absorbance,
                     counted(saturated, "standard spectrum", "standard spectra")));
}

ComponentModel build_component(const Recipe& recipe, const ComponentRecipe& asked,
                               const MatchedStandards& matched, const SpectraSet& spectra,
                               const ReferenceTable& reference, const std::vector<Fold>& folds,
                               WorkerPool& pool, const Progress& progress, std::vector<Warning>& warnings) {
  const ReferenceColumn& column = reference.column(asked.reference_column());
  ComponentModel component;
  component.name = asked.name;
  component.unit = asked.unit.empty() ? column.unit : asked.unit;
  component.recipe = resolve(recipe, asked, spectra.axis);

  std::vector<Index> used_rows;
  TrainingData data = training_data(matched, spectra, column, used_rows);
  constexpr Index kFewestSamples = 3;
  if (data.samples() < kFewestSamples)
    throw Error(ErrorKind::Input,
                fmt::format("only {} with a reference value; at least {} are needed",
                            counted(data.samples(), "standard", "standards"), kFewestSamples));
  check_pretreatment(component.recipe, matched, used_rows, spectra);
  Candidates candidates = try_all_factors(component.recipe, std::move(data), folds, pool, progress);
  candidates.used_rows = std::move(used_rows);

  component.decision = decide_factors(asked.factors.value_or(recipe.regression.factors), candidates);
  const Index k = component.factors();
  for (Index a = 1; a <= candidates.factors; ++a) component.curve.push_back(curve_point(candidates, a));
  component.statistics =
      statistics_of(candidates, component.curve[static_cast<std::size_t>(k - 1)], component.recipe.scaling);
  component.calibration = candidates.full.truncated(k);
  component.evidence = evidence_of(candidates, matched, spectra, reference, component.statistics, k);
  component.limits = limits_of(candidates, component.calibration, recipe.limits.significance);
  warn_about(component, component.recipe.max_factors, recipe.limits.max_absorbance, candidates, warnings);
  return component;
}

}  // namespace

CalibrationRecipe resolve(const Recipe& recipe, const ComponentRecipe& component, const Axis& axis) {
  CalibrationRecipe resolved;
  for (const Window& window : recipe.windows) {
    const bool wanted =
        component.windows.empty() ||
        std::find(component.windows.begin(), component.windows.end(), window.name) != component.windows.end();
    if (wanted) resolved.windows.push_back(window);
  }
  if (resolved.windows.empty()) resolved.windows.push_back(whole_axis(axis));
  resolved.steps = component.steps.value_or(recipe.pretreatment.steps);
  resolved.scaling = component.scaling.value_or(recipe.pretreatment.scaling);
  resolved.kind = component.kind.value_or(recipe.regression.kind);
  resolved.max_factors = recipe.regression.max_factors;
  return resolved;
}

Model build_model(const Recipe& recipe, const SpectraSet& spectra, const ReferenceTable& reference,
                  WorkerPool& pool, const BuildProgress& progress) {
  const MatchedStandards matched = match_standards(recipe, spectra, reference);
  Model model;
  model.recipe = recipe;
  model.axis = spectra.axis;
  model.ordinate = spectra.ordinate.value_or(Ordinate::Absorbance);
  model.warnings = matched.warnings;
  model.samples = matched.samples();
  model.spectra = static_cast<Index>(matched.spectrum_rows.size());
  for (const Index row : matched.spectrum_rows)
    model.spectrum_ids.push_back(spectra.ids[static_cast<std::size_t>(row)]);

  const std::vector<Fold> folds = make_folds(recipe.cross_validation, matched.samples(), matched.groups);
  for (const ComponentRecipe& asked : recipe.components) {
    const auto report = [&](std::size_t done, std::size_t total) {
      if (progress) progress(asked.name, done, total);
    };
    try {
      model.components.push_back(
          build_component(recipe, asked, matched, spectra, reference, folds, pool, report, model.warnings));
    } catch (const Error& error) {
      throw error.within(
          {.file = {}, .line = 0, .field = fmt::format("component \"{}\"", asked.name), .hint = {}});
    }
  }
  return model;
}

}  // namespace bandwright
