// SPDX-License-Identifier: Apache-2.0
#include "records/not_available.hpp"

#include <algorithm>

namespace bandwright {
namespace {

constexpr std::string_view kTop;
constexpr std::string_view kConvert = "convert the spectra to absorbance first";
constexpr std::string_view kRemove = "remove this table from the plan";

constexpr std::array kNotAvailable{
    NotAvailable{{"regression", "component"}, "kind", "pls2", {}},
    NotAvailable{{"regression", "component"}, "kind", "pcr", {}},
    NotAvailable{{"regression", "component"}, "kind", "cls", {}},
    NotAvailable{{"regression", "component"}, "factors", "randomisation", {}},
    NotAvailable{{"regression", "regression"}, "compare", {}, "remove this key"},
    NotAvailable{{"step", "step"}, "step", "msc", {}},
    NotAvailable{{"step", "step"}, "step", "emsc", {}},
    NotAvailable{{"step", "step"}, "step", "detrend", {}},
    NotAvailable{{"step", "step"}, "step", "baseline", {}},
    NotAvailable{{"step", "step"}, "step", "offset", {}},
    NotAvailable{{"step", "step"}, "step", "normalise", {}},
    NotAvailable{{"step", "step"}, "step", "absorbance", kConvert},
    NotAvailable{{"standards", "validation"}, "ordinate", "transmittance", kConvert},
    NotAvailable{{"standards", "validation"}, "ordinate", "percent-transmittance", kConvert},
    NotAvailable{{"standards", "validation"}, "ordinate", "reflectance", kConvert},
    NotAvailable{{"interval", "interval"}, "kind", "cross-validated", {}},
    NotAvailable{{"component", "component"},
                 "report_as",
                 {},
                 "remove this key; give reference values and limits in the unit to report"},
    NotAvailable{{"component", "component"}, "molar_mass", {}, "remove this key"},
    NotAvailable{{kTop, kTop}, "pure", {}, kRemove},
    NotAvailable{{kTop, kTop}, "disturbance", {}, kRemove},
    NotAvailable{{kTop, kTop}, "revalidation", {}, kRemove},
};

}  // namespace

std::span<const NotAvailable> not_available_list() { return kNotAvailable; }

const NotAvailable* find_not_available(std::string_view table, std::string_view key, std::string_view word) {
  const auto found = std::find_if(kNotAvailable.begin(), kNotAvailable.end(), [&](const NotAvailable& entry) {
    return entry.key == key && entry.word == word && (entry.tables[0] == table || entry.tables[1] == table);
  });
  return found == kNotAvailable.end() ? nullptr : &*found;
}

}  // namespace bandwright
