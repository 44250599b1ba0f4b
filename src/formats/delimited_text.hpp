// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <cstddef>
#include <deque>
#include <string>
#include <string_view>
#include <vector>

#include "base/error.hpp"

namespace bandwright {

/// A hundred million numbers. As doubles they take as much memory again, and no file of a
/// laboratory comes near: a larger one is most likely not what the user meant.
inline constexpr std::size_t kLargestText = std::size_t{1} << 30U;
/// Numbers, names and remarks are far shorter; a longer field is a quote that was never closed.
inline constexpr std::size_t kLongestField = std::size_t{1} << 16U;
/// Ten times the points of the finest spectra; keeps a row within a few megabytes.
inline constexpr std::size_t kMostFields = 1'000'000;

/// The text of a CSV file, ready to be split: checked, its byte-order mark cut, converted to UTF-8
/// from Windows-1252 if it was not UTF-8 (with a warning), its separator known.
///
/// The separator is the first of `;`, tab and `,` that stands outside quotes in the heading, which
/// is the first line that is not blank; `,` if there is none of them.
class DelimitedText {
 public:
  /// `bytes` must outlive the object. Throws Error(Input), naming the file, if the text is larger
  /// than kLargestText or holds control characters other than tabs and line ends.
  DelimitedText(std::string_view bytes, std::string_view file);
  DelimitedText(const DelimitedText&) = delete;  // text_ may point into converted_
  DelimitedText& operator=(const DelimitedText&) = delete;

  [[nodiscard]] std::string_view text() const { return text_; }
  [[nodiscard]] const std::string& file() const { return file_; }
  [[nodiscard]] char separator() const { return separator_; }
  [[nodiscard]] const std::vector<Warning>& warnings() const { return warnings_; }
  /// "semicolon", "tab" or "comma".
  [[nodiscard]] std::string_view separator_name() const;
  /// At least the number of records, for reserving memory.
  [[nodiscard]] std::size_t most_records() const;

 private:
  std::string file_;
  std::string converted_;
  std::string_view text_;
  char separator_ = ',';
  std::vector<Warning> warnings_;
};

/// Walks the records of a text from its start, in linear time and without copying fields.
///
/// Lines end with LF, CRLF or CR. Blanks around a field are cut. A field that begins with a quote
/// ends with the next single quote, may hold separators and line ends, and two quotes in it stand
/// for one; a quote further in is an ordinary character. Records without any text are skipped.
class RecordReader {
 public:
  /// `text` must outlive the reader.
  explicit RecordReader(const DelimitedText& text);

  /// Moves to the next record; false at the end. Throws Error(Input) with file and line if a quote
  /// is never closed or followed by text, or a field or a record is too long.
  bool next();

  /// 1-based line on which the record begins.
  [[nodiscard]] std::size_t line() const { return record_line_; }
  /// The fields, valid until the next call of next().
  [[nodiscard]] const std::vector<std::string_view>& fields() const { return fields_; }

 private:
  void read_record();
  void read_plain_field();
  void read_quoted_field();
  void pass_line_end();
  void skip_blanks();
  [[noreturn]] void refuse(std::string message, std::size_t line, std::size_t field,
                           std::string hint = {}) const;

  const DelimitedText* source_;
  const char* at_;
  const char* end_;
  char separator_;
  std::size_t line_ = 1;
  std::size_t record_line_ = 0;
  std::vector<std::string_view> fields_;
  std::deque<std::string> unquoted_;  // of this record; a deque keeps views into it valid
};

}  // namespace bandwright
