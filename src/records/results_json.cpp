// SPDX-License-Identifier: Apache-2.0
#include "records/results_json.hpp"

#include <nlohmann/json.hpp>

#include "model/interval.hpp"
#include "records/json.hpp"

namespace bandwright {
namespace {

constexpr int kResultFormat = 1;

Json number_if_any(const std::optional<double>& value) { return value ? json_number(*value) : Json(nullptr); }

Json texts(const std::vector<Warning>& warnings) {
  Json list = Json::array();
  for (const Warning& warning : warnings) list.push_back(warning.one_line());
  return list;
}

Json verdict_text(std::optional<bool> passed) {
  if (!passed) return nullptr;
  return *passed ? "passed" : "failed";
}

Json document(const Model& model, const ResultHeader& header) {
  return {
      {"format", kResultFormat},
      {"tool", {{"name", "bandwright"}, {"version", header.tool_version}}},
      {"model", {{"file", header.model_file}, {"id", model.provenance.id}, {"title", model.recipe.title}}}};
}

std::string finished(const Json& json) { return json_text(json) + "\n"; }

Json choices_of(const FactorDecision& decision) {
  Json choices = Json::object();
  for (const FactorDecision::Choice& choice : decision.choices)
    choices[std::string(text_of(choice.rule))] = choice.factors;
  return choices;
}

Json curve_of(const ComponentModel& component) {
  Json curve = Json::array();
  for (const CurvePoint& point : component.curve)
    curve.push_back({{"factors", point.factors},
                     {"rmsec", json_number(point.rmsec)},
                     {"rmsecv", json_number(point.rmsecv)},
                     {"press", json_number(point.press)},
                     {"bias_cv", json_number(point.bias_cv)}});
  return curve;
}

/// Name, choice and errors of one component: what calibrate and show both tell.
Json component_summary(const ComponentModel& component) {
  const CalibrationStatistics& s = component.statistics;
  return {{"name", component.name},
          {"unit", component.unit},
          {"kind", text_of(component.recipe.kind)},
          {"factors", component.factors()},
          {"rule", component.decision.rule_text()},
          {"factors_by_rule", choices_of(component.decision)},
          {"samples", s.samples},
          {"spectra", s.spectra},
          {"rmsec", json_number(s.rmsec)},
          {"sec", json_number(s.sec)},
          {"rmsecv", json_number(s.rmsecv)},
          {"press", json_number(s.press)},
          {"bias_cv", json_number(s.bias_cv)},
          {"secv", json_number(s.secv)},
          {"r2", json_number(s.r2)},
          {"r2_cv", json_number(s.r2_cv)},
          {"curve", curve_of(component)}};
}

Json limits_of(const OutlierLimits& limits) {
  return {{"value_min", json_number(limits.value_min)},
          {"value_max", json_number(limits.value_max)},
          {"t2_limit", json_number(limits.t2)},
          {"t2_limit_calibration", json_number(limits.t2_calibration)},
          {"q_limit", json_number(limits.q)},
          {"q_limit_calibration", json_number(limits.q_calibration)},
          {"q_limit_jackson_mudholkar", json_number(limits.q_jackson_mudholkar)},
          {"leverage_max", json_number(limits.leverage_max)}};
}

Json coefficients_of(const ComponentModel& component) {
  const Calibration& calibration = component.calibration;
  return {{"axis", json_list(calibration.chain.positions())},
          {"values", json_list(calibration.coefficients(component.factors()))},
          {"intercept", json_number(calibration.intercept(component.factors()))}};
}

/// One value a standard spectrum of the model; null where the component has no reference value.
Json spread_over_spectra(const Model& model, const StandardsEvidence& evidence, const Vector& values) {
  Json list = Json::array();
  std::size_t next = 0;
  for (const std::string& id : model.spectrum_ids) {
    const bool served = next < evidence.spectrum_ids.size() && evidence.spectrum_ids[next] == id;
    list.push_back(served ? json_number(values[static_cast<Index>(next)]) : Json(nullptr));
    if (served) ++next;
  }
  return list;
}

Json exclusions_of(const Recipe& recipe) {
  Json list = Json::array();
  for (const Exclusion& exclusion : recipe.exclusions) {
    const bool by_sample = !exclusion.sample.empty();
    list.push_back({{by_sample ? "sample" : "spectrum", by_sample ? exclusion.sample : exclusion.spectrum},
                    {"reason", exclusion.reason}});
  }
  return list;
}

Json component_record(const ComponentModel& component, const Recipe& recipe, const ComponentResult& result) {
  Json flags = Json::array();
  for (const Flag flag : result.flags) flags.push_back(text_of(flag));
  return {{"name", component.name},
          {"unit", component.unit},
          {"value", json_number(result.value)},
          {"low", json_number(result.low)},
          {"high", json_number(result.high)},
          {"level", json_number(recipe.interval.level)},
          {"about", text_of(recipe.interval.about)},
          {"standard_error", json_number(result.standard_error)},
          {"interval_floored", result.interval_floored},
          {"leverage", json_number(result.leverage)},
          {"t2", json_number(result.t2)},
          {"t2_limit", json_number(component.limits.t2)},
          {"q", json_number(result.q)},
          {"q_limit", json_number(component.limits.q)},
          {"flags", flags},
          {"verdict", text_of(result.verdict)},
          {"largest_difference", number_if_any(result.largest_difference)}};
}

Json component_records(const Model& model, const std::vector<ComponentResult>& results) {
  Json list = Json::array();
  for (std::size_t c = 0; c < results.size(); ++c)
    list.push_back(component_record(model.components[c], model.recipe, results[c]));
  return list;
}

Json criteria_of(const ComponentValidation& component) {
  Json list = Json::array();
  for (const CriterionOutcome& criterion : component.criteria)
    list.push_back({{"key", criterion.key},
                    {"statistic", criterion.statistic},
                    {"value", json_number(criterion.value)},
                    {"limit", json_number(criterion.limit)},
                    {"met", criterion.met}});
  return list;
}

Json validation_record(const ComponentValidation& component) {
  const ErrorStatistics& e = component.errors;
  Json record = {{"name", component.name},
                 {"unit", component.unit},
                 {"n", e.n},
                 {"rmsep", json_number(e.rmsep)},
                 {"sep", json_number(e.sep)},
                 {"bias", json_number(e.bias)},
                 {"slope", json_number(e.slope)},
                 {"intercept", json_number(e.intercept)},
                 {"r2", json_number(e.r2)},
                 {"rpd", json_number(e.rpd)},
                 {"rer", json_number(e.rer)},
                 {"bias_t", json_number(e.bias_t)},
                 {"bias_t_limit", json_number(e.bias_t_limit)},
                 {"bias_p", json_number(e.bias_p)},
                 {"bias_limit", json_number(e.bias_limit)},
                 {"sep_limit", json_number(component.sep_limit)},
                 {"slope_t", json_number(e.slope_t)},
                 {"slope_t_limit", json_number(e.slope_t_limit)},
                 {"slope_low", json_number(e.slope_low)},
                 {"slope_high", json_number(e.slope_high)},
                 {"line_residual_sd", json_number(e.line_residual_sd)},
                 {"joint_f", json_number(e.joint_f)},
                 {"joint_f_limit", json_number(e.joint_f_limit)},
                 {"concordance", json_number(e.concordance)},
                 {"correlation_squared", json_number(e.correlation_squared)},
                 {"equivalence_p", number_if_any(component.equivalence_p)},
                 {"rmsep_corrected", number_if_any(component.rmsep_corrected)},
                 {"coverage", json_number(component.coverage)},
                 {"range_share", json_number(component.range_share)},
                 {"flagged", component.flagged},
                 {"criteria", criteria_of(component)},
                 {"verdict", verdict_text(component.passed())}};
  record["samples"] = component.samples;
  record["reference"] = json_list(component.reference);
  record["predicted"] = json_list(component.predicted);
  return record;
}

}  // namespace

std::string calibration_json(const Model& model, const ResultHeader& header) {
  Json json = document(model, header);
  json["samples"] = model.samples;
  json["spectra"] = model.spectra;
  json["points"] = model.axis.size();
  json["spectrum_ids"] = model.spectrum_ids;
  json["components"] = Json::array();
  for (const ComponentModel& component : model.components) {
    Json record = component_summary(component);
    record["limits"] = limits_of(component.limits);
    record["reference"] = spread_over_spectra(model, component.evidence, component.evidence.reference);
    record["fitted"] = spread_over_spectra(model, component.evidence, component.evidence.fitted);
    record["cross_validated"] =
        spread_over_spectra(model, component.evidence, component.evidence.cross_validated);
    record["leverage"] = spread_over_spectra(model, component.evidence, component.evidence.leverage);
    record["studentised"] = spread_over_spectra(model, component.evidence, component.evidence.studentised);
    record["t2"] = spread_over_spectra(model, component.evidence, component.evidence.t2);
    record["q"] = spread_over_spectra(model, component.evidence, component.evidence.q);
    record["coefficients"] = coefficients_of(component);
    json["components"].push_back(std::move(record));
  }
  json["excluded"] = exclusions_of(model.recipe);
  json["warnings"] = texts(model.warnings);
  return finished(json);
}

std::string validation_json(const Model& model, const Validation& validation, const ResultHeader& header) {
  Json json = document(model, header);
  json["spectrum_ids"] = Json::array();
  for (const SpectrumResult& record : validation.prediction.spectra)
    json["spectrum_ids"].push_back(record.spectrum);
  json["components"] = Json::array();
  for (const ComponentValidation& component : validation.components)
    json["components"].push_back(validation_record(component));
  json["verdict"] = verdict_text(validation.passed());
  json["warnings"] = texts(validation.warnings);
  return finished(json);
}

std::string prediction_json(const Model& model, const Prediction& prediction,
                            const std::vector<Warning>& warnings, const ResultHeader& header) {
  Json json = document(model, header);
  json["results"] = Json::array();
  for (const SpectrumResult& record : prediction.spectra)
    json["results"].push_back({{"sample", record.sample},
                               {"spectrum", record.spectrum},
                               {"refused", record.refused ? Json(*record.refused) : Json(nullptr)},
                               {"components", component_records(model, record.components)}});
  json["samples"] = Json::array();
  for (const SampleResult& sample : prediction.samples)
    json["samples"].push_back({{"sample", sample.sample},
                               {"replicates", sample.replicates},
                               {"refused", sample.refused ? Json(*sample.refused) : Json(nullptr)},
                               {"components", component_records(model, sample.components)}});
  json["warnings"] = texts(warnings);
  return finished(json);
}

std::string model_json(const Model& model, const std::string& content_digest, const ResultHeader& header) {
  Json json = document(model, header);
  json["content_sha256"] = content_digest;
  json["written_by"] = model.provenance.written_by;
  json["plan"] = {{"name", model.provenance.plan_name}, {"text", model.provenance.plan_text}};
  json["inputs"] = Json::array();
  for (const InputDigest& input : model.provenance.inputs)
    json["inputs"].push_back({{"role", input.role}, {"name", input.name}, {"sha256", input.sha256}});
  json["samples"] = model.samples;
  json["spectra"] = model.spectra;
  json["points"] = model.axis.size();
  json["components"] = Json::array();
  for (const ComponentModel& component : model.components) {
    Json record = component_summary(component);
    record["limits"] = limits_of(component.limits);
    const ErrorScale scale = error_scale(component);
    record["interval"] = {{"level", model.recipe.interval.level},
                          {"about", text_of(model.recipe.interval.about)},
                          {"standard_deviation", json_number(scale.value)},
                          {"degrees_of_freedom", json_number(scale.degrees_of_freedom)},
                          {"basis", scale.basis == ErrorBasis::Calibration ? "sec" : "sep"}};
    record["coefficients"] = coefficients_of(component);
    record["validation"] = nullptr;
    if (component.validation)
      record["validation"] = {{"samples", component.validation->samples},
                              {"rmsep", json_number(component.validation->rmsep)},
                              {"sep", json_number(component.validation->sep)},
                              {"bias", json_number(component.validation->bias)},
                              {"set_sha256", component.validation->set_digest}};
    json["components"].push_back(std::move(record));
  }
  json["excluded"] = exclusions_of(model.recipe);
  json["warnings"] = texts(model.warnings);
  return finished(json);
}

}  // namespace bandwright
