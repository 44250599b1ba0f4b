// SPDX-License-Identifier: Apache-2.0
#include "base/error.hpp"

#include <fmt/format.h>

#include <cstdint>

namespace bandwright {
namespace {

/// Length of the well-formed UTF-8 sequence at `at`, 0 if there is none (Unicode 15, table 3-7).
std::size_t utf8_length(std::string_view text, std::size_t at) {
  const auto byte = [&](std::size_t i) { return static_cast<std::uint8_t>(text[i]); };
  const auto continues = [&](std::size_t i) { return i < text.size() && (byte(i) & 0xC0U) == 0x80U; };
  const std::uint8_t first = byte(at);
  if (first < 0x80U) return 1;
  if (first >= 0xC2U && first <= 0xDFU) return continues(at + 1) ? 2 : 0;
  if (first >= 0xE0U && first <= 0xEFU) {
    if (!continues(at + 1) || !continues(at + 2)) return 0;
    const std::uint8_t second = byte(at + 1);
    if ((first == 0xE0U && second < 0xA0U) || (first == 0xEDU && second > 0x9FU)) return 0;
    return 3;
  }
  if (first >= 0xF0U && first <= 0xF4U) {
    if (!continues(at + 1) || !continues(at + 2) || !continues(at + 3)) return 0;
    const std::uint8_t second = byte(at + 1);
    if ((first == 0xF0U && second < 0x90U) || (first == 0xF4U && second > 0x8FU)) return 0;
    return 4;
  }
  return 0;
}

/// C1 controls (U+0080-U+009F) steer some terminals like the C0 ones do.
bool is_c1_control(std::string_view sequence) {
  return sequence.size() == 2 && static_cast<std::uint8_t>(sequence[0]) == 0xC2U &&
         static_cast<std::uint8_t>(sequence[1]) < 0xA0U;
}

std::string located(std::string_view file, std::size_t line) {
  if (file.empty()) return line == 0 ? std::string{} : fmt::format("line {}: ", line);
  return line == 0 ? fmt::format("{}: ", file) : fmt::format("{}:{}: ", file, line);
}

std::string compose(const std::string& message, const ErrorContext& context) {
  std::string text = located(context.file, context.line);
  if (!context.field.empty()) text += context.field + ": ";
  text += message;
  if (!context.hint.empty()) text += " (" + context.hint + ")";
  return printable(text);
}

}  // namespace

Error::Error(ErrorKind kind, std::string message, ErrorContext context)
    : kind_(kind),
      message_(std::move(message)),
      context_(std::move(context)),
      text_(compose(message_, context_)) {}

Error Error::within(const ErrorContext& outer) const {
  ErrorContext merged = context_;
  if (merged.file.empty()) merged.file = outer.file;
  if (merged.line == 0) merged.line = outer.line;
  if (merged.field.empty()) merged.field = outer.field;
  if (merged.hint.empty()) merged.hint = outer.hint;
  return {kind_, message_, std::move(merged)};
}

std::string Warning::one_line() const { return printable(located(file, line) + text); }

std::string printable(std::string_view text) {
  std::string out;
  out.reserve(text.size());
  for (std::size_t i = 0; i < text.size();) {
    const auto byte = static_cast<std::uint8_t>(text[i]);
    const std::size_t length = utf8_length(text, i);
    if (length == 0 || byte < 0x20U || byte == 0x7FU || is_c1_control(text.substr(i, length))) {
      const std::size_t escaped = length == 0 ? 1 : length;
      for (std::size_t k = 0; k < escaped; ++k)
        out += fmt::format("\\x{:02x}", static_cast<std::uint8_t>(text[i + k]));
      i += escaped;
    } else {
      out.append(text.substr(i, length));
      i += length;
    }
  }
  return out;
}

bool is_utf8(std::string_view text) {
  for (std::size_t i = 0; i < text.size();) {
    const std::size_t length = utf8_length(text, i);
    if (length == 0) return false;
    i += length;
  }
  return true;
}

}  // namespace bandwright
