// SPDX-License-Identifier: Apache-2.0
#include "records/component_from_json.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <nlohmann/json.hpp>
#include <set>

#include "base/error.hpp"
#include "model/build_model.hpp"
#include "records/model_to_json.hpp"

namespace bandwright {
namespace {

/// How far coefficients may lie from what the matrices give: other processors round products otherwise.
constexpr double kRoundOff = 1e-9;

constexpr std::string_view kNotOfPlan = "does not follow from the plan";

double at_least(const JsonValue& node, double low) {
  const double value = node.number();
  if (!(value >= low)) node.refuse(fmt::format("must be at least {}, not {}", low, value));
  return value;
}

double at_least_or_null(const JsonValue& node, double low) {
  return node.is_null() ? node.number_or_null() : at_least(node, low);
}

/// `size` values, none negative.
Vector not_negative(const JsonValue& node, Index size) {
  Vector values = node.vector(size);
  for (Index i = 0; i < size; ++i)
    if (values[i] < 0.0)
      node.list()[static_cast<std::size_t>(i)].refuse(
          fmt::format("must not be negative, but is {}", values[i]));
  return values;
}

/// `size` values, all above 0.
Vector positive(const JsonValue& node, Index size) {
  Vector values = node.vector(size);
  for (Index i = 0; i < size; ++i)
    if (!(values[i] > 0.0))
      node.list()[static_cast<std::size_t>(i)].refuse(fmt::format("must be above 0, but is {}", values[i]));
  return values;
}

PretreatmentChain make_chain(const JsonValue& node, const CalibrationRecipe& recipe, const Axis& axis) {
  try {
    return {recipe.steps, recipe.windows, axis};
  } catch (const Error& error) {
    node["windows"].refuse(
        fmt::format("the windows and steps of the plan do not fit the axis: {}", error.what()));
  }
}

/// An option that a later version adds to a step is not in the file and has its default.
void require_steps_of_plan(const JsonValue& node, const std::vector<Step>& steps) {
  const std::vector<JsonValue> stored = node.list();
  if (stored.size() != steps.size()) node.refuse(std::string(kNotOfPlan));
  for (std::size_t i = 0; i < steps.size(); ++i) {
    const Json expected = step_to_json(steps[i]);
    static_cast<void>(stored[i]["step"].text());
    for (const auto& [key, value] : stored[i].node().items()) {
      const auto found = expected.find(key);
      if (found == expected.end() || *found != value) stored[i][key].refuse(std::string(kNotOfPlan));
    }
  }
}

FittedScaling read_scaling(const JsonValue& node, Scaling kind, Index points) {
  node.allow_only({"kind", "mean", "scale"});
  if (node["kind"].word<Scaling>() != kind) node["kind"].refuse(std::string(kNotOfPlan));
  FittedScaling out{.mean = node["mean"].vector(points), .scale = positive(node["scale"], points)};
  if (kind == Scaling::None && !(out.mean.array() == 0.0).all())
    node["mean"].refuse("must be 0 where nothing is centred");
  if (kind != Scaling::UnitVariance && !(out.scale.array() == 1.0).all())
    node["scale"].refuse("must be 1 where nothing is scaled");
  return out;
}

double read_response_mean(const JsonValue& node, Scaling kind) {
  const double mean = node.number();
  if (kind == Scaling::None && mean != 0.0) node.refuse("must be 0 where nothing is centred");
  return mean;
}

std::vector<FactorDecision::Choice> read_choices(const JsonValue& node, Index most) {
  std::vector<FactorDecision::Choice> choices;
  for (const JsonValue& entry : node.list()) {
    entry.allow_only({"rule", "factors"});
    const FactorRule rule = entry["rule"].word<FactorRule>();
    const Index factors = entry["factors"].whole(1);
    if (factors > most)
      entry["factors"].refuse(fmt::format("must be {} at most, the length of the curve", most));
    for (const FactorDecision::Choice& earlier : choices)
      if (earlier.rule == rule) entry["rule"].refuse("comes twice");
    choices.push_back({rule, factors});
  }
  return choices;
}

/// `node` is the regression.
FactorDecision read_decision(const JsonValue& node, const FactorChoice& asked, Index curve_length) {
  FactorDecision out;
  out.factors = node["factors"].whole(1);
  if (out.factors > curve_length)
    node["factors"].refuse(fmt::format("must be {} at most, the length of the curve", curve_length));
  if (!node["rule"].is_null()) out.rule = node["rule"].word<FactorRule>();
  out.choices = read_choices(node["choices"], curve_length);
  if (const auto* number = std::get_if<Index>(&asked)) {
    if (out.rule) node["rule"].refuse(std::string(kNotOfPlan));
    if (out.factors != *number) node["factors"].refuse(std::string(kNotOfPlan));
    return out;
  }
  if (out.rule != std::get<FactorRule>(asked)) node["rule"].refuse(std::string(kNotOfPlan));
  const bool chosen =
      std::any_of(out.choices.begin(), out.choices.end(), [&](const FactorDecision::Choice& choice) {
        return choice.rule == *out.rule && choice.factors == out.factors;
      });
  if (!chosen) node["factors"].refuse("is not what the rule chose");
  return out;
}

std::vector<CurvePoint> read_curve(const JsonValue& node, Index most) {
  std::vector<CurvePoint> curve;
  for (const JsonValue& entry : node.list()) {
    entry.allow_only({"factors", "rmsec", "rmsecv", "press", "bias_cv"});
    const Index factors = entry["factors"].whole(1);
    if (factors != static_cast<Index>(curve.size()) + 1)
      entry["factors"].refuse(fmt::format("must be {}: the curve counts up from 1", curve.size() + 1));
    curve.push_back({.factors = factors,
                     .rmsec = at_least(entry["rmsec"], 0),
                     .rmsecv = at_least(entry["rmsecv"], 0),
                     .press = at_least(entry["press"], 0),
                     .bias_cv = entry["bias_cv"].number()});
  }
  if (curve.empty() || static_cast<Index>(curve.size()) > most)
    node.refuse(fmt::format("must hold 1 to {} numbers of factors, not {}", most, curve.size()));
  return curve;
}

LatentPath read_path(const JsonValue& node, Index factors, Index points) {
  if (factors > points)
    node["factors"].refuse(fmt::format("must be {} at most, the points of the windows", points));
  return {.rotations = node["rotations"].matrix(factors, points),
          .loadings = node["loadings"].matrix(factors, points),
          .y_loadings = node["y_loadings"].vector(factors),
          .score_squares = positive(node["score_squares"], factors),
          .end = node["path_end"].word<PathEnd>()};
}

void read_regression(const JsonValue& node, const FactorChoice& asked, ComponentModel& component) {
  node.allow_only({"kind", "max_factors", "factors", "rule", "choices", "curve", "path_end", "rotations",
                   "loadings", "y_loadings", "score_squares"});
  const CalibrationRecipe& recipe = component.recipe;
  if (node["kind"].word<RegressionKind>() != recipe.kind) node["kind"].refuse(std::string(kNotOfPlan));
  if (node["max_factors"].whole(1) != recipe.max_factors) node["max_factors"].refuse(std::string(kNotOfPlan));
  component.curve = read_curve(node["curve"], recipe.max_factors);
  component.decision = read_decision(node, asked, static_cast<Index>(component.curve.size()));
  component.calibration.path = read_path(node, component.factors(), component.calibration.chain.points());
}

/// Coefficients are written for other programs; here they only prove that the matrices are whole.
void require_coefficients(const JsonValue& node, const Calibration& calibration) {
  node.allow_only({"axis", "values", "intercept"});
  const Index points = calibration.chain.points();
  if (node["axis"].vector(points) != calibration.chain.positions())
    node["axis"].refuse("is not the axis of the points inside the windows");
  const Vector stated = node["values"].vector(points);
  const Vector b = calibration.coefficients(calibration.factors());
  if (!((stated - b).stableNorm() <= kRoundOff * b.stableNorm()) || !b.allFinite())
    node["values"].refuse("do not follow from rotations, y_loadings and scale");
  const double intercept = calibration.intercept(calibration.factors());
  const double size =
      std::abs(calibration.response_mean) + b.stableNorm() * calibration.scaling.mean.stableNorm();
  if (!(std::abs(node["intercept"].number() - intercept) <= kRoundOff * size) || !std::isfinite(intercept))
    node["intercept"].refuse("does not follow from coefficients, mean and response_mean");
}

CalibrationStatistics read_statistics(const JsonValue& node, Index factors, Scaling scaling) {
  node.allow_only({"samples", "spectra", "reference_sd", "rmsec", "sec", "sec_df", "r2", "rmsecv", "press",
                   "bias_cv", "secv", "r2_cv"});
  CalibrationStatistics s;
  s.samples = node["samples"].whole(2);
  s.spectra = node["spectra"].whole(s.samples);
  s.reference_sd = at_least(node["reference_sd"], 0);
  s.rmsec = at_least(node["rmsec"], 0);
  s.sec = at_least_or_null(node["sec"], 0);
  s.sec_df = at_least(node["sec_df"], 0);
  const Index expected = s.samples - factors - (scaling == Scaling::None ? 0 : 1);
  if (s.sec_df != static_cast<double>(expected))
    node["sec_df"].refuse(fmt::format("must be {}: {} samples, {} factors", expected, s.samples, factors));
  if (std::isnan(s.sec) != (s.sec_df == 0.0))
    node["sec"].refuse("must be a number where sec_df is above 0, else null");
  s.r2 = node["r2"].number();
  s.rmsecv = at_least(node["rmsecv"], 0);
  s.press = at_least(node["press"], 0);
  s.bias_cv = node["bias_cv"].number();
  s.secv = at_least_or_null(node["secv"], 0);
  s.r2_cv = node["r2_cv"].number();
  return s;
}

OutlierLimits read_limits(const JsonValue& node) {
  node.allow_only({"value_min", "value_max", "t2", "t2_calibration", "q", "q_calibration",
                   "q_jackson_mudholkar", "leverage_max"});
  OutlierLimits limits{.value_min = node["value_min"].number(),
                       .value_max = node["value_max"].number(),
                       .t2 = at_least_or_null(node["t2"], 0),
                       .t2_calibration = at_least_or_null(node["t2_calibration"], 0),
                       .q = at_least_or_null(node["q"], 0),
                       .q_calibration = at_least_or_null(node["q_calibration"], 0),
                       .q_jackson_mudholkar = at_least_or_null(node["q_jackson_mudholkar"], 0),
                       .leverage_max = at_least(node["leverage_max"], 0)};
  if (limits.value_min > limits.value_max) node["value_min"].refuse("must not be above value_max");
  return limits;
}

StandardsEvidence read_evidence(const JsonValue& node, const CalibrationStatistics& statistics) {
  node.allow_only({"spectrum_ids", "samples", "reference", "fitted", "cross_validated", "leverage", "t2", "q",
                   "studentised"});
  const Index n = statistics.spectra;
  StandardsEvidence out;
  out.spectrum_ids = node["spectrum_ids"].texts();
  out.samples = node["samples"].texts();
  for (const auto& [key, list] :
       {std::pair{"spectrum_ids", &out.spectrum_ids}, std::pair{"samples", &out.samples}})
    if (static_cast<Index>(list->size()) != n)
      node[key].refuse(fmt::format("must be a list of {}, not of {}", n, list->size()));
  const std::set<std::string> samples(out.samples.begin(), out.samples.end());
  if (static_cast<Index>(samples.size()) != statistics.samples)
    node["samples"].refuse(fmt::format("must name {} samples, not {}", statistics.samples, samples.size()));
  out.reference = node["reference"].vector(n);
  out.fitted = node["fitted"].vector(n);
  out.cross_validated = node["cross_validated"].vector_or_null(n);
  out.leverage = not_negative(node["leverage"], n);
  out.t2 = not_negative(node["t2"], n);
  out.q = not_negative(node["q"], n);
  out.studentised = node["studentised"].vector_or_null(n);
  return out;
}

std::optional<IndependentError> read_validation(const JsonValue& node) {
  if (node.is_null()) return std::nullopt;
  node.allow_only({"samples", "rmsep", "sep", "bias", "set_sha256"});
  IndependentError out{.samples = node["samples"].whole(1),
                       .rmsep = at_least(node["rmsep"], 0),
                       .sep = at_least_or_null(node["sep"], 0),
                       .bias = node["bias"].number(),
                       .set_digest = node["set_sha256"].text()};
  if (out.samples < 2 && !node["sep"].is_null()) node["sep"].refuse("must be null for a single sample");
  return out;
}

}  // namespace

ComponentModel component_from_json(const JsonValue& node, const ComponentRecipe& asked, const Recipe& recipe,
                                   const Axis& axis) {
  node.allow_only({"name", "unit", "windows", "steps", "scaling", "response_mean", "regression",
                   "coefficients", "statistics", "limits", "evidence", "validation"});
  ComponentModel component;
  component.name = node["name"].text();
  if (component.name != asked.name)
    node["name"].refuse(fmt::format("is \"{}\", but the plan has \"{}\" here", component.name, asked.name));
  component.unit = node["unit"].text();
  if (!asked.unit.empty() && component.unit != asked.unit) node["unit"].refuse(std::string(kNotOfPlan));

  component.recipe = resolve(recipe, asked, axis);
  Calibration& calibration = component.calibration;
  calibration.chain = make_chain(node, component.recipe, axis);
  if (node["windows"].node() != windows_to_json(calibration.chain))
    node["windows"].refuse(std::string(kNotOfPlan));
  require_steps_of_plan(node["steps"], component.recipe.steps);
  const Scaling scaling = component.recipe.scaling;
  calibration.scaling = read_scaling(node["scaling"], scaling, calibration.chain.points());
  calibration.response_mean = read_response_mean(node["response_mean"], scaling);
  read_regression(node["regression"], asked.factors.value_or(recipe.regression.factors), component);
  require_coefficients(node["coefficients"], calibration);

  component.statistics = read_statistics(node["statistics"], component.factors(), scaling);
  component.limits = read_limits(node["limits"]);
  component.evidence = read_evidence(node["evidence"], component.statistics);
  component.validation = read_validation(node["validation"]);
  return component;
}

}  // namespace bandwright
