// SPDX-License-Identifier: Apache-2.0
#include "records/results_csv.hpp"

#include <fmt/format.h>

#include <cmath>
#include <string_view>
#include <vector>

#include "base/number_text.hpp"

namespace bandwright {
namespace {

/// Quoted when needed (RFC 4180). A text that a spreadsheet would take for a formula gets an
/// apostrophe in front.
std::string cell(std::string text) {
  if (!text.empty() && std::string_view("=+-@").find(text.front()) != std::string_view::npos)
    text = fmt::format("'{}", text);
  if (text.find_first_of(",\"\r\n") == std::string::npos) return text;
  std::string quoted = "\"";
  for (const char c : text) {
    if (c == '"') quoted += '"';
    quoted += c;
  }
  return quoted + "\"";
}

std::string number(double value) { return std::isfinite(value) ? exact_text(value) : std::string{}; }

void add_line(std::string& out, const std::vector<std::string>& cells) {
  for (std::size_t i = 0; i < cells.size(); ++i) out += (i == 0 ? "" : ",") + cells[i];
  out += "\n";
}

void add_components(std::string& out, const Model& model, const std::string& sample,
                    const std::string& spectrum, Index replicates,
                    const std::vector<ComponentResult>& results) {
  for (std::size_t c = 0; c < results.size(); ++c) {
    const ComponentModel& component = model.components[c];
    const ComponentResult& r = results[c];
    std::string flags;
    for (const Flag flag : r.flags) flags += (flags.empty() ? "" : "; ") + std::string(text_of(flag));
    add_line(out, {cell(sample), cell(spectrum), std::to_string(replicates), cell(component.name),
                   cell(component.unit), number(r.value), number(r.low), number(r.high),
                   number(model.recipe.interval.level), number(r.leverage), number(r.t2),
                   number(component.limits.t2), number(r.q), number(component.limits.q), flags,
                   std::string(text_of(r.verdict)), r.largest_difference ? number(*r.largest_difference) : "",
                   ""});
  }
}

}  // namespace

std::string prediction_csv(const Model& model, const Prediction& prediction) {
  std::string out =
      "sample,spectrum,replicates,component,unit,value,low,high,level,leverage,t2,t2_limit,q,q_limit,flags,"
      "verdict,largest_difference,refused\n";
  for (const SpectrumResult& record : prediction.spectra) {
    if (record.refused)
      add_line(out, {cell(record.sample), cell(record.spectrum), "0", "", "", "", "", "", "", "", "", "", "",
                     "", "", "", "", cell(*record.refused)});
    else
      add_components(out, model, record.sample, record.spectrum, 1, record.components);
  }
  for (const SampleResult& sample : prediction.samples)
    if (sample.replicates > 1)
      add_components(out, model, sample.sample, "", sample.replicates, sample.components);
  return out;
}

}  // namespace bandwright
