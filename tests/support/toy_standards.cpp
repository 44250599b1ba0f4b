// SPDX-License-Identifier: Apache-2.0
#include "support/toy_standards.hpp"

#include <fmt/format.h>

#include <cmath>

#include "base/random.hpp"
#include "base/worker_pool.hpp"
#include "model/build_model.hpp"

namespace bandwright {
namespace {

constexpr Index kPoints = 40;
constexpr double kNoise = 1e-3;

/// Uniform over [0, 1).
double uniform(Random& random) { return static_cast<double>(random.next() >> 11U) * 0x1p-53; }

/// Twelve uniforms make a good enough normal value for toys.
double noise(Random& random) {
  double total = -6.0;
  for (int i = 0; i < 12; ++i) total += uniform(random);
  return total * kNoise;
}

double band(double position, double centre, double width) {
  return std::exp(-std::pow((position - centre) / width, 2.0));
}

}  // namespace

ToySet toy_set(const std::string& prefix, Index samples, Index replicates, std::uint64_t seed) {
  Random random(seed);
  const Vector positions = Vector::LinSpaced(kPoints, 1800.0, 1800.0 - 4.0 * (kPoints - 1));
  ToySet set;
  set.spectra.axis = Axis(positions, AxisUnit::Wavenumber);
  set.spectra.ordinate = Ordinate::Absorbance;
  set.spectra.values.resize(samples * replicates, kPoints);
  set.reference.columns = {{"acid", "wt%", Vector(samples)}, {"water", "wt%", Vector(samples)}};
  for (Index i = 0; i < samples; ++i) {
    const std::string name = fmt::format("{}{:02}", prefix, i + 1);
    const double acid = 2.0 * uniform(random);
    const double water = 2.0 * uniform(random);
    set.reference.samples.push_back(name);
    set.reference.origins.push_back({"toy.csv", static_cast<std::size_t>(i + 2)});
    set.reference.columns[0].values[i] = acid;
    set.reference.columns[1].values[i] = water;
    for (Index r = 0; r < replicates; ++r) {
      const Index row = i * replicates + r;
      set.spectra.ids.push_back(replicates == 1 ? name : fmt::format("{}-r{}", name, r + 1));
      set.spectra.origins.push_back({"toy.csv", static_cast<std::size_t>(row + 2)});
      for (Index j = 0; j < kPoints; ++j)
        set.spectra.values(row, j) = 0.1 + acid * 0.4 * band(positions[j], 1720.0, 15.0) +
                                     water * 0.3 * band(positions[j], 1690.0, 25.0) + noise(random);
    }
  }
  return set;
}

Recipe toy_recipe() {
  Recipe recipe;
  recipe.title = "toy";
  recipe.replicate_mark = "-r";
  recipe.components.resize(2);
  recipe.components[0].name = "acid";
  recipe.components[0].spec_max = 1.2;
  recipe.components[1].name = "water";
  recipe.windows = {{.name = "high", .from = 1800, .to = 1740, .except = {}},
                    {.name = "low", .from = 1736, .to = 1650, .except = {}}};
  recipe.regression.max_factors = 6;
  return recipe;
}

Model toy_model(const Recipe& recipe) {
  const ToySet standards = toy_set("S", 30, 1, 7);
  WorkerPool pool(1);
  return build_model(recipe, standards.spectra, standards.reference, pool);
}

Model toy_model() { return toy_model(toy_recipe()); }

}  // namespace bandwright
