// SPDX-License-Identifier: Apache-2.0
#include <fmt/format.h>

#include <CLI/CLI.hpp>
#include <filesystem>

#include "base/number_text.hpp"
#include "base/worker_pool.hpp"
#include "cli/command.hpp"
#include "cli/inputs.hpp"
#include "cli/outputs.hpp"
#include "cli/terminal.hpp"
#include "cli/text_table.hpp"
#include "cli/version.hpp"
#include "model/build_model.hpp"
#include "records/model_file.hpp"
#include "records/results_json.hpp"

namespace bandwright::cli {
namespace {

std::string axis_text(const Axis& axis) {
  const std::string unit = axis.unit() ? " " + std::string(text_of(*axis.unit())) : "";
  return fmt::format("{} points from {} to {}{}", axis.size(), axis[0], axis[axis.size() - 1], unit);
}

std::string scheme_text(const Recipe& recipe) {
  const CrossValidation& cv = recipe.cross_validation;
  const FoldScheme scheme = scheme_in_force(cv, !recipe.group_column.empty());
  switch (scheme) {
    case FoldScheme::LeaveOneOut:
    case FoldScheme::LeaveGroupOut:
      return std::string(text_of(scheme));
    case FoldScheme::Blocks:
    case FoldScheme::Interleaved:
      return fmt::format("{}, {} folds", text_of(scheme), cv.folds);
    case FoldScheme::Random:
      return fmt::format("random, {} folds, {} repeats, seed {}", cv.folds, cv.repeats, cv.seed);
    case FoldScheme::MonteCarlo:
      return fmt::format("monte-carlo, {} draws, {} left out, seed {}", cv.folds * cv.repeats,
                         cv.share_left_out, cv.seed);
  }
  return {};
}

std::string summary_table(const Model& model) {
  TextTable table;
  table.add_column("component", Align::Left);
  table.add_column("unit", Align::Left);
  table.add_column("kind", Align::Left);
  table.add_column(label("factors"));
  table.add_column("chosen by", Align::Left);
  for (const char* key : {"samples", "rmsec", "sec", "rmsecv", "bias_cv", "r2_cv"})
    table.add_column(label(key));
  for (const ComponentModel& c : model.components) {
    const CalibrationStatistics& s = c.statistics;
    const int d = decimals_of(c);
    table.add_row({c.name, c.unit, std::string(text_of(c.recipe.kind)), std::to_string(c.factors()),
                   c.decision.rule_text(), std::to_string(s.samples), shown("rmsec", s.rmsec, d),
                   shown("sec", s.sec, d), shown("rmsecv", s.rmsecv, d), shown("bias_cv", s.bias_cv, d),
                   shown("r2_cv", s.r2_cv, d)});
  }
  return table.text();
}

/// What the rules chose at this number of factors, and whether the model has it.
std::string marks_at(const ComponentModel& c, Index factors) {
  std::string marks;
  for (const FactorDecision::Choice& choice : c.decision.choices)
    if (choice.factors == factors) marks += (marks.empty() ? "" : ", ") + std::string(text_of(choice.rule));
  if (factors != c.factors()) return marks;
  return marks.empty() ? "in the model" : "in the model; " + marks;
}

std::string curve_table(const ComponentModel& c) {
  TextTable table;
  table.add_column(label("factors"));
  for (const char* key : {"rmsec", "rmsecv", "press", "bias_cv"}) table.add_column(label(key));
  table.add_column("chosen by", Align::Left);
  const int d = decimals_of(c);
  for (const CurvePoint& p : c.curve)
    table.add_row({std::to_string(p.factors), shown("rmsec", p.rmsec, d), shown("rmsecv", p.rmsecv, d),
                   shown("press", p.press, d), shown("bias_cv", p.bias_cv, d), marks_at(c, p.factors)});
  return fmt::format("{}: error against number of factors{}\n{}", printable(c.name),
                     c.unit.empty() ? "" : ", " + printable(c.unit), table.text(2));
}

std::string for_people(const Model& model, const std::string& out) {
  std::string text = model.recipe.title.empty() ? std::string{} : printable(model.recipe.title) + "\n";
  text += fmt::format("{} standards, {} spectra, {}; cross-validation: {}\n\n", model.samples, model.spectra,
                      axis_text(model.axis), scheme_text(model.recipe));
  text += summary_table(model) + "\n";
  for (const ComponentModel& component : model.components) text += curve_table(component) + "\n";
  for (const Exclusion& exclusion : model.recipe.exclusions)
    text += fmt::format("left out: {}: {}\n",
                        printable(exclusion.sample.empty() ? exclusion.spectrum : exclusion.sample),
                        printable(exclusion.reason));
  text += fmt::format("model {} written to {}\n", short_digest(model.provenance.id), printable(out));
  text += "Errors are predicted - reference. \"bandwright show\" defines each number.\n";
  return text + std::string(caution());
}

/// Where in the plan the thing stands that an error's field names.
ErrorContext place_in_plan(const Plan& plan, const std::string& field) {
  ErrorContext place{.file = plan.path, .line = 0, .field = {}, .hint = {}};
  for (std::size_t i = 0; i < plan.recipe.windows.size(); ++i)
    if (field == fmt::format("window \"{}\"", plan.recipe.windows[i].name)) place.line = plan.window_lines[i];
  for (std::size_t i = 0; i < plan.recipe.components.size(); ++i)
    if (field == fmt::format("component \"{}\"", plan.recipe.components[i].name))
      place.line = plan.component_lines[i];
  for (std::size_t i = 0; i < plan.recipe.exclusions.size(); ++i) {
    const Exclusion& exclusion = plan.recipe.exclusions[i];
    const std::string& name = exclusion.sample.empty() ? exclusion.spectrum : exclusion.sample;
    if (field == fmt::format("[[exclude]] \"{}\"", name)) place.line = plan.exclusion_lines[i];
  }
  return place;
}

Model build(const Plan& plan, const LoadedSet& set, WorkerPool& pool, Messages& messages) {
  try {
    return build_model(plan.recipe, set.spectra, set.reference, pool,
                       [&](const std::string& component, std::size_t done, std::size_t total) {
                         messages.progress("cross-validating " + component, done, total);
                       });
  } catch (const Error& error) {
    throw error.within(place_in_plan(plan, error.context().field));
  }
}

class Calibrate final : public Command {
 public:
  [[nodiscard]] std::string name() const override { return "calibrate"; }
  [[nodiscard]] std::string summary() const override {
    return "build a model from standards, cross-validated";
  }
  [[nodiscard]] std::string out_help() const override {
    return "the model to write; must be given; - is standard output";
  }

