// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <initializer_list>
#include <nlohmann/json_fwd.hpp>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "base/matrix.hpp"
#include "base/options.hpp"

/// Strict reading of JSON, and numbers into JSON. Objects keep the order of their members everywhere
/// (ordered_json), so that the same values give the same bytes.

namespace bandwright {

using Json = nlohmann::ordered_json;

/// Deepest nesting of objects and lists that is read.
inline constexpr int kJsonDepth = 16;
/// Most members of one object that are read; members are looked up one by one.
inline constexpr std::size_t kJsonMembers = 2000;

/// Parses one JSON document (RFC 8259). Throws Error(Input) with file, line and column when it is none,
/// is not UTF-8 or holds a number beyond the range of a double; with the JSON path when a key comes
/// twice, the nesting is too deep or an object has too many members.
[[nodiscard]] Json parse_json(std::string_view text, std::string_view file);

/// A value of a parsed document with its path, for checked reading. Every refusal is an Error(Input)
/// whose field is the path, as in `components[1].calibration.loadings`; list positions count from 0
/// there, as in JSON. Refers to the document, which must outlive it.
class JsonValue {
 public:
  explicit JsonValue(const Json& node, std::string path = {}) : node_(&node), path_(std::move(path)) {}

  [[nodiscard]] const Json& node() const { return *node_; }
  [[nodiscard]] const std::string& path() const { return path_; }
  [[nodiscard]] bool is_null() const;

  /// The member of an object. Refuses what is no object, or has no such member.
  [[nodiscard]] JsonValue operator[](std::string_view key) const;
  [[nodiscard]] bool has(std::string_view key) const;
  /// Refuses an object with a member that is not among `known`; names the nearest known one.
  void allow_only(std::initializer_list<std::string_view> known) const;

  [[nodiscard]] const std::string& text() const;
  /// True for exactly this text.
  [[nodiscard]] bool is_text(std::string_view wanted) const;
  /// One of the words of an enum.
  template <NamedEnum E>
  [[nodiscard]] E word() const {
    const std::optional<E> value = enum_from_text<E>(text());
    if (!value) refuse_word(enum_words<E>());
    return *value;
  }
  /// A finite number, whole or not.
  [[nodiscard]] double number() const;
  /// A finite number, or not a number for null.
  [[nodiscard]] double number_or_null() const;
  /// A whole number between `low` and 2^53; 2.0 is refused.
  [[nodiscard]] Index whole(Index low = 0) const;

  /// The entries of a list.
  [[nodiscard]] std::vector<JsonValue> list() const;
  [[nodiscard]] std::vector<std::string> texts() const;
  /// A list of `size` finite numbers.
  [[nodiscard]] Vector vector(Index size) const;
  /// A list of finite numbers of any length.
  [[nodiscard]] Vector vector() const;
  /// A list of `size` numbers, not a number for null.
  [[nodiscard]] Vector vector_or_null(Index size) const;
  /// `rows` lists of `columns` finite numbers each.
  [[nodiscard]] Matrix matrix(Index rows, Index columns) const;

  /// Throws Error(Input) at this value.
  [[noreturn]] void refuse(std::string message, std::string hint = {}) const;

 private:
  [[nodiscard]] JsonValue entry(std::size_t i) const;
  void require_list_of(Index size) const;
  [[noreturn]] void refuse_word(const std::vector<std::string>& words) const;

  const Json* node_;
  std::string path_;
};

/// The number in full; null for what is not finite.
[[nodiscard]] Json json_number(double value);
[[nodiscard]] Json json_list(const VectorView& values);
/// One list a row.
[[nodiscard]] Json json_rows(const MatrixView& values);

/// The value on one line, UTF-8 as it stands, each double as the shortest text that reads back as it. Throws
/// Error(Input) if a text in it is not UTF-8.
[[nodiscard]] std::string json_text(const Json& value);

}  // namespace bandwright
