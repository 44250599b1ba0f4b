// SPDX-License-Identifier: Apache-2.0
#include <fmt/format.h>

#include <CLI/CLI.hpp>
#include <algorithm>

#include "base/number_text.hpp"
#include "cli/command.hpp"
#include "cli/inputs.hpp"
#include "cli/outputs.hpp"
#include "cli/text_table.hpp"
#include "cli/version.hpp"
#include "model/catalogue.hpp"
#include "model/interval.hpp"
#include "records/model_file.hpp"
#include "records/results_json.hpp"

namespace bandwright::cli {
namespace {

std::string window_text(const Window& window, const std::string& unit) {
  std::string text = fmt::format("{} {} to {}{}", printable(window.name), window.from, window.to, unit);
  for (const Stretch& stretch : window.except)
    text += fmt::format(", without {} to {}", stretch.from, stretch.to);
  return text;
}

/// A step with its options, by its own description.
std::string step_text(const Step& step) {
  std::string text(name_of(step));
  std::visit(
      [&](const auto& options) {
        using Options = std::decay_t<decltype(options)>;
        Options::describe([&](std::string_view name, auto member, const Bounds&, std::string_view) {
          text += fmt::format(", {} {}", name, options.*member);
        });
      },
      step);
  return text;
}

std::string chain_text(const Model& model, const ComponentModel& component) {
  const std::string unit = model.axis.unit() ? " " + std::string(text_of(*model.axis.unit())) : "";
  std::string text = "  windows:";
  for (const Window& window : component.recipe.windows) text += "\n    " + window_text(window, unit);
  text += "\n  pretreatment:";
  for (const Step& step : component.recipe.steps) text += "\n    " + step_text(step);
  text += fmt::format("\n    scaling {}\n  regression: {}, {} factors ({}), on {} points\n",
                      text_of(component.recipe.scaling), text_of(component.recipe.kind), component.factors(),
                      component.decision.rule_text(), component.calibration.chain.points());
  return text;
}

struct Row {
  const char* key;
  double value;
};

std::vector<Row> rows_of(const ComponentModel& component) {
  const CalibrationStatistics& s = component.statistics;
  const OutlierLimits& l = component.limits;
  std::vector<Row> rows{{"samples", static_cast<double>(s.samples)},
                        {"rmsec", s.rmsec},
                        {"sec", s.sec},
                        {"rmsecv", s.rmsecv},
                        {"secv", s.secv},
                        {"bias_cv", s.bias_cv},
                        {"r2", s.r2},
                        {"r2_cv", s.r2_cv},
                        {"value_min", l.value_min},
                        {"value_max", l.value_max},
                        {"t2_limit", l.t2},
                        {"q_limit", l.q}};
  if (component.validation) {
    const IndependentError& v = *component.validation;
    rows.insert(
        rows.end(),
        {{"n", static_cast<double>(v.samples)}, {"rmsep", v.rmsep}, {"sep", v.sep}, {"bias", v.bias}});
  }
  return rows;
}

std::string statistics_table(const ComponentModel& component) {
  TextTable table;
  table.add_column("statistic", Align::Left);
  table.add_column("value");
  table.add_column("unit", Align::Left);
  const int d = decimals_of(component);
  for (const Row& row : rows_of(component)) {
    const Statistic& what = statistic(row.key);
    table.add_row({std::string(what.label), bandwright::shown(what, row.value, d),
                   what.quantity == Quantity::ComponentUnit ? component.unit : ""});
  }
  return table.text(2);
}

/// What each statistic of the tables means, once.
std::string definitions(const Model& model) {
  std::vector<std::string_view> keys;
  for (const ComponentModel& component : model.components)
    for (const Row& row : rows_of(component))
      if (std::find(keys.begin(), keys.end(), row.key) == keys.end()) keys.emplace_back(row.key);
  std::string text = "\ndefinitions\n";
  for (const std::string_view key : keys) {
    const Statistic& what = statistic(key);
    text += fmt::format("  {}: {} [{}]\n", what.label, what.definition, what.source);
  }
  return text;
}

std::string interval_line(const Model& model, const ComponentModel& component) {
  const ErrorScale scale = error_scale(component);
  return fmt::format("  interval: {:g} %, for the {} value, S = {} with {:g} degrees of freedom ({})\n",
                     model.recipe.interval.level * 100.0,
                     model.recipe.interval.about == IntervalAbout::Reference ? "reference" : "true",
                     with_unit(shown("sec", scale.value, decimals_of(component)), printable(component.unit)),
                     scale.degrees_of_freedom,
                     scale.basis == ErrorBasis::Calibration ? "SEC" : "SEP of the recorded validation");
}

std::string limits_line(const Model& model) {
  const double a = model.recipe.limits.significance;
  return fmt::format(
      "  limits: T2 and Q are set so that {:g} % of good spectra exceed each (a = {:g}); saturated above "
      "{:g}\n",
      a * 100.0, a, model.recipe.limits.max_absorbance);
}

std::string for_people(const Model& model, const std::string& content_digest) {
  std::string text = fmt::format(
      "title           {}\nmodel id        {}\ncontent SHA-256 {}\nwritten by      bandwright {}\n",
      printable(model.recipe.title), model.provenance.id, content_digest, model.provenance.written_by);
  const std::string unit = model.axis.unit() ? " " + std::string(text_of(*model.axis.unit())) : "";
  text += fmt::format("standards       {} samples, {} spectra\naxis            {} points from {} to {}{}\n",
                      model.samples, model.spectra, model.axis.size(), model.axis[0],
                      model.axis[model.axis.size() - 1], unit);
  for (const InputDigest& input : model.provenance.inputs)
    text += fmt::format("{:<15} {} SHA-256 {}\n", input.role == "spectra" ? "spectra" : "reference",
                        printable(input.name), input.sha256);
  for (const Exclusion& exclusion : model.recipe.exclusions)
    text += fmt::format("left out        {}: {}\n",
                        printable(exclusion.sample.empty() ? exclusion.spectrum : exclusion.sample),
                        printable(exclusion.reason));
  for (const Warning& warning : model.warnings)
    text += fmt::format("warning         {}\n", warning.one_line());
  for (const ComponentModel& component : model.components) {
    text +=
        fmt::format("\n{}\n", with_unit(printable(component.name),
                                        component.unit.empty() ? "" : "[" + printable(component.unit) + "]"));
    text += chain_text(model, component) + interval_line(model, component) + limits_line(model) +
            statistics_table(component);
  }
  return text + definitions(model) + "\nErrors are predicted - reference.\n" + std::string(caution());
}

class Show final : public Command {
 public:
  [[nodiscard]] std::string name() const override { return "show"; }
  [[nodiscard]] std::string summary() const override { return "describe a saved model"; }
  [[nodiscard]] std::string out_help() const override {
    return "the description as JSON, with --plan the plan; - is standard output";
  }