  [[nodiscard]] std::string details() const override {
    return R"(The plan (TOML) names the spectra and reference values of the standards, relative to the plan itself,
the components, the windows and the method. Printed are the errors of the fit (RMSEC, SEC) and of the
cross-validation (RMSECV, bias) against the number of factors, and the number that the model has.
)";
  }

  void add_options(CLI::App& app) override {
    app.add_option("PLAN", plan_path_, "plan file; - reads standard input")->required()->type_name("");
  }

  [[nodiscard]] int run(const CommonOptions& common) override {
    if (common.out.empty())
      throw Error(ErrorKind::Usage,
                  "--out FILE is missing: the model to write (bandwright calibrate --help)");
    check_out(common);
    Messages messages(common.quiet);
    const Plan plan = load_plan(plan_path_);
    LoadedSet set = load_set(plan.standards, folder_of(plan_path_), plan.recipe);

    WorkerPool pool(common.threads == 0 ? WorkerPool::default_workers() : common.threads);
    Model model = build(plan, set, pool, messages);
    model.warnings.insert(model.warnings.begin(), set.warnings.begin(), set.warnings.end());
    model.provenance = {.plan_name = std::filesystem::path(plan_path_).filename().generic_string(),
                        .plan_text = plan.text,
                        .inputs = std::move(set.inputs),
                        .id = {},
                        .written_by = version_number()};
    model.provenance.id = model_id(model.provenance);
    messages.warn(model.warnings);
    deliver(
        common, [&] { return format_model(model); },
        [&] {
          return common.json ? calibration_json(model, {version_number(), common.out})
                             : for_people(model, common.out);
        });
    return kDone;
  }

 private:
  std::string plan_path_;
};

}  // namespace

std::unique_ptr<Command> make_calibrate() { return std::make_unique<Calibrate>(); }

}  // namespace bandwright::cli
