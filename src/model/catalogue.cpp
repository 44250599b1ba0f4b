// SPDX-License-Identifier: Apache-2.0
#include "model/catalogue.hpp"

#include <algorithm>
#include <array>

#include "base/error.hpp"
#include "base/number_text.hpp"

namespace bandwright {
namespace {

constexpr int kRatioDecimals = 4;
constexpr int kFreeDigits = 4;

// Sources marked "from memory" were not checked against a copy of the document. Errors are
// predicted - reference throughout.
constexpr std::array kCatalogue{
    Statistic{"factors", "factors", Quantity::Count, "number of latent variables in the model",
              "common practice"},
    Statistic{"samples", "samples", Quantity::Count,
              "standards with a reference value for the component (replicate spectra count as one)",
              "common practice"},
    Statistic{"n", "n", Quantity::Count, "samples of the independent set with a reference value",
              "common practice"},
    Statistic{"rmsec", "RMSEC", Quantity::ComponentUnit,
              "error of the fit to the standards: sqrt(sum e^2 / n)", "common practice"},
    Statistic{"sec", "SEC", Quantity::ComponentUnit,
              "error of the fit with degrees of freedom: sqrt(sum e^2 / (n - k - 1)), n - k when nothing is "
              "centred",
              "formula of ASTM E1655 (from memory)"},
    Statistic{"rmsecv", "RMSECV", Quantity::ComponentUnit,
              "error on standards held out of the fit: sqrt(PRESS / n)",
              "formula of ASTM E1655, there SECV (from memory)"},
    Statistic{"press", "PRESS", Quantity::SquaredUnit,
              "sum of squared errors of held-out standards, mean over repeats",
              "Haaland and Thomas, Anal. Chem. 60 (1988) 1193"},
    Statistic{"bias_cv", "bias (CV)", Quantity::ComponentUnit, "mean error of held-out standards",
              "common practice"},
    Statistic{"secv", "SECV", Quantity::ComponentUnit,
              "standard deviation of the errors of held-out standards, bias removed, n - 1",
              "common practice"},
    Statistic{"r2", "R2", Quantity::Ratio,
              "1 - SSE / SST: share of the spread of the reference values that is explained",
              "common practice"},
    Statistic{"r2_cv", "R2 (CV)", Quantity::Ratio, "1 - PRESS / SST, also called Q2", "common practice"},
    Statistic{"rmsep", "RMSEP", Quantity::ComponentUnit,
              "error on an independent set, bias included: sqrt(sum e^2 / n)",
              "formula of ISO 12099 (from memory)"},
    Statistic{"rmsep_corrected", "RMSEP corrected", Quantity::ComponentUnit,
              "RMSEP less the error of the reference method: sqrt(RMSEP^2 - mean s_ref^2), 0 if negative; "
              "s_ref is the lab_error of the plan",
              "Faber and Kowalski, Appl. Spectrosc. 51 (1997) 660 (from memory)"},
    Statistic{"sep", "SEP", Quantity::ComponentUnit,
              "standard deviation of the errors on an independent set, bias removed: sqrt(sum (e - mean e)^2 "
              "/ (n - 1))",
              "formula of ISO 12099 (from memory)"},
    Statistic{"bias", "bias", Quantity::ComponentUnit, "mean of predicted - reference",
              "formula of ISO 12099, other sign (from memory)"},
    Statistic{"bias_t", "t of bias", Quantity::Ratio, "|bias| sqrt(n) / SEP",
              "formula of ASTM E1655 (from memory)"},
    Statistic{"bias_t_limit", "t limit", Quantity::Ratio,
              "t(0.975; n - 1): a larger t of bias is significant", "formula of ASTM E1655 (from memory)"},
    Statistic{"bias_p", "p of bias", Quantity::FreeScale, "two-sided p-value of the t of bias",
              "common practice"},
    Statistic{"bias_limit", "bias limit", Quantity::ComponentUnit,
              "t(0.975; n - 1) SEP / sqrt(n): a larger bias is significant",
              "formula of ISO 12099 (from memory)"},
    Statistic{
        "sep_limit", "SEP limit", Quantity::ComponentUnit,
        "SEC sqrt(F(0.95; n - 1, M)), M the degrees of freedom of SEC: a larger SEP is more than chance",
        "formula of ISO 12099 with n - 1, the strict form (from memory)"},
    Statistic{"slope", "slope", Quantity::Ratio, "slope of reference on predicted",
              "formula of ISO 12099 (from memory)"},
    Statistic{"intercept", "intercept", Quantity::ComponentUnit, "intercept of reference on predicted",
              "formula of ISO 12099 (from memory)"},
    Statistic{"slope_low", "slope from", Quantity::Ratio, "lower end of the 95 % interval of the slope",
              "common practice"},
    Statistic{"slope_high", "slope to", Quantity::Ratio, "upper end of the 95 % interval of the slope",
              "common practice"},
    Statistic{"slope_t", "t of slope", Quantity::Ratio, "|slope - 1| sqrt(var(predicted) (n - 1)) / s_res",
              "formula of ISO 12099 (from memory)"},
    Statistic{"slope_t_limit", "t limit of slope", Quantity::Ratio,
              "t(0.975; n - 2): a larger t of slope is significant", "formula of ISO 12099 (from memory)"},
    Statistic{"line_residual_sd", "s_res", Quantity::ComponentUnit,
              "residual standard deviation of reference on predicted, n - 2",
              "formula of ISO 12099 (from memory)"},
    Statistic{"joint_f", "joint F", Quantity::Ratio,
              "F of intercept 0 and slope 1 together, predicted on reference (joint confidence ellipse)",
              "common practice (from memory)"},
    Statistic{"joint_f_limit", "joint F limit", Quantity::Ratio,
              "F(0.95; 2, n - 2): a larger joint F lies outside the ellipse",
              "common practice (from memory)"},
    Statistic{"rpd", "RPD", Quantity::Ratio,
              "standard deviation of the reference values / SEP; depends on the spread of the set",
              "common practice (from memory)"},
    Statistic{"rer", "RER", Quantity::Ratio,
              "range of the reference values / SEP; depends on the spread of the set",
              "common practice (from memory)"},
    Statistic{"concordance", "concordance", Quantity::Ratio,
              "2 s_xy / (s_x^2 + s_y^2 + (mean x - mean y)^2), moments with n",
              "Lin, Biometrics 45 (1989) 255"},
    Statistic{"correlation_squared", "r squared", Quantity::Ratio,
              "squared correlation of predicted and reference", "common practice"},
    Statistic{"equivalence_p", "p of equivalence", Quantity::FreeScale,
              "two one-sided t tests: a p below 0.05 shows that the bias is inside the margin",
              "Schuirmann, J. Pharmacokinet. Biopharm. 15 (1987) 657 (from memory)"},
    Statistic{"coverage", "coverage", Quantity::Ratio, "share of reference values inside their intervals",
              "common practice"},
    Statistic{"range_share", "range share", Quantity::Ratio, "range of the set / calibrated range",
              "formula of ASTM E1655 (from memory)"},
    Statistic{"value_min", "calibrated from", Quantity::ComponentUnit,
              "least reference value of the standards", "common practice"},
    Statistic{"value_max", "calibrated to", Quantity::ComponentUnit,
              "largest reference value of the standards", "common practice"},
    Statistic{"value", "value", Quantity::ComponentUnit, "composition estimated from the spectrum",
              "common practice"},
    Statistic{"largest_difference", "largest difference", Quantity::ComponentUnit,
              "between the values of the replicate spectra of a sample", "common practice"},
    Statistic{"leverage", "leverage", Quantity::FreeScale,
              "distance from the centre of the standards in the factor space, t'(T'T)^-1 t, without the 1/n "
              "of the mean",
              "common practice"},
    Statistic{"t2", "T2", Quantity::FreeScale, "Hotelling's T2 of the scores: (n - 1) leverage",
              "Tracy, Young and Mason, J. Qual. Technol. 24 (1992) 88"},
    Statistic{"t2_limit", "T2 limit", Quantity::FreeScale, "k (n^2 - 1) / (n (n - k)) F(1 - a; k, n - k)",
              "Tracy, Young and Mason, J. Qual. Technol. 24 (1992) 88"},
    Statistic{"q", "Q", Quantity::FreeScale, "sum of squared residuals of the pretreated spectrum",
              "Jackson and Mudholkar, Technometrics 21 (1979) 341"},
    Statistic{"q_limit", "Q limit", Quantity::FreeScale,
              "g chi-squared(1 - a; h) matched to mean and variance of the Q of held-out standards",
              "Nomikos and MacGregor, Technometrics 37 (1995) 41"},
};

}  // namespace

std::span<const Statistic> catalogue() { return kCatalogue; }

const Statistic& statistic(std::string_view key) {
  const auto* const found =
      std::find_if(kCatalogue.begin(), kCatalogue.end(), [&](const Statistic& s) { return s.key == key; });
  if (found == kCatalogue.end())
    throw Error(ErrorKind::Internal, "no statistic \"" + std::string(key) + "\" in the catalogue");
  return *found;
}

std::string shown(const Statistic& statistic, double value, int decimals) {
  switch (statistic.quantity) {
    case Quantity::ComponentUnit:
      return rounded_text(value, decimals);
    case Quantity::Ratio:
      return rounded_text(value, kRatioDecimals);
    case Quantity::Count:
      return rounded_text(value, 0);
    case Quantity::SquaredUnit:
    case Quantity::FreeScale:
      return significant_text(value, kFreeDigits);
  }
  throw Error(ErrorKind::Internal, "a kind of quantity has no rule for its digits");
}

int component_decimals(double error) { return decimals_for_error(error); }

}  // namespace bandwright
