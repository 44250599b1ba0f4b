// SPDX-License-Identifier: Apache-2.0
#include "records/model_file.hpp"

#include <fmt/format.h>

#include <nlohmann/json.hpp>

#include "base/digest.hpp"
#include "base/error.hpp"
#include "records/json.hpp"
#include "records/model_from_json.hpp"
#include "records/model_seal.hpp"
#include "records/model_to_json.hpp"

namespace bandwright {
namespace {

/// Runs `read`; whatever it throws becomes an Error(Input) that names the file.
template <class Read>
auto in_file(std::string_view file, Read&& read) {
  const ErrorContext place{.file = std::string(file), .line = 0, .field = {}, .hint = {}};
  try {
    return read();
  } catch (const Error& error) {
    throw Error(ErrorKind::Input, error.message(), error.context()).within(place);
  }
}

}  // namespace

std::string model_id(const Provenance& provenance, int format) {
  std::string parts;
  const auto add = [&parts](std::string_view part) { parts += fmt::format("{}:{}", part.size(), part); };
  add(fmt::format("{}", format));
  add(provenance.plan_text);
  for (const InputDigest& input : provenance.inputs) {
    add(input.role);
    add(input.name);
    add(input.sha256);
  }
  return sha256(parts);
}

std::string format_model(const Model& model) {
  if (model.provenance.id != model_id(model.provenance))
    throw Error(ErrorKind::Internal, "the id of the model is not that of its plan and inputs");
  return sealed_text(model_to_sections(model));
}

Model parse_model(std::string_view text, std::string_view file) {
  return in_file(file, [&] {
    check_seal(text);
    const Json document = parse_json(text, file);
    const JsonValue root(document);
    Model model = model_from_json(root);
    if (model.provenance.id != model_id(model.provenance, static_cast<int>(root["format"].whole())))
      root["id"].refuse("is not the id of this plan and these inputs");
    return model;
  });
}

Model parse_model_unsealed(std::string_view text, std::string_view file) {
  return in_file(file, [&] {
    const Json document = parse_json(text, file);
    return model_from_json(JsonValue(document));
  });
}

std::string model_content_digest(std::string_view text) { return stated_content_digest(text); }

}  // namespace bandwright
