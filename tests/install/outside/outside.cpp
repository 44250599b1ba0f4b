// SPDX-License-Identifier: Apache-2.0
// Reads spectra and reference values, fits PLS with four factors to component A of the samples S01 .. S25
// and estimates A in T01.
#include <algorithm>
#include <cmath>
#include <cstdio>
#include <exception>
#include <fstream>
#include <iterator>
#include <string>
#include <vector>

#include "calibration/calibration.hpp"
#include "formats/csv_spectra.hpp"
#include "formats/reference_csv.hpp"
#include "numerics/linear_algebra.hpp"

using namespace bandwright;

namespace {

// scikit-learn 1.2.1 PLSRegression(4, scale=False) on the same data.
constexpr double kWanted = 9.212391360340611;
constexpr double kRelativeTolerance = 1e-8;  // other algorithm, other machine

std::string bytes_of(const char* path) {
  std::ifstream file(path, std::ios::binary);
  return {std::istreambuf_iterator<char>(file), std::istreambuf_iterator<char>()};
}

double estimate_t01(const char* spectra_path, const char* reference_path) {
  const SpectraSet spectra =
      parse_csv_spectra(bytes_of(spectra_path), spectra_path, {.axis = AxisUnit::Wavenumber}).spectra;
  const ReferenceTable reference =
      parse_reference_table(bytes_of(reference_path), reference_path, {.components = {"A"}}).table;

  std::vector<Index> standards;
  for (Index i = 0; i < spectra.size(); ++i)
    if (spectra.ids[static_cast<std::size_t>(i)].starts_with('S')) standards.push_back(i);
  Vector y(static_cast<Index>(standards.size()));
  for (Index i = 0; i < y.size(); ++i) {
    const auto row = static_cast<std::size_t>(standards[static_cast<std::size_t>(i)]);
    y[i] = reference.column("A").values[reference.row_of(spectra.ids[row])];
  }

  const CalibrationRecipe recipe{.windows = {whole_axis(spectra.axis)}, .max_factors = 4};
  const SpectraSet training = subset(spectra, standards);
  const Calibration calibration =
      fit_calibration(recipe, spectra.axis, training.values, y, Vector::Ones(y.size()));

  const auto t01 = std::find(spectra.ids.begin(), spectra.ids.end(), "T01") - spectra.ids.begin();
  return project(calibration, spectra.values.row(t01), 4).value[0];
}

}  // namespace

int main(int argc, char** argv) try {
  if (argc != 3) return 2;
  check_linear_algebra();
  const double got = estimate_t01(argv[1], argv[2]);
  std::printf("A in T01: got %.15g, wanted %.15g\n", got, kWanted);
  return std::abs(got - kWanted) <= kRelativeTolerance * kWanted ? 0 : 1;
} catch (const std::exception& error) {
  std::fprintf(stderr, "%s\n", error.what());
  return 1;
}
