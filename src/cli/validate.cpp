// SPDX-License-Identifier: Apache-2.0
#include <fmt/format.h>

#include <CLI/CLI.hpp>
#include <cmath>

#include "base/digest.hpp"
#include "base/worker_pool.hpp"
#include "cli/command.hpp"
#include "cli/inputs.hpp"
#include "cli/outputs.hpp"
#include "cli/terminal.hpp"
#include "cli/text_table.hpp"
#include "cli/version.hpp"
#include "model/catalogue.hpp"
#include "records/model_file.hpp"
#include "records/results_json.hpp"
#include "validation/validation.hpp"

namespace bandwright::cli {
namespace {

std::string verdict_word(std::optional<bool> passed) {
  if (!passed) return "not judged";
  return *passed ? "passed" : "failed";
}

std::string error_table(const Model& model, const Validation& validation) {
  TextTable table;
  table.add_column("component", Align::Left);
  table.add_column("unit", Align::Left);
  for (const char* key : {"n", "rmsep", "sep", "sep_limit", "bias", "bias_limit", "slope", "slope_low",
                          "slope_high", "r2", "coverage"})
    table.add_column(label(key));
  table.add_column("verdict", Align::Left);
  for (std::size_t i = 0; i < validation.components.size(); ++i) {
    const ComponentValidation& c = validation.components[i];
    const ErrorStatistics& e = c.errors;
    const int d = decimals_of(model.components[i]);
    table.add_row({c.name, c.unit, std::to_string(e.n), shown("rmsep", e.rmsep, d), shown("sep", e.sep, d),
                   shown("sep_limit", c.sep_limit, d), shown("bias", e.bias, d),
                   shown("bias_limit", e.bias_limit, d), shown("slope", e.slope, d),
                   shown("slope_low", e.slope_low, d), shown("slope_high", e.slope_high, d),
                   shown("r2", e.r2, d), shown("coverage", c.coverage, d), verdict_word(c.passed())});
  }
  return table.text();
}

/// The tests in words: what they found and against which limit.
std::string findings(const Model& model, const Validation& validation) {
  std::string text;
  for (std::size_t i = 0; i < validation.components.size(); ++i) {
    const ComponentValidation& c = validation.components[i];
    const ErrorStatistics& e = c.errors;
    const int d = decimals_of(model.components[i]);
    const auto judged = [](double value, double limit, const char* beyond, const char* inside) {
      if (std::isnan(value) || std::isnan(limit)) return "cannot be judged";
      return value > limit ? beyond : inside;
    };
    text += fmt::format("{}:\n", printable(c.name));
    text += fmt::format("  bias: t = {}, limit {}: {}\n", shown("bias_t", e.bias_t, d),
                        shown("bias_t_limit", e.bias_t_limit, d),
                        judged(e.bias_t, e.bias_t_limit, "significant", "not significant"));
    if (c.equivalence_p)
      text +=
          fmt::format("  bias against its margin: p = {}: {}\n", shown("equivalence_p", *c.equivalence_p, d),
                      *c.equivalence_p < 0.05 ? "shown to be inside" : "not shown to be inside");
    text += fmt::format("  slope: t = {}, limit {}: {}\n", shown("slope_t", e.slope_t, d),
                        shown("slope_t_limit", e.slope_t_limit, d),
                        judged(e.slope_t, e.slope_t_limit, "differs from 1", "not shown to differ from 1"));
    text += fmt::format(
        "  intercept 0 and slope 1 together: F = {}, limit {}: {}\n", shown("joint_f", e.joint_f, d),
        shown("joint_f_limit", e.joint_f_limit, d),
        judged(e.joint_f, e.joint_f_limit, "outside the joint ellipse", "inside the joint ellipse"));
    text += fmt::format(
        "  SEP = {}, limit {} from SEC: {}\n", shown("sep", e.sep, d), shown("sep_limit", c.sep_limit, d),
        judged(e.sep, c.sep_limit, "larger than chance allows", "not larger than chance allows"));
    if (c.rmsep_corrected)
      text += fmt::format("  RMSEP without the error of the reference method: {}\n",
                          shown("rmsep_corrected", *c.rmsep_corrected, d));
    text += fmt::format("  RPD {}, RER {}, concordance {}, range share {}\n", shown("rpd", e.rpd, d),
                        shown("rer", e.rer, d), shown("concordance", e.concordance, d),
                        shown("range_share", c.range_share, d));
    for (const CriterionOutcome& criterion : c.criteria)
      text += fmt::format("  criterion {}: {} = {}, must be {} {}: {}\n", criterion.key,
                          criterion.key == "bias_margin" ? "|bias|" : label(criterion.statistic),
                          shown(criterion.statistic, criterion.value, d),
                          criterion.key.ends_with("_min") ? "at least" : "at most",
                          shown(criterion.statistic, criterion.limit, d), criterion.met ? "met" : "NOT MET");
  }
  return text;
}

std::string verdict_sentence(const Validation& validation) {
  const std::optional<bool> passed = validation.passed();
  if (!passed) return "verdict: not judged, the plan has no [validation.accept]\n";
  return *passed ? "verdict: passed, every criterion of the plan is met\n"
                 : "verdict: failed, not every criterion of the plan is met\n";
}

std::string for_people(const Model& model, const Validation& validation, const std::string& out) {
  std::string text = fmt::format("independent test of model {}{}\n\n", short_digest(model.provenance.id),
                                 model.recipe.title.empty() ? "" : ": " + printable(model.recipe.title));
  text += error_table(model, validation) + "\n" + findings(model, validation) + "\n" +
          verdict_sentence(validation);
  if (!out.empty()) text += fmt::format("model with this validation written to {}\n", printable(out));
  text += "Errors are predicted - reference; tests at the 95 % level.\n";
  return text + std::string(caution());
}

/// One digest for all files of the set.
std::string set_digest(const std::vector<InputDigest>& inputs) {
  std::string all;
  for (const InputDigest& input : inputs) all += input.sha256 + "\n";
  return sha256(all);
}

class Validate final : public Command {
 public:
  [[nodiscard]] std::string name() const override { return "validate"; }
  [[nodiscard]] std::string summary() const override { return "test a saved model on an independent set"; }
  [[nodiscard]] std::string out_help() const override {
    return "a model with this validation recorded: its intervals then use the larger\n"
           "of SEC and SEP; - is standard output";
  }

