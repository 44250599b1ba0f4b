// SPDX-License-Identifier: Apache-2.0
#include "records/json.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <limits>
#include <nlohmann/json.hpp>
#include <set>
#include <utility>

#include "base/error.hpp"
#include "base/number_text.hpp"
#include "base/options.hpp"

namespace bandwright {
namespace {

constexpr double kNotANumber = std::numeric_limits<double>::quiet_NaN();
constexpr std::size_t kLongestQuote = 60;

std::string quoted_short(std::string_view text) {
  if (text.size() <= kLongestQuote) return fmt::format("\"{}\"", text);
  return fmt::format("\"{}...\"", text.substr(0, kLongestQuote));
}

/// What stands there, for "must be a number, not ...".
std::string described(const Json& node) {
  if (node.is_string()) return quoted_short(node.get_ref<const std::string&>());
  if (node.is_array()) return fmt::format("a list of {}", node.size());
  if (node.is_object()) return "an object";
  return node.dump();
}

/// Follows the parser: refuses what the library would let pass.
class StrictParse {
 public:
  bool operator()(int depth, Json::parse_event_t event, const Json& value) {
    using Event = Json::parse_event_t;
    if ((event == Event::object_start || event == Event::array_start) && depth >= kJsonDepth)
      refuse(fmt::format("nested more than {} levels deep", kJsonDepth));
    if (event == Event::object_start) open_.emplace_back();
    if (event == Event::object_end) open_.pop_back();
    if (event == Event::key) take_key(value.get_ref<const std::string&>());
    return true;
  }

 private:
  struct OpenObject {
    std::set<std::string> keys;
    std::string latest;
  };

  void take_key(const std::string& key) {
    OpenObject& object = open_.back();
    object.latest = key;
    if (!object.keys.insert(key).second) refuse("the key comes twice");
    if (object.keys.size() > kJsonMembers)
      refuse(fmt::format("an object with more than {} members", kJsonMembers));
  }

  [[noreturn]] void refuse(std::string message) const {
    std::string path;
    for (const OpenObject& object : open_) path += (path.empty() ? "" : ".") + object.latest;
    throw Error(ErrorKind::Input, std::move(message), {.file = {}, .line = 0, .field = path, .hint = {}});
  }

