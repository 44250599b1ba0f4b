// SPDX-License-Identifier: Apache-2.0
#include "cli/inputs.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <filesystem>
#include <set>

#include "base/digest.hpp"
#include "formats/files.hpp"
#include "formats/reference_csv.hpp"
#include "prediction/prediction.hpp"
#include "records/model_file.hpp"

namespace bandwright::cli {
namespace {

namespace fs = std::filesystem;

constexpr std::size_t kLargestPlan = std::size_t{4} << 20U;
constexpr std::size_t kLargestModel = std::size_t{1} << 30U;
constexpr std::size_t kLargestSpectra = std::size_t{8} << 30U;
constexpr std::size_t kLargestTable = std::size_t{256} << 20U;

/// The name of a file as records show it: relative to `base`, with forward slashes.
std::string recorded_name(const std::string& path, const std::string& base) {
  if (path == "-") return path;
  const fs::path relative = base.empty() ? fs::path(path) : fs::path(path).lexically_relative(base);
  return relative.empty() ? fs::path(path).filename().generic_string() : relative.generic_string();
}

void refuse_other_formats(const std::string& path, std::string_view text) {
  if (!text.starts_with("##")) return;
  throw Error(ErrorKind::Input, "this looks like a JCAMP-DX file, which this version does not read yet",
              {.file = path, .line = 0, .field = {}, .hint = "export the spectra as CSV"});
}

/// What the error says besides the place.
std::string reason_of(const Error& error) {
  const ErrorContext& context = error.context();
  return Error(error.kind(), error.message(),
               {.file = {}, .line = 0, .field = context.field, .hint = context.hint})
      .what();
}

CsvSpectra read_spectra_file(const std::string& path, const CsvSpectraOptions& options, std::string& digest) {
  const std::string text = read_text_file(path, kLargestSpectra);
  digest = sha256(text);
  refuse_other_formats(path, text);
  return parse_csv_spectra(text, path, options);
}

void add_once(std::vector<std::string>& names, const std::string& name) {
  if (!name.empty() && std::find(names.begin(), names.end(), name) == names.end()) names.push_back(name);
}

ReferenceColumns columns_of(const Recipe& recipe, const std::string& group) {
  ReferenceColumns wanted{.components = {}, .group = group, .further = {}};
  for (const ComponentRecipe& component : recipe.components) {
    add_once(wanted.components, component.reference_column());
    add_once(wanted.further, component.lab_error.column);
  }
  return wanted;
}

void append(std::vector<Warning>& to, std::vector<Warning> from) {
  std::move(from.begin(), from.end(), std::back_inserter(to));
}

/// Ids that an earlier file already used: nobody can tell which spectrum is meant.
void refuse_repeated(SpectraSet& spectra, std::set<std::string>& seen,
                     std::vector<RefusedSpectrum>& refused) {
  std::vector<Index> kept;
  for (Index i = 0; i < spectra.size(); ++i) {
    const auto row = static_cast<std::size_t>(i);
    if (seen.insert(spectra.ids[row]).second)
      kept.push_back(i);
    else
      refused.push_back({spectra.ids[row], spectra.origins[row], "a spectrum of this name was already read"});
  }
  if (static_cast<Index>(kept.size()) < spectra.size()) spectra = subset(spectra, kept);
}

}  // namespace

std::string folder_of(const std::string& path) {
  return path == "-" ? std::string{} : fs::path(path).parent_path().generic_string();
}

Plan load_plan(const std::string& path) {
  try {
    return parse_plan(read_text_file(path, kLargestPlan), path);
  } catch (const Error& error) {
    // A plan that cannot be opened is a fault of the command line.
    throw error.kind() == ErrorKind::Input ? Error(ErrorKind::Usage, error.message(), error.context())
                                           : error;
  }
}

std::string read_model_text(const std::string& path) { return read_text_file(path, kLargestModel); }

Model load_model(const std::string& path) { return parse_model(read_model_text(path), path); }

LoadedSpectra load_spectra(const std::vector<std::string>& patterns, const std::string& base,
                           std::optional<AxisUnit> axis, std::optional<Ordinate> ordinate) {
  LoadedSpectra loaded;
  std::vector<SpectraSet> parts;
  for (const std::string& path : expand_paths(patterns, base)) {
    std::string digest;
    CsvSpectra read = read_spectra_file(
        path, {.axis = axis, .ordinate = ordinate, .bad_spectrum = BadSpectrum::Refuse}, digest);
    loaded.inputs.push_back({"spectra", recorded_name(path, base), digest});
    append(loaded.warnings, std::move(read.warnings));
    parts.push_back(std::move(read.spectra));
  }
  loaded.spectra = joined(std::move(parts));
  return loaded;
}

LoadedSpectra load_spectra_for(const Model& model, const std::vector<std::string>& patterns) {
  LoadedSpectra loaded;
  std::vector<SpectraSet> parts;
  std::set<std::string> seen;
  const CsvSpectraOptions options{
      .axis = model.axis.unit(), .ordinate = model.ordinate, .bad_spectrum = BadSpectrum::Collect};
  for (const std::string& path : expand_paths(patterns, {})) {
    std::string digest;
    CsvSpectra read;
    try {
      read = read_spectra_file(path, options, digest);
      if (read.spectra.size() > 0) check_measured_alike(model, read.spectra);
    } catch (const Error& error) {
      if (error.kind() != ErrorKind::Input) throw;
      // The whole file is of no use: every spectrum known by name, or else the file itself, is refused.
      const std::vector<std::string> names =
          read.spectra.ids.empty() ? std::vector{recorded_name(path, {})} : read.spectra.ids;
      for (const std::string& name : names)
        loaded.refused.push_back({name, {path, error.context().line}, reason_of(error)});
      std::move(read.refused.begin(), read.refused.end(), std::back_inserter(loaded.refused));
      continue;
    }
    loaded.inputs.push_back({"spectra", recorded_name(path, {}), digest});
    append(loaded.warnings, std::move(read.warnings));
    std::move(read.refused.begin(), read.refused.end(), std::back_inserter(loaded.refused));
    refuse_repeated(read.spectra, seen, loaded.refused);
    if (read.spectra.size() > 0) parts.push_back(std::move(read.spectra));
  }
  loaded.spectra = joined(std::move(parts));
  return loaded;
}

LoadedSet load_set(const SetFiles& files, const std::string& base, const Recipe& recipe) {
  LoadedSpectra spectra = load_spectra(files.spectra, base, files.axis, files.ordinate);
  const std::string table_path =
      base.empty() ? files.reference : (fs::path(base) / files.reference).generic_string();
  const std::string text = read_text_file(table_path, kLargestTable);
  ReferenceCsv table = parse_reference_table(text, table_path, columns_of(recipe, files.group));
  LoadedSet set{.spectra = std::move(spectra.spectra),
                .reference = std::move(table.table),
                .inputs = std::move(spectra.inputs),
                .warnings = std::move(spectra.warnings)};
  set.inputs.push_back({"reference values", recorded_name(table_path, base), sha256(text)});
  append(set.warnings, std::move(table.warnings));
  return set;
}

}  // namespace bandwright::cli
