// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "base/error.hpp"
#include "base/matrix.hpp"
#include "calibration/calibration.hpp"
#include "model/recipe.hpp"
#include "spectra/axis.hpp"
#include "spectra/spectra_set.hpp"

namespace bandwright {

/// Errors of a calibration with this many factors, in the unit of the component.
struct CurvePoint {
  Index factors = 0;
  double rmsec = 0.0;
  double rmsecv = 0.0;
  double press = 0.0;    ///< mean over repeats
  double bias_cv = 0.0;  ///< mean of held-out value - reference
};

/// How the number of factors was chosen, with what every rule would have chosen.
struct FactorDecision {
  struct Choice {
    FactorRule rule = FactorRule::FTest;
    Index factors = 0;
  };
  Index factors = 0;
  std::optional<FactorRule> rule;  ///< empty = fixed by the plan
  std::vector<Choice> choices;     ///< one a rule

  /// "f-test", or "fixed".
  [[nodiscard]] std::string rule_text() const;
};

/// Errors of the chosen calibration. See catalogue.hpp for definitions and sources.
struct CalibrationStatistics {
  Index samples = 0;
  Index spectra = 0;
  double reference_sd = 0.0;  ///< of the standards, n - 1
  double rmsec = 0.0;
  double sec = 0.0;
  double sec_df = 0.0;  ///< n - k - 1 when centred, else n - k
  double r2 = 0.0;
  double rmsecv = 0.0;
  double press = 0.0;
  double bias_cv = 0.0;
  double secv = 0.0;
  double r2_cv = 0.0;
};

/// What a spectrum must stay within to be like the standards. Not a number = no such limit.
struct OutlierLimits {
  double value_min = 0.0;  ///< least reference value of the standards
  double value_max = 0.0;
  double t2 = 0.0;              ///< in force: for a new spectrum, F distribution
  double t2_calibration = 0.0;  ///< for the standards themselves, beta distribution
  double q = 0.0;               ///< in force: chi-squared matched to the held-out residuals
  double q_calibration = 0.0;   ///< chi-squared matched to the residuals of the fit
  double q_jackson_mudholkar = 0.0;
  double leverage_max = 0.0;  ///< largest leverage of a standard (without 1/n)
};

/// What became of each standard spectrum that serves a component, in the order of the spectra.
struct StandardsEvidence {
  std::vector<std::string> spectrum_ids;
  std::vector<std::string> samples;
  Vector reference;
  Vector fitted;
  Vector cross_validated;  ///< mean over repeats; not a number if never held out
  Vector leverage;         ///< without 1/n
  Vector t2;
  Vector q;
  Vector studentised;  ///< residual / (SEC sqrt(1 - leverage - 1/n))
};

/// Errors on samples that had no part in the calibration.
struct IndependentError {
  Index samples = 0;
  double rmsep = 0.0;
  double sep = 0.0;
  double bias = 0.0;
  std::string set_digest;  ///< SHA-256 over the digests of the files of the set
};

struct ComponentModel {
  std::string name;
  std::string unit;
  CalibrationRecipe recipe;
  Calibration calibration;  ///< with the chosen number of factors
  FactorDecision decision;
  std::vector<CurvePoint> curve;
  CalibrationStatistics statistics;
  OutlierLimits limits;
  StandardsEvidence evidence;
  std::optional<IndependentError> validation;

  [[nodiscard]] Index factors() const { return decision.factors; }
};

/// A file that a model was built from.
struct InputDigest {
  std::string role;  ///< "spectra" or "reference values"
  std::string name;  ///< as found by the plan, relative to it
  std::string sha256;
};

struct Provenance {
  std::string plan_name;  ///< file name without folders
  std::string plan_text;  ///< as written
  std::vector<InputDigest> inputs;
  std::string id;          ///< SHA-256 of plan, inputs and format version
  std::string written_by;  ///< program version
};

/// Everything that applying, explaining and re-checking a calibration needs.
struct Model {
  Recipe recipe;
  Axis axis;
  Ordinate ordinate = Ordinate::Absorbance;
  std::vector<ComponentModel> components;
  Index samples = 0;  ///< standards with at least one spectrum
  Index spectra = 0;
  std::vector<std::string> spectrum_ids;  ///< all standard spectra used, in order
  std::vector<Warning> warnings;
  Provenance provenance;

  /// The component's recipe as the plan asked for it.
  [[nodiscard]] const ComponentRecipe& asked(const ComponentModel& component) const;
};

}  // namespace bandwright
