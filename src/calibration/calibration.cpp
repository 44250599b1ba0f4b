// SPDX-License-Identifier: Apache-2.0
#include "calibration/calibration.hpp"

#include <cmath>

#include "base/error.hpp"
#include "numerics/sums.hpp"
#include "regression/pls.hpp"

namespace bandwright {
namespace {

double weighted_mean(const VectorView& y, const VectorView& weights) {
  return dot(values_of(y), values_of(weights)) / sum(values_of(weights));
}

/// Walks the factors of one centred and scaled spectrum: visit(k, score) after each, with `residual`
/// holding what is left of the spectrum then. Plain loops in fixed order: the same bits for a
/// spectrum alone and among others.
template <class Visit>
void walk_factors(const LatentPath& path, Index factors, Vector& residual, Visit&& visit) {
  const Vector spectrum = residual;
  for (Index k = 0; k < factors; ++k) {
    const double score = dot(row_of(path.rotations, k), values_of(spectrum));
    const auto loading = row_of(path.loadings, k);
    for (Index j = 0; j < residual.size(); ++j) residual[j] -= score * loading[static_cast<std::size_t>(j)];
    visit(k, score);
  }
}

/// Row i of the pretreated spectra, centred and scaled.
Vector scaled_row(const FittedScaling& scaling, const Matrix& pretreated, Index i) {
  Vector x(pretreated.cols());
  for (Index j = 0; j < x.size(); ++j) x[j] = (pretreated(i, j) - scaling.mean[j]) / scaling.scale[j];
  return x;
}

LatentPath fit_regression(const CalibrationRecipe& recipe, const Matrix& X, const Vector& y,
                          const VectorView& row_weights) {
  switch (recipe.kind) {
    case RegressionKind::Pls:
      return fit_pls(X, y, row_weights, recipe.max_factors);
  }
  throw Error(ErrorKind::Internal, "a regression kind has no fit");
}

}  // namespace

Vector Calibration::coefficients(Index factors) const {
  return path.coefficients(factors).cwiseQuotient(scaling.scale);
}

double Calibration::intercept(Index factors) const {
  const Vector b = coefficients(factors);
  return response_mean - dot(values_of(b), values_of(scaling.mean));
}

Calibration Calibration::truncated(Index factors) const {
  return {
      .chain = chain, .scaling = scaling, .response_mean = response_mean, .path = path.truncated(factors)};
}

Calibration fit_calibration(const CalibrationRecipe& recipe, const Axis& axis, const MatrixView& spectra,
                            const VectorView& y, const VectorView& row_weights) {
  Calibration fitted;
  fitted.chain = PretreatmentChain(recipe.steps, recipe.windows, axis);
  const Matrix pretreated = fitted.chain.apply(spectra);
  fitted.scaling = fit_scaling(recipe.scaling, pretreated, row_weights);
  if (recipe.scaling != Scaling::None) fitted.response_mean = weighted_mean(y, row_weights);
  const Vector y_centred = y.array() - fitted.response_mean;
  fitted.path = fit_regression(recipe, fitted.scaling.apply(pretreated), y_centred, row_weights);
  if (fitted.factors() == 0)
    throw Error(ErrorKind::Numerical,
                "no factor can be computed: the reference values or the spectra do not vary");
  return fitted;
}

Projection project(const Calibration& calibration, const MatrixView& spectra, Index factors) {
  const Matrix pretreated = calibration.chain.apply(spectra);
  const Vector b = calibration.path.coefficients(factors);
  Projection out{.value = Vector(spectra.rows()),
                 .scores = Matrix(spectra.rows(), factors),
                 .leverage = Vector::Zero(spectra.rows()),
                 .q = Vector(spectra.rows())};
  for (Index i = 0; i < spectra.rows(); ++i) {
    Vector x = scaled_row(calibration.scaling, pretreated, i);
    out.value[i] = calibration.response_mean + dot(values_of(x), values_of(b));
    walk_factors(calibration.path, factors, x, [&](Index k, double score) {
      out.scores(i, k) = score;
      out.leverage[i] += score * score / calibration.path.score_squares[k];
    });
    out.q[i] = squared_norm(values_of(x));
  }
  return out;
}

PathProjection project_path(const Calibration& calibration, const MatrixView& spectra) {
  const Index a = calibration.factors();
  const Matrix pretreated = calibration.chain.apply(spectra);
  PathProjection out{.values = Matrix(spectra.rows(), a),
                     .leverage = Matrix(spectra.rows(), a),
                     .q = Matrix(spectra.rows(), a)};
  for (Index i = 0; i < spectra.rows(); ++i) {
    Vector x = scaled_row(calibration.scaling, pretreated, i);
    double value = calibration.response_mean;
    double leverage = 0.0;
    walk_factors(calibration.path, a, x, [&](Index k, double score) {
      value += score * calibration.path.y_loadings[k];
      leverage += score * score / calibration.path.score_squares[k];
      out.values(i, k) = value;
      out.leverage(i, k) = leverage;
      out.q(i, k) = squared_norm(values_of(x));
    });
  }
  return out;
}

Matrix spectral_residuals(const Calibration& calibration, const MatrixView& spectra, Index factors) {
  const Matrix pretreated = calibration.chain.apply(spectra);
  Matrix residuals(pretreated.rows(), pretreated.cols());
  for (Index i = 0; i < spectra.rows(); ++i) {
    Vector x = scaled_row(calibration.scaling, pretreated, i);
    walk_factors(calibration.path, factors, x, [](Index, double) {});
    residuals.row(i) = x.transpose();
  }
  return residuals;
}

}  // namespace bandwright
