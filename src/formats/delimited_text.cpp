// SPDX-License-Identifier: Apache-2.0
#include "formats/delimited_text.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <cstdint>
#include <cstring>
#include <optional>
#include <utility>

namespace bandwright {
namespace {

constexpr char kQuote = '"';

bool is_line_end(char c) { return c == '\n' || c == '\r'; }

/// CRLF counts once.
std::size_t line_number(std::string_view text, std::size_t position) {
  std::size_t line = 1;
  for (std::size_t i = 0; i < position; ++i)
    if (text[i] == '\n' || (text[i] == '\r' && (i + 1 >= text.size() || text[i + 1] != '\n'))) ++line;
  return line;
}

struct ByteFindings {
  bool only_ascii = true;
  std::optional<std::size_t> control;  ///< position of the first byte that no text holds
};

/// Looks at eight bytes at a time: files of a hundred megabytes must not wait for this.
ByteFindings look_at_bytes(std::string_view text) {
  constexpr std::uint64_t kHighBits = 0x8080808080808080U;
  constexpr std::uint64_t kBlanks = 0x2020202020202020U;
  constexpr std::size_t kWord = sizeof(std::uint64_t);
  ByteFindings found;
  const auto look_closely = [&](std::size_t from, std::size_t to) {
    for (std::size_t i = from; i < to; ++i) {
      const auto byte = static_cast<std::uint8_t>(text[i]);
      if (byte >= 0x80U) found.only_ascii = false;
      if (byte < 0x20U && text[i] != '\t' && !is_line_end(text[i]) && !found.control) found.control = i;
    }
  };
  std::size_t i = 0;
  for (; i + kWord <= text.size(); i += kWord) {
    std::uint64_t word = 0;
    std::memcpy(&word, text.data() + i, kWord);
    // (word - 0x20..) & ~word has a high bit set if some byte is below 0x20.
    if ((((word - kBlanks) & ~word) | word) & kHighBits) {
      look_closely(i, i + kWord);
      if (found.control) return found;
    }
  }
  look_closely(i, text.size());
  return found;
}

void append_utf8(std::string& out, std::uint32_t code) {
  const auto put = [&](std::uint32_t byte) {
    out.push_back(static_cast<char>(static_cast<std::uint8_t>(byte)));
  };
  if (code < 0x80U) {
    put(code);
  } else if (code < 0x800U) {
    put(0xC0U | (code >> 6U));
    put(0x80U | (code & 0x3FU));
  } else {
    put(0xE0U | (code >> 12U));
    put(0x80U | ((code >> 6U) & 0x3FU));
    put(0x80U | (code & 0x3FU));
  }
}

/// Source: the index of windows-1252 in the WHATWG Encoding Standard, where the five bytes without
/// a character stand for control characters of the same number. From memory, as below.
std::string from_windows_1252(std::string_view bytes) {
  constexpr std::array<std::uint16_t, 32> kFrom80To9f = {
      0x20AC, 0x0081, 0x201A, 0x0192, 0x201E, 0x2026, 0x2020, 0x2021, 0x02C6, 0x2030, 0x0160,
      0x2039, 0x0152, 0x008D, 0x017D, 0x008F, 0x0090, 0x2018, 0x2019, 0x201C, 0x201D, 0x2022,
      0x2013, 0x2014, 0x02DC, 0x2122, 0x0161, 0x203A, 0x0153, 0x009D, 0x017E, 0x0178};
  std::string text;
  text.reserve(bytes.size() + bytes.size() / 16);
  for (const char c : bytes) {
    const auto byte = static_cast<std::uint8_t>(c);
    append_utf8(text, byte >= 0x80U && byte < 0xA0U ? kFrom80To9f[byte - 0x80U] : byte);
  }
  return text;
}

/// A quote opens only where a field begins, as in RecordReader, else `12" cell` would hide the rest.
char separator_of_heading(std::string_view text) {
  bool semicolon = false;
  bool tab = false;
  bool quoted = false;
  bool field_begins = true;
  bool blank_line = true;
  for (const char c : text) {
    if (quoted) {
      quoted = c != kQuote;  // a doubled quote closes and opens again
      field_begins = !quoted;
      continue;
    }
    if (is_line_end(c)) {
      if (!blank_line) break;
      semicolon = tab = false;
      field_begins = true;
      continue;
    }
    if (c == kQuote && field_begins) {
      quoted = true;
      blank_line = false;
      continue;
    }
    if (c == ';') semicolon = true;
    if (c == '\t') tab = true;
    const bool separates = c == ';' || c == '\t' || c == ',';
    if (!separates && c != ' ') blank_line = false;
    field_begins = separates || (field_begins && c == ' ');
  }
  if (semicolon) return ';';
  return tab ? '\t' : ',';
}

}  // namespace

DelimitedText::DelimitedText(std::string_view bytes, std::string_view file) : file_(file), text_(bytes) {
  constexpr std::string_view kByteOrderMark = "\xEF\xBB\xBF";
  const ErrorContext where{.file = file_, .line = 0, .field = {}, .hint = {}};
  if (text_.size() > kLargestText) {
    throw Error(
        ErrorKind::Input,
        fmt::format("the text has {} bytes, more than the {} that are read", text_.size(), kLargestText),
        where);
  }
  if (text_.starts_with("\xFF\xFE") || text_.starts_with("\xFE\xFF")) {
    throw Error(ErrorKind::Input, "the text is UTF-16",
                {.file = file_, .line = 0, .field = {}, .hint = "save it as CSV in UTF-8"});
  }
  if (text_.starts_with(kByteOrderMark)) text_.remove_prefix(kByteOrderMark.size());
  const ByteFindings bytes_found = look_at_bytes(text_);
  if (bytes_found.control) {
    throw Error(ErrorKind::Input,
                fmt::format("byte 0x{:02x} does not belong in a text",
                            static_cast<std::uint8_t>(text_[*bytes_found.control])),
                {.file = file_,
                 .line = line_number(text_, *bytes_found.control),
                 .field = {},
                 .hint = "a CSV file is plain text; is this another format?"});
  }
  if (!bytes_found.only_ascii && !is_utf8(text_)) {
    converted_ = from_windows_1252(text_);
    text_ = converted_;
    warnings_.push_back({"the text is not UTF-8; it was read as Windows-1252", file_, 0});
  }
  separator_ = separator_of_heading(text_);
}

std::string_view DelimitedText::separator_name() const {
  if (separator_ == ';') return "semicolon";
  return separator_ == '\t' ? "tab" : "comma";
}

std::size_t DelimitedText::most_records() const {
  std::size_t line_ends = 0;
  for (const char line_end : {'\n', '\r'})
    for (auto at = text_.find(line_end); at != std::string_view::npos; at = text_.find(line_end, at + 1))
      ++line_ends;
  return line_ends + 1;
}

RecordReader::RecordReader(const DelimitedText& text)
    : source_(&text), at_(text.text().data()), end_(at_ + text.text().size()), separator_(text.separator()) {}

bool RecordReader::next() {
  while (at_ != end_) {
    read_record();
    const bool has_text =
        std::any_of(fields_.begin(), fields_.end(), [](auto field) { return !field.empty(); });
    if (has_text) return true;
  }
  return false;
}

void RecordReader::read_record() {
  fields_.clear();
  unquoted_.clear();
  record_line_ = line_;
  for (;;) {
    skip_blanks();
    if (at_ != end_ && *at_ == kQuote) {
      read_quoted_field();
    } else {
      read_plain_field();
    }
    if (fields_.back().size() > kLongestField)
      refuse(fmt::format("longer than {} bytes", kLongestField), record_line_, fields_.size());
    if (fields_.size() > kMostFields)
      refuse(fmt::format("a line of more than {} fields", kMostFields), record_line_, fields_.size());
    if (at_ == end_) return;
    if (is_line_end(*at_)) {
      pass_line_end();
      return;
    }
    ++at_;  // the separator
  }
}

void RecordReader::read_plain_field() {
  const char* const begin = at_;
  const char* p = at_;
  while (p != end_ && *p != separator_ && !is_line_end(*p)) ++p;
  at_ = p;
  while (p != begin && (p[-1] == ' ' || p[-1] == '\t')) --p;
  fields_.emplace_back(begin, static_cast<std::size_t>(p - begin));
}

void RecordReader::read_quoted_field() {
  const std::size_t opened_on = line_;
  const std::size_t number = fields_.size() + 1;
  const char* const begin = ++at_;
  bool doubled = false;
  for (;; ++at_) {
    if (static_cast<std::size_t>(at_ - begin) > 2 * kLongestField)
      refuse(fmt::format("longer than {} bytes", kLongestField), opened_on, number,
             "is its quote ever closed?");
    if (at_ == end_) refuse("a quote is opened and never closed", opened_on, number);
    if (*at_ == kQuote) {
      if (at_ + 1 == end_ || at_[1] != kQuote) break;
      doubled = true;
      ++at_;
    } else if (*at_ == '\n' || (*at_ == '\r' && (at_ + 1 == end_ || at_[1] != '\n'))) {
      ++line_;
    }
  }
  const std::string_view content(begin, static_cast<std::size_t>(at_ - begin));
  ++at_;
  skip_blanks();
  if (at_ != end_ && *at_ != separator_ && !is_line_end(*at_))
    refuse("text follows a closing quote", line_, number, "a quote inside a quoted field is written twice");
  if (!doubled) {
    fields_.push_back(content);
    return;
  }
  std::string& text = unquoted_.emplace_back();
  for (std::size_t i = 0; i < content.size(); ++i) {
    text.push_back(content[i]);
    if (content[i] == kQuote) ++i;
  }
  fields_.emplace_back(text);
}

void RecordReader::pass_line_end() {
  if (*at_ == '\r' && at_ + 1 != end_ && at_[1] == '\n') ++at_;
  ++at_;
  ++line_;
}

void RecordReader::skip_blanks() {
  while (at_ != end_ && (*at_ == ' ' || (*at_ == '\t' && separator_ != '\t'))) ++at_;
}

void RecordReader::refuse(std::string message, std::size_t line, std::size_t field, std::string hint) const {
  throw Error(ErrorKind::Input, std::move(message),
              {.file = source_->file(),
               .line = line,
               .field = fmt::format("field {}", field),
               .hint = std::move(hint)});
}

}  // namespace bandwright
