// SPDX-License-Identifier: Apache-2.0
#include "records/model_from_json.hpp"

#include <fmt/format.h>

#include <set>

#include "base/error.hpp"
#include "records/component_from_json.hpp"
#include "records/model_file.hpp"
#include "records/plan.hpp"

namespace bandwright {
namespace {

void require_format(const JsonValue& root) {
  if (!root.has("kind") || !root.has("format") || !root["kind"].is_text(kModelKind))
    root.refuse("not a model file");
  const Index format = root["format"].whole(1);
  if (format > kModelFormat)
    root.refuse(
        fmt::format("written by a newer version: format {}; this program reads {}", format, kModelFormat));
  root.allow_only({"format", "kind", "id", "written_by", "plan", "inputs", "axis", "ordinate", "samples",
                   "spectra", "spectrum_ids", "warnings", "components", "digests", "content_sha256"});
}

/// SHA-256 in the form in which base/digest writes it.
std::string read_digest(const JsonValue& node) {
  constexpr std::size_t kLength = 64;
  const std::string& text = node.text();
  if (text.size() != kLength || text.find_first_not_of("0123456789abcdef") != std::string::npos)
    node.refuse("must be a SHA-256: 64 hexadecimal digits in lower case");
  return text;
}

std::vector<InputDigest> read_inputs(const JsonValue& node) {
  std::vector<InputDigest> inputs;
  for (const JsonValue& entry : node.list()) {
    entry.allow_only({"role", "name", "sha256"});
    inputs.push_back({entry["role"].text(), entry["name"].text(), read_digest(entry["sha256"])});
  }
  return inputs;
}

Provenance read_provenance(const JsonValue& root) {
  Provenance out;
  const JsonValue plan = root["plan"];
  plan.allow_only({"name", "text"});
  out.plan_name = plan["name"].text();
  out.plan_text = plan["text"].text();
  out.inputs = read_inputs(root["inputs"]);
  out.id = read_digest(root["id"]);
  out.written_by = root["written_by"].text();
  return out;
}

Recipe read_recipe(const JsonValue& plan, const Provenance& provenance) {
  try {
    return parse_plan(provenance.plan_text, provenance.plan_name).recipe;
  } catch (const Error& error) {
    plan["text"].refuse(fmt::format("the plan cannot be read: {}", error.what()));
  }
}

Axis read_axis(const JsonValue& node) {
  node.allow_only({"unit", "positions"});
  std::optional<AxisUnit> unit;
  if (!node["unit"].is_null()) unit = node["unit"].word<AxisUnit>();
  const JsonValue positions = node["positions"];
  if (positions.list().empty()) positions.refuse("must hold at least one position");
  try {
    return {positions.vector(), unit};
  } catch (const Error& error) {
    positions.refuse(error.message());
  }
}

std::vector<Warning> read_warnings(const JsonValue& node) {
  std::vector<Warning> warnings;
  for (const JsonValue& entry : node.list()) {
    entry.allow_only({"text", "file", "line"});
    warnings.push_back(
        {entry["text"].text(), entry["file"].text(), static_cast<std::size_t>(entry["line"].whole())});
  }
  return warnings;
}

void read_counts(const JsonValue& root, Model& model) {
  model.samples = root["samples"].whole(1);
  model.spectra = root["spectra"].whole(1);
  model.spectrum_ids = root["spectrum_ids"].texts();
  const std::set<std::string> unique(model.spectrum_ids.begin(), model.spectrum_ids.end());
  if (unique.size() != model.spectrum_ids.size()) root["spectrum_ids"].refuse("an id comes twice");
  if (static_cast<Index>(unique.size()) != model.spectra)
    root["spectrum_ids"].refuse(fmt::format("must be a list of {}, not of {}", model.spectra, unique.size()));
  if (model.samples > model.spectra) root["samples"].refuse("must not be more than there are spectra");
}

/// The evidence of each component speaks of spectra of the model.
void require_known_spectra(const JsonValue& components, const Model& model) {
  const std::set<std::string> known(model.spectrum_ids.begin(), model.spectrum_ids.end());
  const std::vector<JsonValue> entries = components.list();
  for (std::size_t i = 0; i < entries.size(); ++i) {
    const ComponentModel& component = model.components[i];
    for (const std::string& id : component.evidence.spectrum_ids)
      if (!known.contains(id))
        entries[i]["evidence"]["spectrum_ids"].refuse(fmt::format("\"{}\" is no spectrum of this model", id));
    if (component.statistics.samples > model.samples)
      entries[i]["statistics"]["samples"].refuse(
          fmt::format("must be {} at most, the samples of this model", model.samples));
  }
}

}  // namespace

Model model_from_json(const JsonValue& root) {
  require_format(root);
  Model model;
  model.provenance = read_provenance(root);
  model.recipe = read_recipe(root["plan"], model.provenance);
  model.axis = read_axis(root["axis"]);
  model.ordinate = root["ordinate"].word<Ordinate>();
  read_counts(root, model);
  model.warnings = read_warnings(root["warnings"]);

  const std::vector<JsonValue> components = root["components"].list();
  const std::vector<ComponentRecipe>& asked = model.recipe.components;
  if (components.size() != asked.size())
    root["components"].refuse(fmt::format("must be a list of {} as the plan names them, not of {}",
                                          asked.size(), components.size()));
  for (std::size_t i = 0; i < components.size(); ++i)
    model.components.push_back(component_from_json(components[i], asked[i], model.recipe, model.axis));
  require_known_spectra(root["components"], model);
  return model;
}

}  // namespace bandwright
