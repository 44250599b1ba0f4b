// SPDX-License-Identifier: Apache-2.0
#include <fmt/format.h>

#include <string>
#include <variant>

#include "base/number_text.hpp"
#include "records/not_available.hpp"
#include "records/plan.hpp"
#include "records/plan_values.hpp"

/// The option tables of docs/plan.md, made from `describe`.

namespace bandwright {
namespace {

std::string code(std::string_view text) { return text.empty() ? std::string{} : fmt::format("`{}`", text); }

/// What a member of type T may hold. `value` gives only the type.
std::string kind_text(Index, std::string_view, std::string_view) { return "whole number"; }
std::string kind_text(double, std::string_view, std::string_view) { return "number"; }
std::string kind_text(const std::string&, std::string_view, std::string_view) { return "text"; }
std::string kind_text(const Stretch&, std::string_view, std::string_view) { return "`[from, to]`"; }
std::string kind_text(const Step&, std::string_view, std::string_view) { return "steps"; }
std::string kind_text(const LabError&, std::string_view, std::string_view) { return "number, table or text"; }

template <NamedEnum E>
std::string kind_text(E, std::string_view table, std::string_view key) {
  std::string text;
  for (const std::string& word : enum_words<E>()) {
    if (find_not_available(table, key, word) == nullptr)
      text += fmt::format("{}`\"{}\"`", text.empty() ? "" : ", ", word);
  }
  return text;
}

std::string kind_text(const FactorChoice&, std::string_view table, std::string_view key) {
  return "whole number, " + kind_text(FactorRule{}, table, key);
}

template <class T>
std::string kind_text(const std::vector<T>&, std::string_view table, std::string_view key) {
  return "list of " + kind_text(T{}, table, key);
}

template <class T>
std::string kind_text(const std::optional<T>&, std::string_view table, std::string_view key) {
  return kind_text(T{}, table, key);
}

/// The value as it would be written in a plan; empty = off.
std::string default_text(Index value) { return fmt::format("{}", value); }
std::string default_text(double value) { return exact_text(value); }
std::string default_text(const std::string& value) {
  return value.empty() ? "" : fmt::format("\"{}\"", value);
}
std::string default_text(const LabError&) { return {}; }

template <NamedEnum E>
std::string default_text(E value) {
  return fmt::format("\"{}\"", text_of(value));
}

std::string default_text(const FactorChoice& value) {
  return std::visit([](const auto& choice) { return default_text(choice); }, value);
}

template <class T>
std::string default_text(const std::vector<T>&) {
  return {};  // every list of a plan is empty until something is put into it
}

template <class T>
std::string default_text(const std::optional<T>& value) {
  return value ? default_text(*value) : std::string{};
}

template <class Options>
std::vector<OptionLine> option_lines(std::string_view table, const Options& defaults) {
  std::vector<OptionLine> lines;
  Options::describe([&](std::string_view name, auto member, const Bounds& bounds, std::string_view help) {
    const bool required = is_required<Options>(name);
    lines.push_back({.name = std::string(name),
                     .kind = kind_text(defaults.*member, table, name),
                     .default_value = required ? "must be given" : code(default_text(defaults.*member)),
                     .rule = bounds.text(),
                     .help = std::string(help)});
  });
  return lines;
}

/// One heading and one table. `table` is the name in the not_available list.
template <class Options>
void append_table(std::string& text, std::string_view title, std::string_view table,
                  const Options& defaults = {}) {
  text += fmt::format("### {}\n\n", title);
  const std::vector<OptionLine> lines = option_lines(table, defaults);
  if (lines.empty()) {
    text += "No options.\n\n";
    return;
  }
  text += "| key | value | default | rule | meaning |\n|---|---|---|---|---|\n";
  for (const OptionLine& line : lines) {
    text += fmt::format("| `{}` | {} | {} | {} | {} |\n", line.name, line.kind, line.default_value, line.rule,
                        line.help);
  }
  text += "\n";
}

std::string not_available_text(const NotAvailable& entry) {
  const auto [table, other] = entry.tables;
  std::string where = table.empty()     ? fmt::format("the table `{}`", entry.key)
                      : table == "step" ? fmt::format("step `\"{}\"`", entry.word)
                                        : fmt::format("`{}`", entry.key);
  if (table.empty() || table == "step") return where;
  const std::string places =
      other == table ? fmt::format("`[{}]`", table) : fmt::format("`{}` and `{}`", table, other);
  return fmt::format("{} {}{}", places, where,
                     entry.word.empty() ? "" : fmt::format(" = `\"{}\"`", entry.word));
}

}  // namespace

std::string plan_reference_markdown() {
  std::string text;
  append_table<SetFiles>(text, "`[standards]` and `[validation]`", "standards");
  append_table<Exclusion>(text, "`[[exclude]]`", "exclude");
  append_table<ComponentRecipe>(text, "`[[component]]`", "component");
  append_table<LabError>(text, "`lab_error` of a component, written as a table", "lab_error");
  append_table<Window>(text, "`[[window]]`", "window");
  append_table<Pretreatment>(text, "`[pretreatment]`", "pretreatment");
  for (const std::string& name : step_names()) {
    std::visit(
        [&](const auto& options) { append_table(text, fmt::format("Step `\"{}\"`", name), "step", options); },
        step_with_defaults(name));
  }
  append_table<RegressionRecipe>(text, "`[regression]`", "regression");
  append_table<CrossValidation>(text, "`[cross_validation]`", "cross_validation");
  append_table<IntervalRecipe>(text, "`[interval]`", "interval");
  append_table<Decision>(text, "`[decision]`", "decision");
  append_table<AcceptCriteria>(text, "`[validation.accept]`, and each entry of its `per_component`",
                               "accept");
  append_table<Limits>(text, "`[limits]`", "limits");
  text += "### Known, but not available in this version\n\n";
  for (const NotAvailable& entry : not_available_list())
    text += fmt::format("- {}\n", not_available_text(entry));
  return text;
}

}  // namespace bandwright
