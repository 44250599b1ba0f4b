// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <cstddef>
#include <optional>
#include <string>
#include <string_view>

namespace bandwright {

/// Reads the whole of `text` as a finite decimal number, independent of the locale. Blanks around
/// it and a leading `+` are allowed; nothing else may be left over. Empty if it is no number, is
/// `inf` or `nan`, or lies outside the range of a double (underflow to 0 is refused as well).
[[nodiscard]] std::optional<double> parse_number(std::string_view text);

/// The shortest text that reads back as the same double. For records and machine output.
/// Not a number gives `nan`; writers of formats without it must handle that before.
[[nodiscard]] std::string exact_text(double value);

/// The one rounding function for people's output: fixed notation with `decimals` digits after the
/// point, the exact binary value rounded to nearest; never `-0.00`.
/// A value that is not a number is shown as a dash.
[[nodiscard]] std::string rounded_text(double value, int decimals);

/// `digits` significant digits, for quantities whose size is not known beforehand (p-values,
/// T2, Q): fixed notation between 1e-4 and 1e6, otherwise scientific.
[[nodiscard]] std::string significant_text(double value, int digits);

/// "1 spectrum", "3 spectra".
[[nodiscard]] std::string counted(std::ptrdiff_t count, std::string_view one, std::string_view several);

/// Decimals that show an error statistic of this size with three significant digits, between 0
/// and 10. All values in the unit of a component are shown with the decimals of its error.
[[nodiscard]] int decimals_for_error(double error);

}  // namespace bandwright
