// SPDX-License-Identifier: Apache-2.0
#include "cli/golden.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cctype>
#include <cmath>
#include <cstdlib>
#include <filesystem>
#include <fstream>
#include <functional>
#include <iterator>
#include <nlohmann/json.hpp>
#include <regex>
#include <string_view>
#include <vector>

#include "base/number_text.hpp"

namespace bandwright::cli_tests {
namespace {

using Json = nlohmann::ordered_json;

// Other processor kernels sum in another order: differences near 1e-12 of the largest term, and the
// twelve factors of the meats model leave three digits less.
constexpr double kJsonTolerance = 1e-9;

std::filesystem::path golden_path(const std::string& name) {
  return std::filesystem::path(BANDWRIGHT_CLI_TESTS) / "golden" / name;
}

std::string masked(std::string text) {
  text = std::regex_replace(text, std::regex("(content SHA-256 )[0-9a-f]{64}"), "$1<digest>");
  text = std::regex_replace(text, std::regex("(\"content_sha256\":\")[0-9a-f]{64}"), "$1<digest>");
  text = std::regex_replace(text, std::regex("(written by      bandwright )[0-9]+[.][0-9]+[.][0-9]+"),
                            "$1<version>");
  text = std::regex_replace(text, std::regex("(\"(version|written_by)\":\")[0-9]+[.][0-9]+[.][0-9]+"),
                            "$1<version>");
  return text;
}

/// A piece of a line: a number, or text.
struct Piece {
  std::string text;
  bool is_number = false;
};

bool belongs_to_a_word(char c) {
  return std::isalnum(static_cast<unsigned char>(c)) != 0 || c == '_' || c == '.' || c == '<' || c == '/';
}

std::vector<Piece> pieces_of(const std::string& text) {
  static const std::regex number("-?[0-9]+([.][0-9]+)?(e[-+]?[0-9]+)?");
  std::vector<Piece> pieces;
  const auto add = [&](const std::string& piece, bool is_number) {
    if (piece.empty()) return;
    if (!is_number && !pieces.empty() && !pieces.back().is_number)
      pieces.back().text += piece;
    else
      pieces.push_back({piece, is_number});
  };
  std::size_t at = 0;
  for (std::sregex_iterator found(text.begin(), text.end(), number), end; found != end; ++found) {
    const auto first = static_cast<std::size_t>(found->position());
    const std::size_t last = first + static_cast<std::size_t>(found->length());
    const bool in_word = (first > 0 && (belongs_to_a_word(text[first - 1]) || text[first - 1] == '-')) ||
                         (last < text.size() && (belongs_to_a_word(text[last]) && text[last] != '.'));
    add(text.substr(at, first - at), false);
    add(text.substr(first, last - first), !in_word);
    at = last;
  }
  add(text.substr(at), false);
  return pieces;
}

/// One unit of the last digit that `text` prints.
double last_digit(const std::string& text) {
  const std::size_t point = text.find('.');
  const std::size_t exponent_at = text.find('e');
  const std::size_t mantissa_end = std::min(exponent_at, text.size());
  int power = 0;
  if (point != std::string::npos) power -= static_cast<int>(mantissa_end - point) - 1;
  if (exponent_at != std::string::npos) power += std::stoi(text.substr(exponent_at + 1));
  return std::pow(10.0, power);
}

using NumbersAgree = std::function<bool(const std::string& want, const std::string& got)>;

bool within_last_digit(const std::string& want, const std::string& got) {
  constexpr double kUnits = 1.000001;  // the difference of two decimal texts is itself rounded
  const double unit = std::max(last_digit(want), last_digit(got));
  return std::abs(parse_number(want).value() - parse_number(got).value()) <= kUnits * unit;
}

bool within_tolerance(const std::string& want, const std::string& got) {
  const double expected = parse_number(want).value();
  return std::abs(expected - parse_number(got).value()) <= kJsonTolerance * std::abs(expected);
}

/// A column of numbers is right-aligned: one character more or less in a number changes the blanks
/// before it.
bool same_but_for_padding(const Piece& want, const Piece& got, std::size_t want_width,
                          std::size_t got_width) {
  const std::size_t want_text = want.text.find_last_not_of(' ') + 1;
  const std::size_t got_text = got.text.find_last_not_of(' ') + 1;
  return want.text.substr(0, want_text) == got.text.substr(0, got_text) &&
         want.text.size() + want_width == got.text.size() + got_width;
}

bool lines_agree(const std::string& want, const std::string& got, const NumbersAgree& agree) {
  const std::vector<Piece> wanted = pieces_of(want);
  const std::vector<Piece> found = pieces_of(got);
  if (wanted.size() != found.size()) return false;
  for (std::size_t i = 0; i < wanted.size(); ++i) {
    if (wanted[i].is_number != found[i].is_number) return false;
    if (wanted[i].is_number) {
      if (!agree(wanted[i].text, found[i].text)) return false;
      continue;
    }
    const bool is_last = i + 1 == wanted.size();
    const bool is_padding = wanted[i].text.ends_with("  ") || found[i].text.ends_with("  ");
    if (wanted[i].text == found[i].text && (is_last || !is_padding)) continue;
    if (is_last ||
        !same_but_for_padding(wanted[i], found[i], wanted[i + 1].text.size(), found[i + 1].text.size()))
      return false;
  }
  return true;
}

std::vector<std::string> lines_of(const std::string& text) {
  std::vector<std::string> lines;
  std::size_t at = 0;
  while (at <= text.size()) {
    const std::size_t end = std::min(text.find('\n', at), text.size());
    lines.push_back(text.substr(at, end - at));
    at = end + 1;
  }
  return lines;
}

std::string difference(const std::string& want, const std::string& got, const NumbersAgree& agree) {
  const std::vector<std::string> wanted = lines_of(want);
  const std::vector<std::string> found = lines_of(got);
  for (std::size_t i = 0; i < std::min(wanted.size(), found.size()); ++i)
    if (!lines_agree(wanted[i], found[i], agree))
      return fmt::format("line {}\n  want: {}\n  got:  {}\n", i + 1, wanted[i], found[i]);
  if (wanted.size() != found.size())
    return fmt::format("{} lines instead of {}\n", found.size(), wanted.size());
  return {};
}

double largest_in(const Json& list) {
  double largest = 0.0;
  for (const Json& value : list)
    if (value.is_number()) largest = std::max(largest, std::abs(value.get<double>()));
  return largest;
}

std::string compare(const Json& want, const Json& got, const std::string& where, double scale) {
  if (want.is_number() && got.is_number()) {
    const double expected = want.get<double>();
    const double allowed = kJsonTolerance * std::max(std::abs(expected), scale);
    if (std::abs(expected - got.get<double>()) <= allowed) return {};
    return fmt::format("{}: want {}, got {}\n", where, want.dump(), got.dump());
  }
  if (want.type() != got.type()) return fmt::format("{}: want {}, got {}\n", where, want.dump(), got.dump());
  if (want.is_object()) {
    std::vector<std::string> wanted;
    std::vector<std::string> found;
    for (const auto& [key, value] : want.items()) wanted.push_back(key);
    for (const auto& [key, value] : got.items()) found.push_back(key);
    if (wanted != found) return fmt::format("{}: other keys, or another order\n", where);
    std::string text;
    for (const auto& [key, value] : want.items()) {
      // A bias is a mean of errors that cancel: its digits are those of the error beside it.
      const bool is_bias = key == "bias_cv" || key == "bias";
      const char* const error_key = want.contains("rmsecv") ? "rmsecv" : "rmsep";
      const double beside = is_bias && want.contains(error_key) ? want[error_key].get<double>() : 0.0;
      text += compare(value, got[key], fmt::format("{}/{}", where, key), beside);
    }
    return text;
  }
  if (want.is_array()) {
    if (want.size() != got.size())
      return fmt::format("{}: {} entries instead of {}\n", where, got.size(), want.size());
    std::string text;
    const double largest = largest_in(want);
    for (std::size_t i = 0; i < want.size(); ++i)
      text += compare(want[i], got[i], fmt::format("{}/{}", where, i), largest);
    return text;
  }
  return want == got ? std::string{} : fmt::format("{}: want {}, got {}\n", where, want.dump(), got.dump());
}

::testing::AssertionResult judged(
    const std::string& name, const std::string& actual,
    const std::function<std::string(const std::string&, const std::string&)>& differ) {
  const std::filesystem::path path = golden_path(name);
  const char* const regenerate = std::getenv("BANDWRIGHT_REGENERATE");
  if (regenerate != nullptr && std::string_view(regenerate) == "1") {
    std::ofstream(path, std::ios::binary) << actual;
    return ::testing::AssertionFailure()
           << path << " was written anew: read it, then run without BANDWRIGHT_REGENERATE";
  }
  std::ifstream in(path, std::ios::binary);
  if (!in) return ::testing::AssertionFailure() << "there is no " << path;
  const std::string want{std::istreambuf_iterator<char>(in), std::istreambuf_iterator<char>()};
  const std::string text = differ(want, actual);
  if (text.empty()) return ::testing::AssertionSuccess();
  return ::testing::AssertionFailure() << name << ": " << text;
}

}  // namespace

std::string text_difference(const std::string& want, const std::string& got) {
  return difference(want, got, within_last_digit);
}

std::string json_difference(const std::string& want, const std::string& got) {
  return compare(Json::parse(want), Json::parse(got), "", 0.0);
}

::testing::AssertionResult matches_golden_text(const std::string& name, const std::string& actual) {
  return judged(name, masked(actual), text_difference);
}

::testing::AssertionResult matches_golden_json(const std::string& name, const std::string& actual) {
  constexpr int kIndent = 1;
  return judged(name, Json::parse(masked(actual)).dump(kIndent) + "\n", json_difference);
}

::testing::AssertionResult matches_golden_csv(const std::string& name, const std::string& actual) {
  return judged(name, actual, [](const std::string& want, const std::string& got) {
    return difference(want, got, within_tolerance);
  });
}

}  // namespace bandwright::cli_tests
