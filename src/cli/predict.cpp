// SPDX-License-Identifier: Apache-2.0
#include <fmt/format.h>

#include <CLI/CLI.hpp>
#include <algorithm>

#include "base/worker_pool.hpp"
#include "cli/command.hpp"
#include "cli/inputs.hpp"
#include "cli/outputs.hpp"
#include "cli/terminal.hpp"
#include "cli/text_table.hpp"
#include "cli/version.hpp"
#include "model/catalogue.hpp"
#include "model/interval.hpp"
#include "prediction/prediction.hpp"
#include "records/results_csv.hpp"
#include "records/results_json.hpp"

namespace bandwright::cli {
namespace {

std::string flags_text(const std::vector<Flag>& flags) {
  std::string text;
  for (const Flag flag : flags) text += (text.empty() ? "" : ", ") + std::string(text_of(flag));
  return text;
}

bool any_replicates(const Prediction& prediction) {
  return std::any_of(prediction.samples.begin(), prediction.samples.end(),
                     [](const SampleResult& s) { return s.replicates > 1; });
}

std::string result_table(const Model& model, const Prediction& prediction) {
  const bool replicates = any_replicates(prediction);
  TextTable table;
  table.add_column("sample", Align::Left);
  if (replicates) table.add_column("spectra");
  table.add_column("component", Align::Left);
  table.add_column("value");
  table.add_column("from");
  table.add_column("to");
  table.add_column("unit", Align::Left);
  if (replicates) table.add_column("largest difference");
  for (const char* key : {"t2", "t2_limit", "q", "q_limit"}) table.add_column(label(key));
  table.add_column("verdict by spectrum", Align::Left);
  table.add_column("flags", Align::Left);
  for (const SampleResult& sample : prediction.samples) {
    for (std::size_t c = 0; c < sample.components.size(); ++c) {
      const ComponentModel& component = model.components[c];
      const ComponentResult& r = sample.components[c];
      const int d = decimals_of(component);
      std::vector<std::string> row{sample.sample};
      if (replicates) row.push_back(std::to_string(sample.replicates));
      row.insert(row.end(), {component.name, shown("value", r.value, d), shown("value", r.low, d),
                             shown("value", r.high, d), component.unit});
      if (replicates)
        row.push_back(r.largest_difference ? shown("largest_difference", *r.largest_difference, d) : "");
      row.insert(row.end(), {shown("t2", r.t2, d), shown("t2_limit", component.limits.t2, d),
                             shown("q", r.q, d), shown("q_limit", component.limits.q, d),
                             std::string(text_of(r.verdict)), flags_text(r.flags)});
      table.add_row(std::move(row));
    }
  }
  return table.empty() ? "no sample could be estimated\n" : table.text();
}

std::string interval_text(const Model& model) {
  const IntervalRecipe& interval = model.recipe.interval;
  const bool about_reference = interval.about == IntervalAbout::Reference;
  std::string text = fmt::format(
      "from, to: {:g} % interval for {}: value -/+ {}\n"
      "  t: Student's t; h: leverage; n: standards{} [{}]",
      interval.level * 100.0,
      about_reference ? "the value that the reference method would give" : "the true value",
      about_reference ? "t S sqrt(1 + h + 1/n)" : "t sqrt((1 + h + 1/n) S^2 - s_ref^2)",
      about_reference ? "" : "; s_ref: the reference method's own error (lab_error)",
      about_reference ? "formula of ASTM E1655 (from memory)"
                      : "Faber and Bro, Chemom. Intell. Lab. Syst. 61 (2002) 133");
  for (const ComponentModel& component : model.components) {
    const ErrorScale scale = error_scale(component);
    text += fmt::format("\n  {}: S = {} {} ({})", printable(component.name),
                        shown("sec", scale.value, decimals_of(component)), printable(component.unit),
                        scale.basis == ErrorBasis::Validation ? "SEP of the recorded validation"
                        : component.validation ? "SEC, larger than the SEP of the recorded validation"
                                               : "SEC; no validation is recorded in the model");
  }
  return text + "\n";
}

std::string guard_text(const Model& model) {
  std::string limits;
  for (const ComponentModel& component : model.components) {
    const ComponentRecipe& asked = model.asked(component);
    const int d = decimals_of(component);
    if (!asked.spec_min && !asked.spec_max) continue;
    limits += fmt::format("\n  {}:{}{} {}", printable(component.name),
                          asked.spec_min ? " at least " + shown("value", *asked.spec_min, d) : "",
                          asked.spec_max ? " at most " + shown("value", *asked.spec_max, d) : "",
                          printable(component.unit));
  }
  if (limits.empty()) return {};
  return fmt::format(
      "verdicts: by spectrum, never a release; guard band with a one-sided risk of {:g} %; limits:{}\n",
      model.recipe.decision.risk * 100.0, limits);
}

std::string for_people(const Model& model, const Prediction& prediction) {
  std::string text = fmt::format("model {}{}\n\n", short_digest(model.provenance.id),
                                 model.recipe.title.empty() ? "" : ": " + printable(model.recipe.title));
  text += result_table(model, prediction);
  for (const SpectrumResult& record : prediction.spectra)
    if (record.refused)
      text += fmt::format("refused: {}: {}\n", printable(record.spectrum), printable(*record.refused));
  text += "\n" + interval_text(model) + guard_text(model);
  return text + std::string(caution());
}

bool any_component(const Prediction& prediction, bool (*matches)(const ComponentResult&)) {
  return std::any_of(prediction.samples.begin(), prediction.samples.end(), [&](const SampleResult& sample) {
    return std::any_of(sample.components.begin(), sample.components.end(), matches);
  });
}

/// "new.csv:4: "
std::string place_of(const Origin& origin) {
  return origin.line > 0 ? fmt::format("{}:{}: ", origin.file, origin.line) : origin.file + ": ";
}

std::string fault_of_fail_on(const std::string& word) {
  if (word == "flagged" || word == "outside" || word == "too-close") return {};
  return fmt::format("\"{}\" is none of flagged, outside, too-close", word);
}

class Predict final : public Command {
 public:
  [[nodiscard]] std::string name() const override { return "predict"; }
  [[nodiscard]] std::string summary() const override { return "estimate the composition of samples"; }
  [[nodiscard]] std::string out_help() const override {
    return "results as JSON, with --csv as CSV; - is standard output";
  }

