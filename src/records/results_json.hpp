// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <string>
#include <vector>

#include "base/error.hpp"
#include "model/model.hpp"
#include "prediction/prediction.hpp"
#include "validation/validation.hpp"

/// Results as JSON for scripts. The keys are a contract (docs/json.md): more may be added, none changes.
/// Doubles in full, what is undefined is null, one document with a newline at its end.

namespace bandwright {

/// Names of program and model that every document carries.
struct ResultHeader {
  std::string tool_version;
  std::string model_file;
};

[[nodiscard]] std::string calibration_json(const Model& model, const ResultHeader& header);

[[nodiscard]] std::string validation_json(const Model& model, const Validation& validation,
                                          const ResultHeader& header);

/// `results`: one record a spectrum, refused ones included; `samples`: means of replicates.
[[nodiscard]] std::string prediction_json(const Model& model, const Prediction& prediction,
                                          const std::vector<Warning>& warnings, const ResultHeader& header);

/// What `show` tells of a model; `content_digest` stands in the model file.
[[nodiscard]] std::string model_json(const Model& model, const std::string& content_digest,
                                     const ResultHeader& header);

}  // namespace bandwright
