// SPDX-License-Identifier: Apache-2.0
#include "records/plan_values.hpp"

#include <fmt/format.h>

#include <string>
#include <variant>

#include "base/error.hpp"

namespace bandwright {
namespace {

/// The table behind an entry that is written in braces, for its own keys.
TomlTable inner_table(const TomlValue& value, std::string name, std::string heading) {
  return {value.table.path, *value.node.as_table(), std::move(name), std::move(heading), true};
}

/// The rules between the options of one step, which its own room knows (`check_step`). The step
/// knows the key at fault, this place knows the line.
template <class StepOptions>
void check_combination(const TomlTable& table, const StepOptions& options) {
  if constexpr (requires { check_step(options); }) {
    try {
      check_step(options);
    } catch (const Error& error) {
      const std::string& key = error.context().field;
      if (key.empty()) table.refuse(error.message(), error.context().hint);
      table.refuse_key(key, error.message(), error.context().hint);
    }
  }
}

Step read_step_table(const TomlValue& value) {
  const TomlTable unnamed = inner_table(value, "step", value.field);
  const toml::node* name_node = unnamed.find("step");
  if (name_node == nullptr) unnamed.refuse_key("step", "missing", "the name of the step");
  const std::string name = read_word({unnamed, "step", unnamed.field("step"), *name_node}, step_names());
  const TomlTable table = inner_table(value, "step", fmt::format("{} \"{}\"", value.field, name));
  Step step = step_with_defaults(name);
  std::visit(
      [&](auto& options) {
        read_options(table, options, {"step"});
        check_combination(table, options);
      },
      step);
  return step;
}

}  // namespace

void read_value(const TomlValue& value, const Bounds& bounds, FactorChoice& out) {
  if (value.node.is_integer()) {
    read_value(value, bounds, out.emplace<Index>());
  } else if (value.node.is_string()) {
    read_value(value, any_value(), out.emplace<FactorRule>());
  } else {
    value.refuse_type("a whole number or one of " + alternatives_text(enum_words<FactorRule>()));
  }
}

void read_value(const TomlValue& value, const Bounds& bounds, LabError& out) {
  out = {};
  if (value.node.is_string()) {
    read_value(value, any_value(), out.column);
    if (out.column.empty()) value.refuse("must not be empty", "the name of a column of the reference table");
    return;
  }
  if (value.node.is_table()) {
    read_options(inner_table(value, "lab_error", value.field), out);
  } else if (value.node.is_number()) {
    read_value(value, bounds, out.absolute);
  } else {
    value.refuse_type("a number, a table { absolute, relative } or the name of a column");
  }
  if (!out.given()) value.refuse("must be more than 0", "leave the key out if the error is not known");
}

void read_value(const TomlValue& value, const Bounds& bounds, Stretch& out) {
  const toml::array* ends = value.node.as_array();
  if (ends == nullptr) value.refuse_type("a stretch [from, to]", "a list of stretches: [[from, to], ...]");
  if (ends->size() != 2)
    value.refuse(fmt::format("must be a stretch [from, to], not a list of {}", ends->size()));
  read_value(value.entry(0, *ends->get(0)), bounds, out.from);
  read_value(value.entry(1, *ends->get(1)), bounds, out.to);
}

void read_value(const TomlValue& value, const Bounds&, Step& out) {
  if (value.node.is_table()) {
    out = read_step_table(value);
  } else if (value.node.is_string()) {
    const TomlTable table{value.table.path, value.table.keys, "step", {}};
    out = step_with_defaults(read_word({table, "step", value.field, value.node}, step_names()));
  } else {
    value.refuse_type("the name of a step or a table { step = \"...\" }");
  }
}

}  // namespace bandwright
