// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <vector>

#include "base/matrix.hpp"
#include "pretreatment/chain.hpp"
#include "pretreatment/scaling.hpp"
#include "pretreatment/step.hpp"
#include "regression/latent_path.hpp"
#include "regression/regression.hpp"
#include "spectra/axis.hpp"
#include "spectra/window.hpp"

namespace bandwright {

/// What one component's chain from spectrum to value is made of.
struct CalibrationRecipe {
  std::vector<Window> windows;
  std::vector<Step> steps;
  Scaling scaling = Scaling::Centre;
  RegressionKind kind = RegressionKind::Pls;
  Index max_factors = 15;
};

/// Windows, pretreatment and regression fitted as one chain, for every number of factors up to
/// path.factors(). Judges nothing.
struct Calibration {
  PretreatmentChain chain;
  FittedScaling scaling;
  double response_mean = 0.0;  ///< 0 when nothing is centred
  LatentPath path;

  [[nodiscard]] Index factors() const { return path.factors(); }

  /// b on the pretreated, uncentred spectrum: value = intercept(k) + x . coefficients(k).
  [[nodiscard]] Vector coefficients(Index factors) const;
  [[nodiscard]] double intercept(Index factors) const;

  /// The chain with its first `factors` factors.
  [[nodiscard]] Calibration truncated(Index factors) const;
};

/// Fits the chain to n spectra (n x axis.size()) with reference values y (n) and row weights (n; 1/r
/// for each of r replicates of a sample).
/// Throws as PretreatmentChain, fit_scaling and fit_pls do; Error(Numerical) if y does not vary.
[[nodiscard]] Calibration fit_calibration(const CalibrationRecipe& recipe, const Axis& axis,
                                          const MatrixView& spectra, const VectorView& y,
                                          const VectorView& row_weights);

/// What spectra look like to a calibration with `factors` factors. Row i depends on spectrum i alone,
/// bit for bit.
struct Projection {
  Vector value;     ///< n, estimated composition
  Matrix scores;    ///< n x factors
  Vector leverage;  ///< n, sum t_k^2 / score_squares_k, without the 1/n of the mean
  Vector q;         ///< n, squared length of the residual of the pretreated spectrum
};
[[nodiscard]] Projection project(const Calibration& calibration, const MatrixView& spectra, Index factors);

/// The same for every number of factors 1 .. calibration.factors(): column k - 1 is with k factors.
struct PathProjection {
  Matrix values;    ///< n x a
  Matrix leverage;  ///< n x a
  Matrix q;         ///< n x a
};
[[nodiscard]] PathProjection project_path(const Calibration& calibration, const MatrixView& spectra);

/// What `factors` factors leave of the pretreated, centred and scaled spectra: n x p.
[[nodiscard]] Matrix spectral_residuals(const Calibration& calibration, const MatrixView& spectra,
                                        Index factors);

}  // namespace bandwright
