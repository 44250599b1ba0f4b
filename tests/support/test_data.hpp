// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <memory>
#include <string>
#include <vector>

#include "base/matrix.hpp"
#include "spectra/axis.hpp"
#include "spectra/reference_table.hpp"
#include "spectra/spectra_set.hpp"

/// Plain loaders for tests/data, independent of the readers under test.

namespace bandwright {

/// A CSV file of numbers: a heading row; with `named_rows` the first column holds names.
struct NumberTable {
  std::vector<std::string> headings;  ///< of the number columns
  std::vector<std::string> names;     ///< of the rows; empty without names
  Matrix values;
};
[[nodiscard]] NumberTable read_number_table(const std::string& file, bool named_rows);

/// Every cell of a CSV file as text, heading row first.
[[nodiscard]] std::vector<std::vector<std::string>> read_cells(const std::string& file);

/// A JSON file; values are reached by the keys on the way to them. A missing key ends the test.
class ReferenceResults {
 public:
  using Keys = std::vector<std::string>;
  explicit ReferenceResults(const std::string& file);

  [[nodiscard]] double number(const Keys& keys) const;
  [[nodiscard]] Vector numbers(const Keys& keys) const;
  /// A list of lists of equal length.
  [[nodiscard]] Matrix rows(const Keys& keys) const;
  [[nodiscard]] std::vector<std::string> texts(const Keys& keys) const;
  /// The keys below, in the order of the alphabet.
  [[nodiscard]] Keys keys_below(const Keys& keys) const;

 private:
  struct Document;
  std::shared_ptr<const Document> document_;
};

/// Spectra and reference values of one folder, with its division into training and test samples.
struct OpenData {
  std::string folder;
  Axis axis;
  std::vector<std::string> samples;
  Matrix spectra;
  std::vector<std::string> properties;  ///< "fat [%]", as the reference results call them
  Matrix reference;                     ///< samples x properties
  std::vector<Index> training;
  std::vector<Index> test;

  [[nodiscard]] Matrix spectra_at(const std::vector<Index>& rows) const;
  [[nodiscard]] Vector reference_at(Index property, const std::vector<Index>& rows) const;
  [[nodiscard]] std::vector<Index> rows_of(const std::vector<std::string>& names) const;
  [[nodiscard]] ReferenceResults results(const std::string& name) const;

  /// The samples at `rows` as the library takes them.
  [[nodiscard]] SpectraSet spectra_set(const std::vector<Index>& rows) const;
  [[nodiscard]] ReferenceTable reference_table(const std::vector<Index>& rows) const;
};
[[nodiscard]] const OpenData& meats();
[[nodiscard]] const OpenData& beerlambert4();

}  // namespace bandwright