  [[nodiscard]] std::string details() const override {
    return R"(The set must hold no sample of the standards. Without --spectra and --reference it is the one that
[validation] of the plan in the model names, relative to the directory of the model file. Printed are
the errors and their tests over samples (the means of replicate spectra). The verdict is "passed" when
every criterion of [validation.accept] is met; "failed" and "not judged" (no criterion in the plan)
give exit status 1.
)";
  }

  void add_options(CLI::App& app) override {
    app.add_option("MODEL", model_path_, "model file; - reads standard input")->required()->type_name("");
    app.add_option("--spectra", spectra_, "spectra of the set (CSV); globs allowed")->type_name("FILE");
    app.add_option("--reference", reference_, "reference values of the set (CSV)")->type_name("FILE");
  }

  [[nodiscard]] int run(const CommonOptions& common) override {
    if (spectra_.empty() != reference_.empty())
      throw Error(ErrorKind::Usage, fmt::format("{} is missing: --spectra and --reference go together",
                                                spectra_.empty() ? "--spectra" : "--reference"));
    check_out(common);
    Messages messages(common.quiet);
    const Model model = load_model(model_path_);
    const LoadedSet set = load_independent_set(model);
    messages.warn(set.warnings);
    WorkerPool pool(common.threads == 0 ? WorkerPool::default_workers() : common.threads);
    const Validation validation = validate(model, set.spectra, set.reference, pool);
    messages.warn(validation.warnings);
    const auto on_screen = [&] {
      return common.json ? validation_json(model, validation, {version_number(), model_path_})
                         : for_people(model, validation, common.out);
    };
    const auto with_validation = [&] {
      Model recorded = model;
      for (std::size_t i = 0; i < model.components.size(); ++i)
        recorded.components[i].validation =
            independent_error(validation.components[i], set_digest(set.inputs));
      return format_model(recorded);
    };
    deliver(common, with_validation, on_screen);
    return validation.passed().value_or(false) ? kDone : kUnfavourable;
  }

 private:
  [[nodiscard]] LoadedSet load_independent_set(const Model& model) const {
    const Plan plan = parse_plan(model.provenance.plan_text, model.provenance.plan_name);
    SetFiles files = plan.validation.value_or(plan.standards);
    if (!spectra_.empty()) {
      files.spectra = spectra_;
      files.reference = reference_;
      files.group.clear();
      return load_set(files, {}, model.recipe);
    }
    if (!plan.validation)
      throw Error(ErrorKind::Usage, "the plan in the model has no [validation]",
                  {.file = model_path_, .line = 0, .field = {}, .hint = "give --spectra and --reference"});
    try {
      return load_set(files, folder_of(model_path_), model.recipe);
    } catch (const Error& error) {
      throw error.within(
          {.file = {},
           .line = 0,
           .field = {},
           .hint =
               "[validation] of the plan, relative to the model file; or give --spectra and --reference"});
    }
  }

  std::string model_path_;
  std::vector<std::string> spectra_;
  std::string reference_;
};

}  // namespace

std::unique_ptr<Command> make_validate() { return std::make_unique<Validate>(); }

}  // namespace bandwright::cli