  std::vector<OpenObject> open_;
};

/// A text, a whole number, true, false or null, by the library; its doubles are not always the shortest.
std::string scalar_text(const Json& value) {
  try {
    return value.dump();
  } catch (const Json::type_error&) {
    throw Error(ErrorKind::Input, "a text is not UTF-8 and cannot be written");
  }
}

/// The shortest text that reads back as the same double, and as a double: with a point or an exponent.
std::string double_text(double value) {
  std::string text = exact_text(value);
  return text.find_first_of(".e") == std::string::npos ? text + ".0" : text;
}

/// Members or entries between brackets, with commas.
template <class Range, class Append>
void append_all(std::string& out, char open, char close, const Range& range, Append&& append) {
  out += open;
  bool first = true;
  for (const auto& item : range) {
    if (!std::exchange(first, false)) out += ',';
    append(item);
  }
  out += close;
}

void append_text(std::string& out, const Json& value) {
  if (value.is_object()) {
    append_all(out, '{', '}', value.items(), [&](const auto& member) {
      out += scalar_text(Json(member.key())) + ":";
      append_text(out, member.value());
    });
  } else if (value.is_array()) {
    append_all(out, '[', ']', value, [&](const Json& entry) { append_text(out, entry); });
  } else if (value.is_number_float()) {
    out += double_text(value.get<double>());
  } else {
    out += scalar_text(value);
  }
}

}  // namespace

Json parse_json(std::string_view text, std::string_view file) {
  const ErrorContext place{.file = std::string(file), .line = 0, .field = {}, .hint = {}};
  try {
    return Json::parse(text, StrictParse{});
  } catch (const Error& error) {
    throw error.within(place);
  } catch (const Json::parse_error& error) {
    const std::string_view read = text.substr(0, error.byte == 0 ? 0 : error.byte - 1);
    const std::size_t line_start = read.rfind('\n') + 1;  // npos + 1 = 0
    const auto line = static_cast<std::size_t>(1 + std::count(read.begin(), read.end(), '\n'));
    throw Error(ErrorKind::Input, fmt::format("not valid JSON at column {}", read.size() - line_start + 1),
                {.file = std::string(file), .line = line, .field = {}, .hint = {}});
  } catch (const Json::exception&) {
    throw Error(ErrorKind::Input, "holds a number beyond the range of a double", place);
  }
}

bool JsonValue::is_null() const { return node_->is_null(); }

bool JsonValue::has(std::string_view key) const { return node_->is_object() && node_->contains(key); }

JsonValue JsonValue::operator[](std::string_view key) const {
  if (!node_->is_object()) refuse(fmt::format("must be an object, not {}", described(*node_)));
  const auto found = node_->find(key);
  std::string path = fmt::format("{}{}{}", path_, path_.empty() ? "" : ".", key);
  if (found == node_->end())
    throw Error(ErrorKind::Input, "missing", {.file = {}, .line = 0, .field = path, .hint = {}});
  return JsonValue(*found, std::move(path));
}

void JsonValue::allow_only(std::initializer_list<std::string_view> known) const {
  if (!node_->is_object()) refuse(fmt::format("must be an object, not {}", described(*node_)));
  for (const auto& [key, value] : node_->items()) {
    if (std::find(known.begin(), known.end(), key) != known.end()) continue;
    const std::vector<std::string> words(known.begin(), known.end());
    const std::string nearest = nearest_word(key, words);
    refuse(fmt::format("the member {} is not known", quoted_short(key)),
           nearest.empty() ? std::string{} : fmt::format("did you mean \"{}\"?", nearest));
  }
}

const std::string& JsonValue::text() const {
  if (!node_->is_string()) refuse(fmt::format("must be a text, not {}", described(*node_)));
  return node_->get_ref<const std::string&>();
}

bool JsonValue::is_text(std::string_view wanted) const { return node_->is_string() && text() == wanted; }

void JsonValue::refuse_word(const std::vector<std::string>& words) const {
  refuse(fmt::format("must be {}, not {}", alternatives_text(words), described(*node_)));
}

double JsonValue::number() const {
  if (!node_->is_number()) refuse(fmt::format("must be a number, not {}", described(*node_)));
  return node_->get<double>();
}

double JsonValue::number_or_null() const {
  if (is_null()) return kNotANumber;
  if (!node_->is_number()) refuse(fmt::format("must be a number or null, not {}", described(*node_)));
  return node_->get<double>();
}

Index JsonValue::whole(Index low) const {
  constexpr std::int64_t kLargest = std::int64_t{1} << 53;
  const auto fits = [&] {
    if (!node_->is_number_integer()) return false;
    if (node_->is_number_unsigned() && node_->get<std::uint64_t>() > static_cast<std::uint64_t>(kLargest))
      return false;
    const auto value = node_->get<std::int64_t>();
    return value >= low && value <= kLargest;
  };
  if (!fits()) refuse(fmt::format("must be a whole number of at least {}, not {}", low, described(*node_)));
  return static_cast<Index>(node_->get<std::int64_t>());
}

std::vector<JsonValue> JsonValue::list() const {
  if (!node_->is_array()) refuse(fmt::format("must be a list, not {}", described(*node_)));
  std::vector<JsonValue> entries;
  entries.reserve(node_->size());
  for (std::size_t i = 0; i < node_->size(); ++i) entries.push_back(entry(i));
  return entries;
}

std::vector<std::string> JsonValue::texts() const {
  std::vector<std::string> out;
  for (const JsonValue& entry : list()) out.push_back(entry.text());
  return out;
}

void JsonValue::require_list_of(Index size) const {
  if (!node_->is_array()) refuse(fmt::format("must be a list of {}, not {}", size, described(*node_)));
  if (static_cast<Index>(node_->size()) != size)
    refuse(fmt::format("must be a list of {}, not of {}", size, node_->size()));
}

JsonValue JsonValue::entry(std::size_t i) const {
  return JsonValue((*node_)[i], fmt::format("{}[{}]", path_, i));
}

Vector JsonValue::vector() const {
  if (!node_->is_array()) refuse(fmt::format("must be a list, not {}", described(*node_)));
  return vector(static_cast<Index>(node_->size()));
}

Vector JsonValue::vector(Index size) const {
  require_list_of(size);
  Vector out(size);
  for (std::size_t i = 0; i < node_->size(); ++i) {
    const Json& node = (*node_)[i];
    // The path of an entry is only made where it is needed: matrices are large.
    out[static_cast<Index>(i)] = node.is_number() ? node.get<double>() : entry(i).number();
  }
  return out;
}

Vector JsonValue::vector_or_null(Index size) const {
  require_list_of(size);
  Vector out(size);
  for (std::size_t i = 0; i < node_->size(); ++i) out[static_cast<Index>(i)] = entry(i).number_or_null();
  return out;
}

Matrix JsonValue::matrix(Index rows, Index columns) const {
  require_list_of(rows);
  Matrix out(rows, columns);
  for (std::size_t i = 0; i < node_->size(); ++i)
    out.row(static_cast<Index>(i)) = entry(i).vector(columns).transpose();
  return out;
}

void JsonValue::refuse(std::string message, std::string hint) const {
  throw Error(ErrorKind::Input, std::move(message),
              {.file = {}, .line = 0, .field = path_, .hint = std::move(hint)});
}

Json json_number(double value) { return std::isfinite(value) ? Json(value) : Json(nullptr); }

Json json_list(const VectorView& values) {
  Json out = Json::array();
  for (Index i = 0; i < values.size(); ++i) out.push_back(json_number(values[i]));
  return out;
}

Json json_rows(const MatrixView& values) {
  Json out = Json::array();
  for (Index i = 0; i < values.rows(); ++i) out.push_back(json_list(values.row(i).transpose()));
  return out;
}

std::string json_text(const Json& value) {
  std::string out;
  append_text(out, value);
  return out;
}

}  // namespace bandwright
