// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <array>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

#include "base/matrix.hpp"
#include "base/options.hpp"

namespace bandwright {

/// Rules that choose the number of factors from cross-validated errors.
enum class FactorRule {
  FTest,             ///< fewest factors whose PRESS is not worse than the least by an F test
  Minimum,           ///< least PRESS
  OneStandardError,  ///< fewest factors within one standard error of the least mean square
};

template <>
struct EnumTexts<FactorRule> {
  static constexpr std::array entries{
      std::pair{FactorRule::FTest, std::string_view{"f-test"}},
      std::pair{FactorRule::Minimum, std::string_view{"minimum"}},
      std::pair{FactorRule::OneStandardError, std::string_view{"one-standard-error"}}};
};

/// Chooses a number of factors (1-based count, at least 1) by a rule.
///
/// squared_errors: n x a; row i is a sample that was held out, column k - 1 its squared held-out
/// error with k factors (mean over repeats). Finite, n >= 2, a >= 1.
/// Values within 1e-9 (relative) of each other count as equal, and the fewer factors win.
/// Sources: FTest: Haaland and Thomas, Anal. Chem. 60 (1988) 1193: fewest h with
///   PRESS(h) / PRESS(h*) < F(0.75; n, n). OneStandardError: Breiman et al. (1984), sec. 3.4.3, in the
///   form fewest h with MSE(h) <= MSE(h*) + sd(e^2) / sqrt(n), sd with n - 1 at h*.
[[nodiscard]] Index choose_factors(FactorRule rule, const MatrixView& squared_errors);

}  // namespace bandwright