  [[nodiscard]] std::string details() const override {
    return R"(Printed is a line for each component of each sample: the value of the mean of the sample's replicate
spectra, its interval, the statistics T2 and Q with the limits above which a spectrum is flagged, and
the verdict. --json and --csv also give each spectrum by itself.
  flags     outside range (the value lies outside the calibrated range), unlike the standards (T2),
            unexplained spectrum (Q), saturated (a point above max_absorbance)
  verdicts  within limits, out of limits, too close to call (the limit lies inside the guard band),
            no limits (the plan has none), not trusted (there are flags); by spectrum, never a release
A spectrum that cannot be used is listed with its reason, the others go on, the exit status is 3.
)";
  }

  void add_options(CLI::App& app) override {
    app.add_option("MODEL", model_path_, "model file; - reads standard input")->required()->type_name("");
    app.add_option("SPECTRA", spectra_, "files of spectra (CSV); globs allowed; - reads standard input")
        ->required()
        ->type_name("");
    app.add_flag("--csv", csv_, "CSV on standard output instead of the table, numbers in full");
    app.add_option("--fail-on", fail_on_,
                   "exit with status 1 if any sample is flagged, out of limits (outside) or\n"
                   "too close to call (too-close); several words with commas")
        ->delimiter(',')
        ->type_name("flagged,outside,too-close")
        ->check(CLI::Validator(fault_of_fail_on, ""));
  }

  [[nodiscard]] int run(const CommonOptions& common) override {
    if (csv_ && common.json) throw Error(ErrorKind::Usage, "--csv and --json exclude each other");
    check_out(common);
    Messages messages(common.quiet);
    const Model model = load_model(model_path_);
    LoadedSpectra loaded = load_spectra_for(model, spectra_);
    messages.warn(loaded.warnings);
    WorkerPool pool(common.threads == 0 ? WorkerPool::default_workers() : common.threads);
    Prediction prediction;
    if (loaded.spectra.size() > 0) prediction = predict(model, loaded.spectra, pool);
    for (std::size_t i = 0; i < prediction.spectra.size(); ++i)
      if (auto& reason = prediction.spectra[i].refused)
        reason = place_of(loaded.spectra.origins[i]) + *reason;
    add_refused(model, loaded.refused, prediction);

    const ResultHeader header{version_number(), model_path_};
    const auto main_result = [&] {
      return csv_ ? prediction_csv(model, prediction)
                  : prediction_json(model, prediction, loaded.warnings, header);
    };
    deliver(common, main_result,
            [&] { return csv_ || common.json ? main_result() : for_people(model, prediction); });
    return status(prediction);
  }

 private:
  /// Spectra that could not be read get their records after the others.
  static void add_refused(const Model& model, const std::vector<RefusedSpectrum>& refused,
                          Prediction& prediction) {
    for (const RefusedSpectrum& spectrum : refused) {
      prediction.spectra.push_back({.sample = sample_of(spectrum.id, model.recipe.replicate_mark),
                                    .spectrum = spectrum.id,
                                    .refused = place_of(spectrum.origin) + spectrum.reason,
                                    .components = {}});
    }
    prediction.samples = by_sample(model, prediction.spectra);
  }

  [[nodiscard]] bool asked(const char* what) const {
    return std::find(fail_on_.begin(), fail_on_.end(), what) != fail_on_.end();
  }

  [[nodiscard]] int status(const Prediction& prediction) const {
    const bool refused = std::any_of(prediction.spectra.begin(), prediction.spectra.end(),
                                     [](const SpectrumResult& record) { return record.refused.has_value(); });
    if (refused) {
      return kDataRefused;
    }
    const bool unfavourable =
        (asked("flagged") &&
         any_component(prediction, [](const ComponentResult& r) { return !r.flags.empty(); })) ||
        (asked("outside") &&
         any_component(prediction, [](const ComponentResult& r) { return r.verdict == Verdict::Outside; })) ||
        (asked("too-close") &&
         any_component(prediction, [](const ComponentResult& r) { return r.verdict == Verdict::TooClose; }));
    return unfavourable ? kUnfavourable : kDone;
  }

  std::string model_path_;
  std::vector<std::string> spectra_;
  bool csv_ = false;
  std::vector<std::string> fail_on_;
};

}  // namespace

std::unique_ptr<Command> make_predict() { return std::make_unique<Predict>(); }

}  // namespace bandwright::cli
