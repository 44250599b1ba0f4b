// SPDX-License-Identifier: Apache-2.0
#include "regression/pls.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "base/error.hpp"
#include "numerics/products.hpp"
#include "numerics/sums.hpp"

namespace bandwright {
namespace {

// A direction whose part that is new is below this share of the norm of X is rounding, not rank.
constexpr double kRankTolerance = 1e-13;
// A response residual below this share of the response is rounding.
constexpr double kResponseTolerance = 1e-14;

double norm(const Vector& v) { return std::sqrt(squared_norm(values_of(v))); }

void check_input(const MatrixView& X, const VectorView& y, const VectorView& row_weights, Index max_factors) {
  const auto refuse = [](std::string message) { throw Error(ErrorKind::Input, std::move(message)); };
  if (X.rows() == 0 || X.cols() == 0) refuse("a regression needs at least one spectrum and one point");
  if (y.size() != X.rows() || row_weights.size() != X.rows())
    refuse(fmt::format("{} spectra, but {} reference values and {} weights", X.rows(), y.size(),
                       row_weights.size()));
  if (max_factors < 1) refuse("a regression needs at least one factor");
  if (!X.allFinite() || !y.allFinite() || !row_weights.allFinite())
    refuse("a regression needs finite spectra, reference values and weights");
}

/// Removes from v its part along the rows of Q (orthonormal) and returns the coefficients.
Vector orthogonalise(Vector& v, const MatrixView& Q) {
  Vector along = multiply(Q, v);
  v -= multiply_transposed(Q, along);
  return along;
}

}  // namespace

// Legend: X, y weighted by the square roots of the row weights; w weights, t scores, p loadings, r
// rotations (t = X r), q y-loadings. Rows k of W, U, R, P belong to factor k + 1; U holds t / ||t||.
LatentPath fit_pls(const MatrixView& spectra, const VectorView& response, const VectorView& row_weights,
                   Index max_factors) {
  check_input(spectra, response, row_weights, max_factors);
  const Vector root_weights = row_weights.array().sqrt();
  Matrix X = spectra;
  for (Index i = 0; i < X.rows(); ++i) X.row(i) *= root_weights[i];
  Vector y_left = response.cwiseProduct(root_weights);

  const Index limit = std::min({max_factors, X.rows(), X.cols()});
  Matrix W(limit, X.cols());
  Matrix U(limit, X.rows());
  Matrix R(limit, X.cols());
  Matrix P(limit, X.cols());
  Vector q(limit);
  Vector score_squares(limit);
  const double x_norm = std::sqrt(squared_norm({X.data(), static_cast<std::size_t>(X.size())}));
  const double y_norm = norm(y_left);

  PathEnd end = PathEnd::Asked;
  Index a = 0;
  for (; a < limit; ++a) {
    if (norm(y_left) <= kResponseTolerance * y_norm) {
      end = PathEnd::ResponseExplained;
      break;
    }
    Vector w = multiply_transposed(X, y_left);
    orthogonalise(w, W.topRows(a));
    const double w_norm = norm(w);
    if (w_norm <= kRankTolerance * x_norm * norm(y_left)) {
      end = PathEnd::RankUsedUp;
      break;
    }
    w /= w_norm;

    // t = (part of X w orthogonal to the earlier scores); r follows by the same steps, so that t = X r.
    Vector t = multiply(X, w);
    Vector r = w;
    for (int pass = 0; pass < 2; ++pass) {
      const Vector along = orthogonalise(t, U.topRows(a));
      const Vector steps = along.cwiseQuotient(score_squares.head(a).cwiseSqrt());
      r -= multiply_transposed(R.topRows(a), steps);
    }
    const double t_norm = norm(t);
    if (t_norm <= kRankTolerance * x_norm) {
      end = PathEnd::RankUsedUp;
      break;
    }
    score_squares[a] = t_norm * t_norm;
    W.row(a) = w.transpose();
    R.row(a) = r.transpose();
    U.row(a) = t.transpose() / t_norm;
    P.row(a) = multiply_transposed(X, t).transpose() / score_squares[a];
    q[a] = dot(values_of(t), values_of(y_left)) / score_squares[a];
    y_left -= q[a] * t;
  }
  return {.rotations = R.topRows(a),
          .loadings = P.topRows(a),
          .y_loadings = q.head(a),
          .score_squares = score_squares.head(a),
          .end = end};
}

}  // namespace bandwright
