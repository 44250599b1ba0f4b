// SPDX-License-Identifier: Apache-2.0
#include "support/test_data.hpp"

#include <algorithm>
#include <cstdlib>
#include <fstream>
#include <nlohmann/json.hpp>
#include <sstream>
#include <stdexcept>

namespace bandwright {
namespace {

std::ifstream open(const std::string& file) {
  std::ifstream stream(std::string(BANDWRIGHT_TEST_DATA) + "/" + file, std::ios::binary);
  if (!stream) throw std::runtime_error("no test data " + file);
  return stream;
}

double to_number(const std::string& text) {
  char* end = nullptr;
  const double value = std::strtod(text.c_str(), &end);
  if (end == text.c_str() || *end != '\0') throw std::runtime_error("no number: " + text);
  return value;
}

double to_number(const nlohmann::json& value) {
  return value.is_string() ? to_number(value.get<std::string>()) : value.get<double>();
}

OpenData load(const std::string& folder, AxisUnit unit) {
  OpenData data;
  data.folder = folder;
  const NumberTable spectra = read_number_table(folder + "/spectra.csv", true);
  const NumberTable reference = read_number_table(folder + "/reference.csv", true);
  if (spectra.names != reference.names)
    throw std::runtime_error(folder + ": spectra and reference differ in order");
  Vector positions(static_cast<Index>(spectra.headings.size()));
  for (Index j = 0; j < positions.size(); ++j)
    positions[j] = to_number(spectra.headings[static_cast<std::size_t>(j)]);
  data.axis = Axis(positions, unit);
  data.samples = spectra.names;
  data.spectra = spectra.values;
  data.properties = reference.headings;
  data.reference = reference.values;
  const ReferenceResults split = data.results("split");
  data.training = data.rows_of(split.texts({"training"}));
  data.test = data.rows_of(split.texts({"test"}));
  return data;
}

}  // namespace

std::vector<std::vector<std::string>> read_cells(const std::string& file) {
  std::ifstream stream = open(file);
  std::vector<std::vector<std::string>> rows;
  for (std::string line; std::getline(stream, line);) {
    if (!line.empty() && line.back() == '\r') line.pop_back();
    if (line.empty()) continue;
    std::vector<std::string>& cells = rows.emplace_back();
    std::istringstream fields(line);
    for (std::string cell; std::getline(fields, cell, ',');) cells.push_back(cell);
  }
  return rows;
}

NumberTable read_number_table(const std::string& file, bool named_rows) {
  const auto cells = read_cells(file);
  const std::size_t skip = named_rows ? 1 : 0;
  NumberTable table;
  table.headings.assign(cells.at(0).begin() + static_cast<std::ptrdiff_t>(skip), cells.at(0).end());
  table.values.resize(static_cast<Index>(cells.size()) - 1, static_cast<Index>(table.headings.size()));
  for (std::size_t i = 1; i < cells.size(); ++i) {
    if (named_rows) table.names.push_back(cells[i].at(0));
    for (std::size_t j = 0; j < table.headings.size(); ++j)
      table.values(static_cast<Index>(i) - 1, static_cast<Index>(j)) = to_number(cells[i].at(j + skip));
  }
  return table;
}

struct ReferenceResults::Document {
  nlohmann::json root;

  [[nodiscard]] const nlohmann::json& at(const Keys& keys) const {
    const nlohmann::json* node = &root;
    for (const std::string& key : keys) node = &node->at(key);
    return *node;
  }
};

ReferenceResults::ReferenceResults(const std::string& file) {
  std::ifstream stream = open(file);
  document_ = std::make_shared<const Document>(Document{nlohmann::json::parse(stream)});
}

double ReferenceResults::number(const Keys& keys) const { return to_number(document_->at(keys)); }

Vector ReferenceResults::numbers(const Keys& keys) const {
  const nlohmann::json& list = document_->at(keys);
  Vector values(static_cast<Index>(list.size()));
  for (Index i = 0; i < values.size(); ++i) values[i] = to_number(list.at(static_cast<std::size_t>(i)));
  return values;
}

Matrix ReferenceResults::rows(const Keys& keys) const {
  const nlohmann::json& list = document_->at(keys);
  Matrix values(static_cast<Index>(list.size()), static_cast<Index>(list.at(0).size()));
  for (Index i = 0; i < values.rows(); ++i)
    for (Index j = 0; j < values.cols(); ++j)
      values(i, j) = to_number(list.at(static_cast<std::size_t>(i)).at(static_cast<std::size_t>(j)));
  return values;
}

std::vector<std::string> ReferenceResults::texts(const Keys& keys) const {
  return document_->at(keys).get<std::vector<std::string>>();
}

ReferenceResults::Keys ReferenceResults::keys_below(const Keys& keys) const {
  Keys found;
  for (const auto& [key, value] : document_->at(keys).items()) found.push_back(key);
  return found;
}

Matrix OpenData::spectra_at(const std::vector<Index>& rows) const { return spectra(rows, Eigen::all); }

Vector OpenData::reference_at(Index property, const std::vector<Index>& rows) const {
  Vector values(static_cast<Index>(rows.size()));
  for (std::size_t i = 0; i < rows.size(); ++i) values[static_cast<Index>(i)] = reference(rows[i], property);
  return values;
}

std::vector<Index> OpenData::rows_of(const std::vector<std::string>& names) const {
  std::vector<Index> rows;
  for (const std::string& name : names) {
    const auto found = std::find(samples.begin(), samples.end(), name);
    if (found == samples.end()) throw std::runtime_error(folder + ": no sample " + name);
    rows.push_back(found - samples.begin());
  }
  return rows;
}

ReferenceResults OpenData::results(const std::string& name) const {
  return ReferenceResults(folder + "/reference_results/" + name + ".json");
}

SpectraSet OpenData::spectra_set(const std::vector<Index>& rows) const {
  SpectraSet set{
      .axis = axis, .ordinate = Ordinate::Absorbance, .ids = {}, .origins = {}, .values = spectra_at(rows)};
  for (const Index row : rows) {
    set.ids.push_back(samples[static_cast<std::size_t>(row)]);
    set.origins.push_back({folder + "/spectra.csv", static_cast<std::size_t>(row) + 2});
  }
  return set;
}

ReferenceTable OpenData::reference_table(const std::vector<Index>& rows) const {
  ReferenceTable table;
  for (const Index row : rows) {
    table.samples.push_back(samples[static_cast<std::size_t>(row)]);
    table.origins.push_back({folder + "/reference.csv", static_cast<std::size_t>(row) + 2});
  }
  for (std::size_t k = 0; k < properties.size(); ++k)
    table.columns.push_back({properties[k], {}, reference_at(static_cast<Index>(k), rows)});
  return table;
}

const OpenData& meats() {
  static const OpenData data = load("meats", AxisUnit::Nanometre);
  return data;
}

const OpenData& beerlambert4() {
  static const OpenData data = load("beerlambert4", AxisUnit::Wavenumber);
  return data;
}

}  // namespace bandwright
