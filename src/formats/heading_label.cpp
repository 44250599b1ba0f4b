// SPDX-License-Identifier: Apache-2.0
#include "formats/heading_label.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <vector>

#include "base/error.hpp"
#include "formats/cells.hpp"

namespace bandwright {
namespace {

constexpr std::string_view kWordEnds = " \t\r\n[](),;:=_\"";

constexpr std::array<std::string_view, 10> kWavenumberWords = {
    "cm-1",      "cm^-1",      "cm**-1",    "1/cm",       "cm\u207B\u00B9",
    "cm\u22121", "cm^\u22121", "cm\u20131", "wavenumber", "wavenumbers"};
constexpr std::array<std::string_view, 5> kNanometreWords = {"nm", "nanometre", "nanometres", "nanometer",
                                                             "nanometers"};
constexpr std::array<std::string_view, 11> kForeignUnits = {
    "um",          "\u00B5m",    "\u03BCm",     "micron", "microns", "micrometre",
    "micrometres", "micrometer", "micrometers", "thz",    "ev"};

template <class Words>
bool contains(const Words& words, std::string_view word) {
  return std::find(words.begin(), words.end(), word) != words.end();
}

/// Lower case for ASCII letters; the bytes of other characters stay.
std::vector<std::string> words_of(std::string_view label) {
  std::vector<std::string> words;
  for (std::size_t at = 0; at < label.size();) {
    const std::size_t begin = label.find_first_not_of(kWordEnds, at);
    if (begin == std::string_view::npos) break;
    at = std::min(label.find_first_of(kWordEnds, begin), label.size());
    std::string& word = words.emplace_back(label.substr(begin, at - begin));
    for (char& c : word)
      if (c >= 'A' && c <= 'Z') c = static_cast<char>(c - 'A' + 'a');
  }
  return words;
}

/// Percent reflectance is no ordinate of ours, so the sign must not get lost.
std::optional<Ordinate> ordinate_of(std::string_view word, bool percent_before) {
  const bool percent = percent_before || word.starts_with('%');
  if (word.starts_with('%')) word.remove_prefix(1);
  if (word == "transmittance" || (percent && word == "t"))
    return percent ? Ordinate::PercentTransmittance : Ordinate::Transmittance;
  return percent ? std::nullopt : enum_from_text<Ordinate>(word);
}

template <class Value>
void settle(std::optional<Value>& slot, Value value, std::string_view label, std::string_view what) {
  if (slot && *slot != value)
    throw Error(ErrorKind::Input, fmt::format("the label {} names two {}", cell_text(label), what));
  slot = value;
}

}  // namespace

HeadingLabel read_heading_label(std::string_view label) {
  HeadingLabel found;
  const std::vector<std::string> words = words_of(label);
  for (std::size_t i = 0; i < words.size(); ++i) {
    const std::string& word = words[i];
    if (contains(kForeignUnits, word)) {
      throw Error(ErrorKind::Input,
                  fmt::format("the label {} names an axis unit other than cm-1 and nm", cell_text(label)),
                  {.file = {}, .line = 0, .field = {}, .hint = "convert the axis to cm-1 or nm"});
    }
    if (contains(kWavenumberWords, word)) settle(found.unit, AxisUnit::Wavenumber, label, "axis units");
    if (contains(kNanometreWords, word)) settle(found.unit, AxisUnit::Nanometre, label, "axis units");
    const bool percent_before = i > 0 && (words[i - 1] == "%" || words[i - 1] == "percent");
    if (const auto ordinate = ordinate_of(word, percent_before))
      settle(found.ordinate, *ordinate, label, "ordinates");
    if (i == 1 && word == "id" && words[0] == "spectrum") found.heads_spectrum_ids = true;
  }
  return found;
}

std::string heading_label_text(std::optional<AxisUnit> unit, std::optional<Ordinate> ordinate) {
  std::string text = "spectrum id";
  if (unit) text += fmt::format(" [{}]", text_of(*unit));
  if (ordinate) text += fmt::format(" [{}]", text_of(*ordinate));
  return text;
}

}  // namespace bandwright
