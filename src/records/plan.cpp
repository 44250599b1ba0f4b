// SPDX-License-Identifier: Apache-2.0
#include "records/plan.hpp"

#include <fmt/format.h>

#include "base/error.hpp"
#include "records/plan_tables.hpp"
#include "records/plan_values.hpp"

namespace bandwright {
namespace {

constexpr std::size_t kMostBytes = 4U << 20U;  // a plan is a page of text; more is some other file

ErrorContext place(std::string_view path, std::size_t line, std::string hint) {
  return {.file = std::string(path), .line = line, .field = {}, .hint = std::move(hint)};
}

/// What to do about the slips that people make most; the parser's own words say what it met.
std::string toml_hint(std::string_view description) {
  const auto says = [&](std::string_view words) { return description.find(words) != std::string_view::npos; };
  if (says("redefine")) return "no key and no table may come twice";
  if (says("inline table")) return "a table in braces must stand on one line";
  if (says("could not determine value type")) return "text must stand in quotes";
  if (says("utf-8")) return "save the file as UTF-8 text";
  return "text must stand in quotes, every bracket must be closed";
}

toml::table parse_toml(std::string_view text, std::string_view path) {
  if (text.size() > kMostBytes) {
    throw Error(ErrorKind::Usage, "the file is larger than 4 MB, which no plan is",
                place(path, 0, "is this the right file?"));
  }
  try {
    return toml::parse(text, path);
  } catch (const toml::parse_error& error) {
    constexpr std::string_view kPrefix = "Error while parsing ";
    std::string_view description = error.description();
    if (description.starts_with(kPrefix)) description.remove_prefix(kPrefix.size());
    throw Error(ErrorKind::Usage, fmt::format("not TOML: {}", description),
                place(path, error.source().begin.line, toml_hint(description)));
  }
}

/// Comes before all other checks: a newer grammar has keys that would look unknown here.
void check_format(const TomlTable& top) {
  const toml::node* node = top.find("format");
  if (node == nullptr) return;
  Index format = 0;
  read_value(TomlValue{top, "format", "format", *node}, at_least(1), format);
  if (format > kPlanFormat) {
    top.refuse_key("format", fmt::format("{} was written for a newer version of this program", format),
                   fmt::format("this version reads plans up to format {}", kPlanFormat));
  }
}

void read_title(const TomlTable& top, Plan& plan) {
  if (const toml::node* node = top.find("title"))
    read_value(TomlValue{top, "title", "title", *node}, any_value(), plan.recipe.title);
}

}  // namespace

Plan parse_plan(std::string_view text, std::string_view path) {
  const toml::table root = parse_toml(text, path);
  const TomlTable top{path, root, {}, {}};
  check_format(top);
  refuse_unknown_keys(top, top_level_keys());

  Plan plan;
  plan.path = path;
  plan.text = text;
  read_title(top, plan);
  read_standards(top, plan);
  read_exclusions(top, plan);
  read_windows(top, plan);
  read_pretreatment(top, plan);
  read_regression(top, plan);
  read_components(top, plan);
  read_cross_validation(top, plan);
  read_interval(top, plan);
  read_decision(top, plan);
  read_limits(top, plan);
  read_validation(top, plan);
  return plan;
}

}  // namespace bandwright
