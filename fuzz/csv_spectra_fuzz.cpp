// SPDX-License-Identifier: Apache-2.0
#include <cstddef>
#include <cstdint>
#include <cstdlib>
#include <string_view>

#include "base/error.hpp"
#include "formats/csv_spectra.hpp"

using namespace bandwright;

namespace {

bool same(const SpectraSet& a, const SpectraSet& b) {
  return a.ids == b.ids && a.axis.positions() == b.axis.positions() && a.axis.unit() == b.axis.unit() &&
         a.ordinate == b.ordinate && a.values == b.values;
}

/// What was read must be written and read again without any refusal.
void read(std::string_view text, BadSpectrum bad_spectrum) {
  CsvSpectra once;
  try {
    once = parse_csv_spectra(text, "fuzz.csv", {.axis = {}, .ordinate = {}, .bad_spectrum = bad_spectrum});
  } catch (const Error&) {
    return;
  }
  if (!once.spectra.values.allFinite()) std::abort();
  if (once.spectra.size() == 0) return;
  const CsvSpectra twice = parse_csv_spectra(format_csv_spectra(once.spectra), "fuzz.csv");
  if (!same(once.spectra, twice.spectra)) std::abort();
}

}  // namespace

extern "C" int LLVMFuzzerTestOneInput(const std::uint8_t* data, std::size_t size) {
  const std::string_view text(reinterpret_cast<const char*>(data), size);
  read(text, BadSpectrum::Refuse);
  read(text, BadSpectrum::Collect);
  return 0;
}
