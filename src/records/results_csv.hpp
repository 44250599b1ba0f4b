// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <string>

#include "model/model.hpp"
#include "prediction/prediction.hpp"

namespace bandwright {

/// Predictions as CSV with numbers in full: one line a component of a spectrum, refused spectra with
/// their reason, then one line a component of each sample that has several spectra (its mean; the
/// column spectrum is empty there).
[[nodiscard]] std::string prediction_csv(const Model& model, const Prediction& prediction);

}  // namespace bandwright
