// SPDX-License-Identifier: Apache-2.0
#include "model/standards.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <map>
#include <set>
#include <unordered_map>

#include "base/number_text.hpp"

namespace bandwright {
namespace {

constexpr std::size_t kNamesShown = 5;

/// "S01, S02, S03, S04, S05 and 12 more"
std::string some_of(const std::vector<std::string>& names) {
  std::string text;
  for (std::size_t i = 0; i < std::min(names.size(), kNamesShown); ++i)
    text += (i == 0 ? "" : ", ") + names[i];
  if (names.size() > kNamesShown) text += fmt::format(" and {} more", names.size() - kNamesShown);
  return text;
}

/// Samples and spectra that the recipe leaves out; refuses names that do not exist.
struct Excluded {
  std::set<std::string> samples;
  std::set<std::string> spectra;
};

Excluded excluded_by(const Recipe& recipe, const SpectraSet& spectra, const ReferenceTable& reference) {
  Excluded out;
  const std::set<std::string> known_samples(reference.samples.begin(), reference.samples.end());
  const std::set<std::string> known_spectra(spectra.ids.begin(), spectra.ids.end());
  for (const Exclusion& exclusion : recipe.exclusions) {
    const bool by_sample = !exclusion.sample.empty();
    const std::string& name = by_sample ? exclusion.sample : exclusion.spectrum;
    if (!(by_sample ? known_samples : known_spectra).contains(name)) {
      throw Error(ErrorKind::Usage,
                  fmt::format("there is no such {} among the standards", by_sample ? "sample" : "spectrum"),
                  {.file = {},
                   .line = 0,
                   .field = fmt::format("[[exclude]] \"{}\"", name),
                   .hint = "check the name, or remove the entry"});
    }
    (by_sample ? out.samples : out.spectra).insert(name);
  }
  return out;
}

}  // namespace

MatchedStandards match_standards(const Recipe& recipe, const SpectraSet& spectra,
                                 const ReferenceTable& reference) {
  const Excluded excluded = excluded_by(recipe, spectra, reference);
  std::unordered_map<std::string, Index> table_row;
  for (std::size_t i = 0; i < reference.samples.size(); ++i)
    table_row.emplace(reference.samples[i], static_cast<Index>(i));

  std::vector<std::pair<Index, Index>> used;  // spectrum row, table row
  std::vector<std::string> without_reference;
  std::set<Index> with_spectra;
  for (Index i = 0; i < spectra.size(); ++i) {
    const std::string& id = spectra.ids[static_cast<std::size_t>(i)];
    const std::string sample = sample_of(id, recipe.replicate_mark);
    if (excluded.spectra.contains(id) || excluded.samples.contains(sample)) continue;
    const auto found = table_row.find(sample);
    if (found == table_row.end()) {
      without_reference.push_back(id);
      continue;
    }
    used.emplace_back(i, found->second);
    with_spectra.insert(found->second);
  }
  if (used.empty()) {
    throw Error(ErrorKind::Input, "no spectrum belongs to a sample of the reference table",
                {.file = {},
                 .line = 0,
                 .field = {},
                 .hint = "compare the names; replicate spectra need the key replicate"});
  }

  MatchedStandards matched;
  std::map<Index, Index> sample_of_table_row;
  for (const Index row : with_spectra) {  // a set walks the table in its order
    sample_of_table_row.emplace(row, matched.samples());
    matched.table_rows.push_back(row);
    if (!reference.groups.empty()) matched.groups.push_back(reference.groups[static_cast<std::size_t>(row)]);
  }
  for (const auto& [spectrum, row] : used) {
    matched.spectrum_rows.push_back(spectrum);
    matched.sample_of_spectrum.push_back(sample_of_table_row.at(row));
  }

  std::vector<std::string> without_spectra;
  for (std::size_t i = 0; i < reference.samples.size(); ++i)
    if (!with_spectra.contains(static_cast<Index>(i)) && !excluded.samples.contains(reference.samples[i]))
      without_spectra.push_back(reference.samples[i]);
  const auto warn_unused = [&](const std::vector<std::string>& names, const char* one, const char* several) {
    if (names.empty()) return;
    const auto count = static_cast<Index>(names.size());
    matched.warnings.push_back(
        {fmt::format("not used: {}: {}", counted(count, one, several), some_of(names)), {}, 0});
  };
  warn_unused(without_reference, "spectrum without a row in the reference table",
              "spectra without a row in the reference table");
  warn_unused(without_spectra, "row of the reference table without a spectrum",
              "rows of the reference table without a spectrum");
  return matched;
}

TrainingData training_data(const MatchedStandards& matched, const SpectraSet& spectra,
                           const ReferenceColumn& column, std::vector<Index>& rows) {
  rows.clear();
  std::vector<Index> spectra_of_sample(matched.table_rows.size());
  const auto value_of = [&](Index sample) {
    return column.values[matched.table_rows[static_cast<std::size_t>(sample)]];
  };
  for (std::size_t u = 0; u < matched.spectrum_rows.size(); ++u) {
    const Index sample = matched.sample_of_spectrum[u];
    if (std::isnan(value_of(sample))) continue;
    rows.push_back(static_cast<Index>(u));
    ++spectra_of_sample[static_cast<std::size_t>(sample)];
  }
  const auto n = static_cast<Index>(rows.size());
  TrainingData data{.axis = spectra.axis,
                    .spectra = Matrix(n, spectra.points()),
                    .reference = Vector(n),
                    .sample_of_row = {},
                    .row_weights = Vector(n)};
  for (Index i = 0; i < n; ++i) {
    const auto u = static_cast<std::size_t>(rows[static_cast<std::size_t>(i)]);
    const Index sample = matched.sample_of_spectrum[u];
    data.spectra.row(i) = spectra.values.row(matched.spectrum_rows[u]);
    data.reference[i] = value_of(sample);
    data.sample_of_row.push_back(sample);
    data.row_weights[i] = 1.0 / static_cast<double>(spectra_of_sample[static_cast<std::size_t>(sample)]);
  }
  return data;
}

}  // namespace bandwright
