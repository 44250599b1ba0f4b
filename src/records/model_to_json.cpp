// SPDX-License-Identifier: Apache-2.0
#include "records/model_to_json.hpp"

#include <nlohmann/json.hpp>

#include "records/model_file.hpp"

namespace bandwright {
namespace {

/// A file name without its folders: the same inputs give the same bytes wherever they lie.
std::string without_folders(const std::string& file) { return file.substr(file.find_last_of("/\\") + 1); }

Json inputs_to_json(const std::vector<InputDigest>& inputs) {
  Json out = Json::array();
  for (const InputDigest& input : inputs)
    out.push_back({{"role", input.role}, {"name", input.name}, {"sha256", input.sha256}});
  return out;
}

Json axis_to_json(const Axis& axis) {
  Json unit = nullptr;
  if (axis.unit()) unit = text_of(*axis.unit());
  return {{"unit", std::move(unit)}, {"positions", json_list(axis.positions())}};
}

Json warnings_to_json(const std::vector<Warning>& warnings) {
  Json out = Json::array();
  for (const Warning& warning : warnings)
    out.push_back({{"text", warning.text}, {"file", without_folders(warning.file)}, {"line", warning.line}});
  return out;
}

Json steps_to_json(const std::vector<Step>& steps) {
  Json out = Json::array();
  for (const Step& step : steps) out.push_back(step_to_json(step));
  return out;
}

Json scaling_to_json(Scaling kind, const FittedScaling& fitted) {
  return {{"kind", text_of(kind)}, {"mean", json_list(fitted.mean)}, {"scale", json_list(fitted.scale)}};
}

Json choices_to_json(const FactorDecision& decision) {
  Json out = Json::array();
  for (const FactorDecision::Choice& choice : decision.choices)
    out.push_back({{"rule", text_of(choice.rule)}, {"factors", choice.factors}});
  return out;
}

Json curve_to_json(const std::vector<CurvePoint>& curve) {
  Json out = Json::array();
  for (const CurvePoint& point : curve) {
    out.push_back({{"factors", point.factors},
                   {"rmsec", json_number(point.rmsec)},
                   {"rmsecv", json_number(point.rmsecv)},
                   {"press", json_number(point.press)},
                   {"bias_cv", json_number(point.bias_cv)}});
  }
  return out;
}

Json regression_to_json(const ComponentModel& component) {
  const LatentPath& path = component.calibration.path;
  Json rule = nullptr;
  if (component.decision.rule) rule = text_of(*component.decision.rule);
  return {{"kind", text_of(component.recipe.kind)},
          {"max_factors", component.recipe.max_factors},
          {"factors", component.factors()},
          {"rule", std::move(rule)},
          {"choices", choices_to_json(component.decision)},
          {"curve", curve_to_json(component.curve)},
          {"path_end", text_of(path.end)},
          {"rotations", json_rows(path.rotations)},
          {"loadings", json_rows(path.loadings)},
          {"y_loadings", json_list(path.y_loadings)},
          {"score_squares", json_list(path.score_squares)}};
}

Json coefficients_to_json(const Calibration& calibration) {
  return {{"axis", json_list(calibration.chain.positions())},
          {"values", json_list(calibration.coefficients(calibration.factors()))},
          {"intercept", json_number(calibration.intercept(calibration.factors()))}};
}

Json statistics_to_json(const CalibrationStatistics& s) {
  return {{"samples", s.samples},
          {"spectra", s.spectra},
          {"reference_sd", json_number(s.reference_sd)},
          {"rmsec", json_number(s.rmsec)},
          {"sec", json_number(s.sec)},
          {"sec_df", json_number(s.sec_df)},
          {"r2", json_number(s.r2)},
          {"rmsecv", json_number(s.rmsecv)},
          {"press", json_number(s.press)},
          {"bias_cv", json_number(s.bias_cv)},
          {"secv", json_number(s.secv)},
          {"r2_cv", json_number(s.r2_cv)}};
}

Json limits_to_json(const OutlierLimits& limits) {
  return {{"value_min", json_number(limits.value_min)},
          {"value_max", json_number(limits.value_max)},
          {"t2", json_number(limits.t2)},
          {"t2_calibration", json_number(limits.t2_calibration)},
          {"q", json_number(limits.q)},
          {"q_calibration", json_number(limits.q_calibration)},
          {"q_jackson_mudholkar", json_number(limits.q_jackson_mudholkar)},
          {"leverage_max", json_number(limits.leverage_max)}};
}

Json evidence_to_json(const StandardsEvidence& evidence) {
  return {{"spectrum_ids", evidence.spectrum_ids},
          {"samples", evidence.samples},
          {"reference", json_list(evidence.reference)},
          {"fitted", json_list(evidence.fitted)},
          {"cross_validated", json_list(evidence.cross_validated)},
          {"leverage", json_list(evidence.leverage)},
          {"t2", json_list(evidence.t2)},
          {"q", json_list(evidence.q)},
          {"studentised", json_list(evidence.studentised)}};
}

Json validation_to_json(const std::optional<IndependentError>& validation) {
  if (!validation) return nullptr;
  return {{"samples", validation->samples},
          {"rmsep", json_number(validation->rmsep)},
          {"sep", json_number(validation->sep)},
          {"bias", json_number(validation->bias)},
          {"set_sha256", validation->set_digest}};
}

Json component_to_json(const ComponentModel& component) {
  const Calibration& calibration = component.calibration;
  return {{"name", component.name},
          {"unit", component.unit},
          {"windows", windows_to_json(calibration.chain)},
          {"steps", steps_to_json(component.recipe.steps)},
          {"scaling", scaling_to_json(component.recipe.scaling, calibration.scaling)},
          {"response_mean", json_number(calibration.response_mean)},
          {"regression", regression_to_json(component)},
          {"coefficients", coefficients_to_json(calibration)},
          {"statistics", statistics_to_json(component.statistics)},
          {"limits", limits_to_json(component.limits)},
          {"evidence", evidence_to_json(component.evidence)},
          {"validation", validation_to_json(component.validation)}};
}

}  // namespace

Json windows_to_json(const PretreatmentChain& chain) {
  Json out = Json::array();
  for (std::size_t i = 0; i < chain.windows().size(); ++i) {
    const Window& window = chain.windows()[i];
    Json except = Json::array();
    for (const Stretch& stretch : window.except)
      except.push_back(Json::array({json_number(stretch.from), json_number(stretch.to)}));
    out.push_back({{"name", window.name},
                   {"from", json_number(window.from)},
                   {"to", json_number(window.to)},
                   {"except", std::move(except)},
                   {"points", chain.layout()[i].core_points()}});
  }
  return out;
}

Json step_to_json(const Step& step) {
  Json out = Json::object();
  out["step"] = name_of(step);
  const auto add_options = [&out]<class Options>(const Options& options) {
    Options::describe([&](std::string_view name, auto member, const Bounds&, std::string_view) {
      out[std::string(name)] = options.*member;
    });
  };
  std::visit(add_options, step);
  return out;
}

ModelSections model_to_sections(const Model& model) {
  const Provenance& provenance = model.provenance;
  const std::vector<std::pair<std::string, Json>> members{
      {"format", kModelFormat},
      {"kind", kModelKind},
      {"id", provenance.id},
      {"written_by", provenance.written_by},
      {"plan", {{"name", provenance.plan_name}, {"text", provenance.plan_text}}},
      {"inputs", inputs_to_json(provenance.inputs)},
      {"axis", axis_to_json(model.axis)},
      {"ordinate", text_of(model.ordinate)},
      {"samples", model.samples},
      {"spectra", model.spectra},
      {"spectrum_ids", model.spectrum_ids},
      {"warnings", warnings_to_json(model.warnings)},
  };
  ModelSections sections;
  for (const auto& [key, value] : members) sections.members.emplace_back(key, json_text(value));
  for (const ComponentModel& component : model.components)
    sections.components.push_back(json_text(component_to_json(component)));
  return sections;
}

}  // namespace bandwright
