// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <cstddef>
#include <exception>
#include <string>
#include <string_view>

namespace bandwright {

/// What ended the request; decides the exit status of the program.
enum class ErrorKind {
  Usage,      ///< the command line or the plan is wrong
  Input,      ///< data refused
  Numerical,  ///< the numbers asked for cannot be computed from these data
  Output,     ///< a result could not be written
  Internal,   ///< a fault of the program or of a library below it
};

/// Where the fault lies and how to mend it. Low code fills what it knows; the reader that knows
/// file and line adds them and rethrows. Empty or zero means unknown.
struct ErrorContext {
  std::string file;
  std::size_t line = 0;  ///< 1-based
  std::string field;     ///< the key, column or record at fault
  std::string hint;      ///< what the user can do
};

/// The one exception of the library. `what()` is a single printable line:
/// `file:line: field: message (hint)`.
class Error : public std::exception {
 public:
  Error(ErrorKind kind, std::string message, ErrorContext context = {});

  [[nodiscard]] ErrorKind kind() const noexcept { return kind_; }
  [[nodiscard]] const std::string& message() const noexcept { return message_; }
  [[nodiscard]] const ErrorContext& context() const noexcept { return context_; }
  [[nodiscard]] const char* what() const noexcept override { return text_.c_str(); }

  /// The same error with the parts of `outer` that were still unknown.
  [[nodiscard]] Error within(const ErrorContext& outer) const;

 private:
  ErrorKind kind_;
  std::string message_;
  ErrorContext context_;
  std::string text_;
};

/// Something the user should know that stops nothing. Warnings are data: results carry them.
struct Warning {
  std::string text;
  std::string file;
  std::size_t line = 0;  ///< 1-based; 0 = no line

  /// One printable line: `file:line: text`.
  [[nodiscard]] std::string one_line() const;
};

/// The text with control characters and broken UTF-8 written as escapes, so that a name out of
/// a foreign file can neither break a line nor steer a terminal.
[[nodiscard]] std::string printable(std::string_view text);

/// True if the bytes are well-formed UTF-8 (no overlong forms, no surrogates).
[[nodiscard]] bool is_utf8(std::string_view text);

}  // namespace bandwright
