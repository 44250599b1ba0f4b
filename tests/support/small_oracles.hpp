// SPDX-License-Identifier: Apache-2.0
#pragma once

#include "base/matrix.hpp"
#include "spectra/axis.hpp"

/// A set small enough to print, made for these tests, with its PLS results computed in 60-digit
/// arithmetic by two routes that share no step: NIPALS with deflation, and the closed Krylov form
/// b = K (K'SK)^-1 K's with S = X'X, s = X'y, K = [s, Ss, ...]. The routes differ by less than 1e-30.

namespace bandwright::eight_by_five {

inline Matrix spectra() {
  Matrix X(8, 5);
  X << 10, 12, 20, 15, 8,  //
      11, 15, 26, 18, 9,   //
      13, 14, 22, 19, 12,  //
      9, 10, 15, 12, 8,    //
      14, 18, 31, 23, 12,  //
      12, 16, 25, 20, 11,  //
      10, 13, 21, 15, 9,   //
      15, 17, 29, 24, 14;
  return X;
}

inline Vector reference() {
  Vector y(8);
  y << 2.0, 3.1, 2.2, 1.1, 4.0, 2.9, 2.1, 3.6;
  return y;
}

inline Axis axis() {
  Vector positions(5);
  positions << 1, 2, 3, 4, 5;
  return {positions, AxisUnit::Nanometre};
}

inline constexpr Index kFactors = 5;

/// Regression vectors for 1 .. 5 factors (rows), mean-centred, not scaled; 12 digits as printed.
inline Matrix coefficients() {
  Matrix b(5, 5);
  b << 0.0293643582512, 0.0436684555109, 0.0866437609343, 0.0641478899135, 0.0262766896797,    //
      -0.0174377071573, 0.0573061490465, 0.154803589172, 0.0264785408947, -0.0469201117680,    //
      0.000459469953629, -0.0103633786641, 0.178555431428, 0.0371486093317, -0.0582142761629,  //
      -0.0631872019155, -0.0448035327136, 0.177372898751, 0.0892538757499, -0.0529773569430,   //
      -0.103253968254, -0.0667989417989, 0.192248677249, 0.0879365079365, -0.0174074074074;
  return b;
}

inline Vector of(double a, double b, double c, double d, double e) {
  return (Vector(5) << a, b, c, d, e).finished();
}
inline Vector of(double a, double b, double c, double d, double e, double f, double g, double h) {
  return (Vector(8) << a, b, c, d, e, f, g, h).finished();
}

/// One value for each of 1 .. 5 factors.
inline Vector intercepts() {
  return of(-1.83804375584, -1.64755483938, -1.52378627625, -1.25817748187, -1.16764550265);
}
inline Vector sse() {
  return of(0.331471664322, 0.0192101777579, 0.0128014765801, 0.0109365203186, 0.0101402116402);
}
inline Vector sec() { return of(0.235043139, 0.0619841556, 0.0565718052, 0.0603780322, 0.0712046755); }
inline Vector press() {
  return of(0.516796566808, 0.0652249778120, 0.0593650013855, 0.0996523495738, 15.1222968298);
}
inline Vector rmsecv() { return of(0.2541644563, 0.09029464118, 0.08614305064, 0.1116088872, 1.374877123); }
inline Vector coefficient_norms() { return of(0.12281, 0.17451, 0.19173, 0.21962, 0.24519); }

/// One value a sample, with two factors.
inline Vector fitted_2() {
  return of(1.98363088, 3.09944867, 2.27377095, 1.03300272, 3.98470431, 2.94363038, 2.14882051, 3.53299159);
}
inline Vector left_out_2() {  // leave-one-out
  return of(1.97594171, 3.09762630, 2.33737168, 0.957373436, 3.97052030, 2.95288190, 2.16181974, 3.46605972);
}
inline Vector leverage_2() {  // with the 1/n of the mean
  return of(0.24773443, 0.44812757, 0.45630968, 0.53071892, 0.44103592, 0.14295402, 0.21877110, 0.51434835);
}
inline Vector q_2() {
  return of(0.38484431, 0.033683088, 0.039487646, 0.0055307871, 0.062627458, 0.95469969, 0.32769341,
            0.17244698);
}

}  // namespace bandwright::eight_by_five
