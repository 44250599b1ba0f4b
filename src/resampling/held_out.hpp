// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <functional>
#include <vector>

#include "base/matrix.hpp"
#include "base/worker_pool.hpp"
#include "calibration/calibration.hpp"
#include "resampling/folds.hpp"

namespace bandwright {

/// The standards of one component: n spectra of m samples with their reference values.
struct TrainingData {
  Axis axis;
  Matrix spectra;                    ///< n x axis.size()
  Vector reference;                  ///< n, the value of the spectrum's sample; finite
  std::vector<Index> sample_of_row;  ///< n, position of the sample in the folds' numbering
  Vector row_weights;                ///< n, 1/r for a sample with r spectra

  /// Number of samples: the sum of the weights.
  [[nodiscard]] Index samples() const;
};

/// What spectra got from models that had not seen their samples: one row a held-out spectrum in a
/// repeat, in order of repeat, then of row. Column k - 1 is with k factors.
struct HeldOut {
  std::vector<Index> row;     ///< spectrum, as in the training data
  std::vector<Index> repeat;  ///< 0-based
  Matrix predicted;           ///< entries x a
  Matrix t2;                  ///< entries x a, Hotelling's T2 against the fold's own training set
  Matrix q;                   ///< entries x a
  Index repeats = 1;

  [[nodiscard]] Index factors() const { return predicted.cols(); }

  /// Mean over repeats of the held-out value of each spectrum: n x a; not a number for a spectrum
  /// that was never held out.
  [[nodiscard]] Matrix mean_predicted(Index rows) const;
};

/// Called now and then, from any worker, with the folds done so far.
using Progress = std::function<void(std::size_t done, std::size_t total)>;

/// Fits the recipe once a fold to the rows whose samples are not held out, and applies it to the
/// others. Everything that learns is learned in the fold. The slow, plain way: no result is shared
/// between folds.
/// The factor numbers end where the shortest fold ends; a fold whose path ended earlier because
/// nothing was left to explain keeps its last prediction.
/// Throws Error(Numerical) if a fold leaves fewer than two samples to train on.
[[nodiscard]] HeldOut refit_folds(const CalibrationRecipe& recipe, const TrainingData& data,
                                  const std::vector<Fold>& folds, WorkerPool& pool,
                                  const Progress& progress = {});

/// Squared held-out errors by sample, mean over the sample's replicates and the repeats: m x a, rows
/// in order of the sample's first spectrum; samples never held out have no row.
[[nodiscard]] Matrix squared_errors_by_sample(const HeldOut& held_out, const TrainingData& data);

}  // namespace bandwright