  [[nodiscard]] std::string details() const override {
    return R"(Printed are the names and digests of everything the model was built from, what was left out and why,
windows, pretreatment, regression, errors and limits of each component, and a definition with its
source for every number.
)";
  }

  void add_options(CLI::App& app) override {
    app.add_option("MODEL", model_path_, "model file; - reads standard input")->required()->type_name("");
    app.add_flag("--plan", plan_, "print the plan inside the model, as it was written, and nothing else");
  }

  [[nodiscard]] int run(const CommonOptions& common) override {
    if (plan_ && common.json) throw Error(ErrorKind::Usage, "--plan and --json exclude each other");
    check_out(common);
    const std::string text = read_model_text(model_path_);
    const Model model = parse_model(text, model_path_);
    const std::string digest = model_content_digest(text);
    const ResultHeader header{version_number(), model_path_};
    const auto main_result = [&] {
      return plan_ ? model.provenance.plan_text : model_json(model, digest, header);
    };
    deliver(common, main_result,
            [&] { return common.json || plan_ ? main_result() : for_people(model, digest); });
    return kDone;
  }

 private:
  std::string model_path_;
  bool plan_ = false;
};

}  // namespace

std::unique_ptr<Command> make_show() { return std::make_unique<Show>(); }

}  // namespace bandwright::cli
