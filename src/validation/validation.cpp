// SPDX-License-Identifier: Apache-2.0
#include "validation/validation.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <set>
#include <unordered_map>

#include "base/number_text.hpp"
#include "model/interval.hpp"
#include "numerics/distributions.hpp"
#include "numerics/sums.hpp"

namespace bandwright {
namespace {

void refuse_standards(const Model& model, const std::vector<SampleResult>& samples) {
  std::set<std::string> standards;
  for (const ComponentModel& component : model.components)
    standards.insert(component.evidence.samples.begin(), component.evidence.samples.end());
  for (const SampleResult& sample : samples) {
    if (!standards.contains(sample.sample)) continue;
    throw Error(ErrorKind::Input, fmt::format("sample \"{}\" is one of the model's standards", sample.sample),
                {.file = {},
                 .line = 0,
                 .field = {},
                 .hint = "an independent set must hold no sample of the calibration"});
  }
}

void refuse_unusable(const Prediction& prediction, const SpectraSet& spectra) {
  for (std::size_t i = 0; i < prediction.spectra.size(); ++i) {
    const SpectrumResult& record = prediction.spectra[i];
    if (!record.refused) continue;
    throw Error(ErrorKind::Input, fmt::format("spectrum \"{}\": {}", record.spectrum, *record.refused),
                {.file = spectra.origins[i].file, .line = spectra.origins[i].line, .field = {}, .hint = {}});
  }
}

/// Is the reference value inside the interval? An interval about the true value is widened by the
/// reference method's error, which the reference value carries.
bool covers(const Model& model, const ComponentModel& component, const ComponentResult& result,
            double reference) {
  double half_width = result.high - result.value;
  if (model.recipe.interval.about == IntervalAbout::True) {
    const double lab = reference_error(model.asked(component).lab_error, reference);
    half_width = t_two_sided(model.recipe.interval.level, result.degrees_of_freedom) *
                 std::hypot(result.standard_error, lab);
  }
  return std::abs(reference - result.value) <= half_width;
}

/// Standard deviation of the reference value in this row of the table, by numbers or by column.
double reference_error_of_row(const LabError& lab_error, const ReferenceTable& reference, Index row,
                              double value) {
  if (lab_error.column.empty()) return reference_error(lab_error, value);
  const double error = reference.column(lab_error.column).values[row];
  if (std::isfinite(error) && error >= 0.0) return error;
  const Origin& origin = reference.origins[static_cast<std::size_t>(row)];
  throw Error(ErrorKind::Input, "the standard deviation of the reference value is missing or negative",
              {.file = origin.file,
               .line = origin.line,
               .field = fmt::format("column \"{}\"", lab_error.column),
               .hint = {}});
}

void judge_criteria(ComponentValidation& component, const AcceptCriteria& accept) {
  const auto at_most = [&](const char* key, const char* what, std::optional<double> limit, double value) {
    if (limit) component.criteria.push_back({key, what, value, *limit, value <= *limit});
  };
  const auto not_below = [&](const char* key, const char* what, std::optional<double> limit, double value) {
    if (limit) component.criteria.push_back({key, what, value, *limit, value >= *limit});
  };
  const ErrorStatistics& e = component.errors;
  at_most("sep_max", "sep", accept.sep_max, e.sep);
  at_most("rmsep_max", "rmsep", accept.rmsep_max, e.rmsep);
  at_most("bias_margin", "bias", accept.bias_margin, std::abs(e.bias));
  not_below("coverage_min", "coverage", accept.coverage_min, component.coverage);
  if (accept.n_min) not_below("n_min", "n", static_cast<double>(*accept.n_min), static_cast<double>(e.n));
  not_below("range_min", "range_share", accept.range_min, component.range_share);
  not_below("r2_min", "r2", accept.r2_min, e.r2);
  if (accept.bias_margin) component.equivalence_p = equivalence_p(e, *accept.bias_margin);
}

ComponentValidation validate_component(const Model& model, std::size_t c,
                                       const std::vector<SampleResult>& samples,
                                       const std::unordered_map<std::string, std::size_t>& sample_position,
                                       const ReferenceTable& reference) {
  const ComponentModel& fitted = model.components[c];
  const ReferenceColumn& column = reference.column(model.asked(fitted).reference_column());
  ComponentValidation out;
  out.name = fitted.name;
  out.unit = fitted.unit;
  std::vector<double> reference_values;
  std::vector<double> predicted_values;
  std::vector<double> reference_errors;
  const LabError& lab_error = model.asked(fitted).lab_error;
  Index covered = 0;
  for (std::size_t row = 0; row < reference.samples.size(); ++row) {
    const double value = column.values[static_cast<Index>(row)];
    const auto found = sample_position.find(reference.samples[row]);
    if (std::isnan(value) || found == sample_position.end()) continue;
    const ComponentResult& result = samples[found->second].components[c];
    out.samples.push_back(reference.samples[row]);
    reference_values.push_back(value);
    predicted_values.push_back(result.value);
    reference_errors.push_back(reference_error_of_row(lab_error, reference, static_cast<Index>(row), value));
    if (covers(model, fitted, result, value)) ++covered;
    if (!result.flags.empty()) ++out.flagged;
  }
  out.reference =
      Eigen::Map<const Vector>(reference_values.data(), static_cast<Index>(reference_values.size()));
  out.predicted =
      Eigen::Map<const Vector>(predicted_values.data(), static_cast<Index>(predicted_values.size()));
  out.errors = error_statistics(out.reference, out.predicted);
  out.sep_limit = sep_limit(fitted.statistics.sec, fitted.statistics.sec_df, out.errors.n);
  out.coverage = static_cast<double>(covered) / static_cast<double>(out.errors.n);
  out.range_share = (out.errors.reference_max - out.errors.reference_min) /
                    (fitted.limits.value_max - fitted.limits.value_min);
  if (lab_error.given())
    out.rmsep_corrected = corrected_rmsep(
        out.errors.rmsep,
        Eigen::Map<const Vector>(reference_errors.data(), static_cast<Index>(reference_errors.size())));
  judge_criteria(out, model.recipe.accept.for_component(fitted.name));
  return out;
}

/// Fewest samples asked for by infrared practice: 20, or 4 k for more than 5 factors. Formula of
/// ASTM E1655 (from memory).
Index samples_asked_for(Index factors) { return factors <= 5 ? 20 : 4 * factors; }

std::vector<Warning> warnings_about(const Model& model, const std::vector<ComponentValidation>& components) {
  std::vector<Warning> warnings;
  for (std::size_t c = 0; c < components.size(); ++c) {
    const ComponentValidation& component = components[c];
    const auto warn = [&](std::string text) {
      warnings.push_back({component.name + ": " + std::move(text), {}, 0});
    };
    const Index asked = samples_asked_for(model.components[c].factors());
    if (component.errors.n < asked)
      warn(fmt::format("{}; infrared practice asks for {} or more with {}",
                       counted(component.errors.n, "sample", "samples"), asked,
                       counted(model.components[c].factors(), "factor", "factors")));
    if (component.flagged > 0)
      warn(fmt::format("flagged, and counted in: {} of {}", component.flagged,
                       counted(component.errors.n, "sample", "samples")));
  }
  return warnings;
}

}  // namespace

std::optional<bool> ComponentValidation::passed() const {
  if (criteria.empty()) return std::nullopt;
  return std::all_of(criteria.begin(), criteria.end(), [](const CriterionOutcome& c) { return c.met; });
}

std::optional<bool> Validation::passed() const {
  std::optional<bool> all;
  for (const ComponentValidation& component : components)
    if (const auto one = component.passed()) all = all.value_or(true) && *one;
  return all;
}

Validation validate(const Model& model, const SpectraSet& spectra, const ReferenceTable& reference,
                    WorkerPool& pool) {
  Validation out;
  out.prediction = predict(model, spectra, pool);
  refuse_unusable(out.prediction, spectra);
  std::unordered_map<std::string, std::size_t> with_reference;
  std::vector<std::string> without_row;
  const std::set<std::string> rows(reference.samples.begin(), reference.samples.end());
  std::vector<SampleResult> taking_part;
  for (std::size_t s = 0; s < out.prediction.samples.size(); ++s) {
    const SampleResult& sample = out.prediction.samples[s];
    if (rows.contains(sample.sample)) {
      with_reference.emplace(sample.sample, s);
      taking_part.push_back(sample);
    } else {
      without_row.push_back(sample.sample);
    }
  }
  refuse_standards(model, taking_part);
  if (with_reference.empty())
    throw Error(ErrorKind::Input, "no spectrum belongs to a sample of the reference table");

  for (std::size_t c = 0; c < model.components.size(); ++c) {
    try {
      out.components.push_back(
          validate_component(model, c, out.prediction.samples, with_reference, reference));
    } catch (const Error& error) {
      throw error.within({.file = {},
                          .line = 0,
                          .field = fmt::format("component \"{}\"", model.components[c].name),
                          .hint = {}});
    }
  }
  out.warnings = warnings_about(model, out.components);
  if (!without_row.empty())
    out.warnings.push_back(
        {fmt::format("not tested: {} without a row in the reference table, the first is \"{}\"",
                     counted(static_cast<Index>(without_row.size()), "sample", "samples"),
                     without_row.front()),
         {},
         0});
  return out;
}

double corrected_rmsep(double rmsep, const VectorView& reference_errors) {
  const double lab = squared_norm(values_of(reference_errors)) / static_cast<double>(reference_errors.size());
  return std::sqrt(std::max(0.0, rmsep * rmsep - lab));
}

IndependentError independent_error(const ComponentValidation& component, std::string set_digest) {
  return {.samples = component.errors.n,
          .rmsep = component.errors.rmsep,
          .sep = component.errors.sep,
          .bias = component.errors.bias,
          .set_digest = std::move(set_digest)};
}

}  // namespace bandwright
