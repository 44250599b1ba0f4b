// SPDX-License-Identifier: Apache-2.0
#include "resampling/held_out.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <atomic>
#include <cmath>
#include <limits>
#include <numeric>
#include <unordered_map>

#include "base/error.hpp"
#include "numerics/sums.hpp"

namespace bandwright {
namespace {

/// Rows of the training data on either side of a fold.
struct Split {
  std::vector<Index> train;
  std::vector<Index> held_out;
};

Split split_rows(const TrainingData& data, const Fold& fold) {
  Split split;
  for (Index i = 0; i < data.spectra.rows(); ++i) {
    const bool out = std::binary_search(fold.held_out.begin(), fold.held_out.end(),
                                        data.sample_of_row[static_cast<std::size_t>(i)]);
    (out ? split.held_out : split.train).push_back(i);
  }
  return split;
}

/// What one fold gave: one row a held-out spectrum.
struct FoldResult {
  std::vector<Index> rows;
  Index factors = 0;
  PathProjection projection;
  double training_samples = 0.0;
};

FoldResult run_fold(const CalibrationRecipe& recipe, const TrainingData& data, const Fold& fold) {
  const Split split = split_rows(data, fold);
  FoldResult result{.rows = split.held_out, .factors = 0, .projection = {}, .training_samples = 0.0};
  if (split.held_out.empty()) return result;  // samples without a value for this component
  const Vector weights = data.row_weights(split.train);
  result.training_samples = sum(values_of(weights));
  if (result.training_samples < 2.0 - 1e-9)
    throw Error(ErrorKind::Numerical, "a cross-validation fold leaves fewer than two samples to train on");
  const Matrix train = data.spectra(split.train, Eigen::all);
  const Vector reference = data.reference(split.train);
  const Calibration calibration = fit_calibration(recipe, data.axis, train, reference, weights);
  const Matrix held_out = data.spectra(split.held_out, Eigen::all);
  result.projection = project_path(calibration, held_out);
  result.factors = calibration.factors();
  return result;
}

/// Factor numbers a fold can speak for: its own, or any if it ended because nothing was left.
Index usable_factors(const FoldResult& fold, const CalibrationRecipe& recipe) {
  const bool complete = fold.factors >= recipe.max_factors;
  const auto rank =
      static_cast<Index>(std::lround(fold.training_samples)) - (recipe.scaling == Scaling::None ? 0 : 1);
  return complete || fold.factors < rank ? recipe.max_factors : fold.factors;
}

}  // namespace

Index TrainingData::samples() const { return static_cast<Index>(std::lround(sum(values_of(row_weights)))); }

Matrix HeldOut::mean_predicted(Index rows) const {
  Matrix total = Matrix::Zero(rows, factors());
  Vector count = Vector::Zero(rows);
  for (std::size_t e = 0; e < row.size(); ++e) {
    total.row(row[e]) += predicted.row(static_cast<Index>(e));
    count[row[e]] += 1.0;
  }
  for (Index i = 0; i < rows; ++i) {
    if (count[i] > 0.0)
      total.row(i) /= count[i];
    else
      total.row(i).setConstant(std::numeric_limits<double>::quiet_NaN());
  }
  return total;
}

HeldOut refit_folds(const CalibrationRecipe& recipe, const TrainingData& data, const std::vector<Fold>& folds,
                    WorkerPool& pool, const Progress& progress) {
  std::vector<FoldResult> results(folds.size());
  std::atomic<std::size_t> done{0};
  pool.for_each_index(folds.size(), [&](std::size_t f) {
    results[f] = run_fold(recipe, data, folds[f]);
    const std::size_t finished = ++done;
    if (progress) progress(finished, folds.size());
  });

  Index factors = recipe.max_factors;
  std::size_t entries = 0;
  Index repeats = 1;
  for (std::size_t f = 0; f < folds.size(); ++f) {
    if (!results[f].rows.empty()) factors = std::min(factors, usable_factors(results[f], recipe));
    entries += results[f].rows.size();
    repeats = std::max(repeats, folds[f].repeat + 1);
  }

  // In order of repeat, then of row, whatever the order of the folds.
  struct Entry {
    Index repeat;
    Index row;
    std::size_t fold;
    Index position;
  };
  std::vector<Entry> order;
  order.reserve(entries);
  for (std::size_t f = 0; f < folds.size(); ++f)
    for (std::size_t i = 0; i < results[f].rows.size(); ++i)
      order.push_back({folds[f].repeat, results[f].rows[i], f, static_cast<Index>(i)});
  std::sort(order.begin(), order.end(), [](const Entry& a, const Entry& b) {
    return std::pair(a.repeat, a.row) < std::pair(b.repeat, b.row);
  });

  const auto rows = static_cast<Index>(order.size());
  HeldOut out{.row = {},
              .repeat = {},
              .predicted = Matrix(rows, factors),
              .t2 = Matrix(rows, factors),
              .q = Matrix(rows, factors),
              .repeats = repeats};
  for (Index e = 0; e < rows; ++e) {
    const Entry& entry = order[static_cast<std::size_t>(e)];
    const FoldResult& fold = results[entry.fold];
    out.row.push_back(entry.row);
    out.repeat.push_back(entry.repeat);
    for (Index k = 0; k < factors; ++k) {
      const Index have = std::min(k, fold.factors - 1);
      out.predicted(e, k) = fold.projection.values(entry.position, have);
      out.t2(e, k) = (fold.training_samples - 1.0) * fold.projection.leverage(entry.position, have);
      out.q(e, k) = fold.projection.q(entry.position, have);
    }
  }
  return out;
}

Matrix squared_errors_by_sample(const HeldOut& held_out, const TrainingData& data) {
  std::unordered_map<Index, Index> row_of_sample;
  std::vector<Index> sample_order;
  for (const Index sample : data.sample_of_row)
    if (row_of_sample.emplace(sample, static_cast<Index>(sample_order.size())).second)
      sample_order.push_back(sample);

  const auto samples = static_cast<Index>(sample_order.size());
  Matrix squares = Matrix::Zero(samples, held_out.factors());
  Vector count = Vector::Zero(samples);
  for (std::size_t e = 0; e < held_out.row.size(); ++e) {
    const Index i = held_out.row[e];
    const Index s = row_of_sample.at(data.sample_of_row[static_cast<std::size_t>(i)]);
    for (Index k = 0; k < held_out.factors(); ++k) {
      const double error = held_out.predicted(static_cast<Index>(e), k) - data.reference[i];
      squares(s, k) += error * error;
    }
    count[s] += 1.0;
  }
  Index kept = 0;
  for (Index s = 0; s < samples; ++s) {
    if (count[s] == 0.0) continue;
    squares.row(kept++) = squares.row(s) / count[s];
  }
  return squares.topRows(kept);
}

}  // namespace bandwright
