// SPDX-License-Identifier: Apache-2.0
#include "records/plan_tables.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <map>
#include <optional>
#include <set>
#include <string>
#include <variant>

#include "base/error.hpp"
#include "records/plan_values.hpp"

namespace bandwright {
namespace {

/// The table `name` of `parent`, called `[heading]`; empty if the plan has none.
std::optional<TomlTable> find_table(const TomlTable& parent, std::string_view key, std::string name,
                                    std::string heading) {
  const toml::node* node = parent.find(key);
  if (node == nullptr) return std::nullopt;
  const TomlValue value{parent, key, heading, *node};
  if (node->is_array_of_tables())
    value.refuse("may come only once", "write it in single brackets, " + heading);
  if (!node->is_table()) value.refuse_type("a table", "write it as " + heading);
  return TomlTable{parent.path, *node->as_table(), std::move(name), std::move(heading)};
}

std::optional<TomlTable> find_table(const TomlTable& top, std::string name) {
  std::string heading = fmt::format("[{}]", name);
  return find_table(top, name, name, std::move(heading));
}

/// Reads a table that stands for itself; empty if the plan does not have it.
template <class Options>
std::optional<TomlTable> read_table(const TomlTable& top, std::string name, Options& options) {
  auto table = find_table(top, std::move(name));
  if (table) read_options(*table, options);
  return table;
}

/// The entries of a list of tables, each called `[[component]] 2 "water"` after the text under
/// `title_key`. `heading` is "[[component]]" or "[validation.accept] per_component".
std::vector<TomlTable> find_entries(const TomlTable& parent, std::string_view key, std::string_view name,
                                    const std::string& heading, std::string_view title_key) {
  std::vector<TomlTable> entries;
  const toml::node* node = parent.find(key);
  if (node == nullptr) return entries;
  const TomlValue value{parent, key, heading, *node};
  if (!node->is_array())
    value.refuse_type("a list of tables", fmt::format("write [[{}]] above each of them", name));
  for (const toml::node& entry_node : read_list(value)) {
    const TomlValue entry = value.entry(entries.size(), entry_node);
    if (!entry_node.is_table()) entry.refuse_type("a table");
    const toml::table& keys = *entry_node.as_table();
    const auto title = keys[title_key].value<std::string_view>();
    entries.push_back({parent.path, keys, std::string(name),
                       title ? fmt::format("{} {}", entry.field, quoted(*title)) : entry.field, true});
  }
  return entries;
}

void require_text(const TomlTable& table, std::string_view key, const std::string& text) {
  if (table.has(key) && text.empty()) table.refuse_key(key, "must not be empty");
}

/// Reads a list of tables whose entries are told apart by their name.
template <class Options>
std::vector<TomlTable> read_named_entries(const TomlTable& top, const std::string& name,
                                          std::vector<Options>& options, std::vector<std::size_t>& lines) {
  std::vector<TomlTable> entries = find_entries(top, name, name, fmt::format("[[{}]]", name), "name");
  std::map<std::string, std::size_t, std::less<>> line_of_name;
  for (const TomlTable& entry : entries) {
    Options& one = options.emplace_back();
    read_options(entry, one);
    require_text(entry, "name", one.name);
    const auto [first, is_new] = line_of_name.emplace(one.name, entry.line());
    if (!is_new) {
      entry.refuse_key("name",
                       fmt::format("{} is taken by the {} of line {}", quoted(one.name), name, first->second),
                       "give each a name of its own");
    }
    lines.push_back(entry.line());
  }
  return entries;
}

void check_set_files(const TomlTable& table, const SetFiles& files) {
  if (files.spectra.empty()) table.refuse_key("spectra", "must name at least one file");
  const TomlValue list{table, "spectra", table.field("spectra"), *table.find("spectra")};
  for (std::size_t i = 0; i < files.spectra.size(); ++i)
    if (files.spectra[i].empty()) list.entry(i, *read_list(list).get(i)).refuse("must not be empty");
  require_text(table, "reference", files.reference);
}

void check_window(const TomlTable& table, const Window& window) {
  const auto [low, high] = std::minmax(window.from, window.to);
  if (low == high)
    table.refuse_key("to", fmt::format("{} is both ends of the window", window.to), "a window needs a width");
  if (window.except.empty()) return;
  const TomlValue list{table, "except", table.field("except"), *table.find("except")};
  for (std::size_t i = 0; i < window.except.size(); ++i) {
    const auto [from, to] = window.except[i];
    if (std::min(from, to) < low || std::max(from, to) > high) {
      list.entry(i, *read_list(list).get(i))
          .refuse(fmt::format("{} to {} is not inside the window, which goes from {} to {}", from, to,
                              window.from, window.to));
    }
  }
}

void check_factors(const TomlTable& table, const FactorChoice& factors, Index max_factors) {
  if (const Index* number = std::get_if<Index>(&factors); number != nullptr && *number > max_factors) {
    table.refuse_key("factors",
                     fmt::format("{} is more than [regression] max_factors, {}", *number, max_factors),
                     "ask for fewer factors or raise max_factors");
  }
}

/// The names of windows or components.
template <class Named>
std::vector<std::string> names_of(const std::vector<Named>& list) {
  std::vector<std::string> names;
  names.reserve(list.size());
  for (const Named& one : list) names.push_back(one.name);
  return names;
}

void check_component_windows(const TomlTable& table, const ComponentRecipe& component, const Recipe& recipe,
                             const std::set<std::string>& window_names) {
  if (!table.has("windows")) return;
  const TomlValue list{table, "windows", table.field("windows"), *table.find("windows")};
  if (component.windows.empty())
    list.refuse("must name at least one window", "leave the key out to use all windows");
  std::set<std::string> seen;
  for (std::size_t i = 0; i < component.windows.size(); ++i) {
    const std::string& name = component.windows[i];
    const TomlValue entry = list.entry(i, *read_list(list).get(i));
    if (!window_names.contains(name)) {
      entry.refuse(
          fmt::format("no window is called {}", quoted(name)),
          recipe.windows.empty() ? "the plan has no [[window]]" : suggestion(name, names_of(recipe.windows)));
    }
    if (!seen.insert(name).second) entry.refuse(fmt::format("{} stands here twice", quoted(name)));
  }
}

void check_component(const TomlTable& table, const ComponentRecipe& component, const Recipe& recipe,
                     const std::set<std::string>& window_names) {
  if (component.spec_min && component.spec_max && *component.spec_min >= *component.spec_max) {
    table.refuse_key("spec_min",
                     fmt::format("{} is not below spec_max, {}", *component.spec_min, *component.spec_max));
  }
  if (component.factors) check_factors(table, *component.factors, recipe.regression.max_factors);
  check_component_windows(table, component, recipe, window_names);
}

/// Does the option of that name have its default value?
bool is_default(const CrossValidation& asked, std::string_view key) {
  const CrossValidation defaults;
  bool same = true;
  CrossValidation::describe([&](std::string_view name, auto member, const Bounds&, std::string_view) {
    if (name == key) same = asked.*member == defaults.*member;
  });
  return same;
}

/// Keys that mean something only with some schemes are refused with the others: who writes
/// `folds = 5` beside leave-one-out expects five folds. A default written out asks for nothing.
void check_scheme_keys(const TomlTable& table, const CrossValidation& asked, FoldScheme scheme) {
  using enum FoldScheme;
  const std::array<std::pair<std::string_view, std::vector<FoldScheme>>, 4> rules{{
      {"folds", {Blocks, Interleaved, Random, MonteCarlo}},
      {"repeats", {Random, MonteCarlo}},
      {"seed", {Random, MonteCarlo}},
      {"share_left_out", {MonteCarlo}},
  }};
  for (const auto& [key, schemes] : rules) {
    if (!table.has(key) || is_default(asked, key) ||
        std::find(schemes.begin(), schemes.end(), scheme) != schemes.end())
      continue;
    std::string names;
    for (const FoldScheme one : schemes)
      names += fmt::format("{}{}", names.empty() ? "" : ", ", text_of(one));
    table.refuse_key(key,
                     fmt::format("only applies to {}; the scheme is {}{}", names, text_of(scheme),
                                 table.has("scheme") ? "" : " by default"),
                     "remove the key or choose another scheme");
  }
}

void read_accept(const TomlTable& table, Recipe& recipe) {
  const std::vector<std::string> criteria = described_keys<AcceptCriteria>();
  const auto holds_criterion = [&](const TomlTable& one) {
    return std::any_of(criteria.begin(), criteria.end(),
                       [&](const std::string& key) { return one.has(key); });
  };
  read_options(table, recipe.accept.all, {"per_component"});
  const std::vector<std::string> names = names_of(recipe.components);
  std::set<std::string> seen;
  for (const TomlTable& entry : find_entries(table, "per_component", "validation.accept.per_component",
                                             table.field("per_component"), "component")) {
    ComponentAccept& one = recipe.accept.per_component.emplace_back();
    read_options(entry, one.criteria, {"component"});
    if (!entry.has("component")) entry.refuse_key("component", "missing", "the name of a component");
    read_value(TomlValue{entry, "component", entry.field("component"), *entry.find("component")}, any_value(),
               one.component);
    if (std::find(names.begin(), names.end(), one.component) == names.end())
      entry.refuse_key("component", fmt::format("no component is called {}", quoted(one.component)),
                       suggestion(one.component, names));
    if (!seen.insert(one.component).second)
      entry.refuse_key("component", fmt::format("{} has an entry already", quoted(one.component)));
    if (!holds_criterion(entry)) entry.refuse("sets no criterion", suggestion({}, criteria));
  }
  if (!holds_criterion(table) && recipe.accept.per_component.empty())
    table.refuse("sets no criterion", suggestion({}, criteria));
}

}  // namespace

const std::vector<std::string>& top_level_keys() {
  static const std::vector<std::string> keys{
      "format",       "title",      "standards",        "exclude",  "validation", "component", "window",
      "pretreatment", "regression", "cross_validation", "interval", "decision",   "limits"};
  return keys;
}

void read_standards(const TomlTable& top, Plan& plan) {
  constexpr const char* kStandardsHint =
      "it names the files of the standards: spectra = [\"*.csv\"] and reference = \"values.csv\"";
  const auto table = find_table(top, "standards");
  if (!table) {
    throw Error(ErrorKind::Usage, "missing",
                {.file = std::string(top.path), .line = 0, .field = "[standards]", .hint = kStandardsHint});
  }
  read_options(*table, plan.standards);
  check_set_files(*table, plan.standards);
  plan.standards.line = table->line();
  plan.recipe.replicate_mark = plan.standards.replicate;
  plan.recipe.group_column = plan.standards.group;
}

void read_exclusions(const TomlTable& top, Plan& plan) {
  std::set<std::string> seen;
  for (const TomlTable& entry : find_entries(top, "exclude", "exclude", "[[exclude]]", "sample")) {
    Exclusion& one = plan.recipe.exclusions.emplace_back();
    read_options(entry, one);
    const bool by_sample = entry.has("sample");
    if (by_sample && entry.has("spectrum"))
      entry.refuse_key("spectrum", "stands beside sample", "give one of the two in each [[exclude]]");
    if (!by_sample && !entry.has("spectrum"))
      entry.refuse("names neither sample nor spectrum", "give one of the two");
    require_text(entry, "sample", one.sample);
    require_text(entry, "spectrum", one.spectrum);
    require_text(entry, "reason", one.reason);
    const std::string_view key = by_sample ? "sample" : "spectrum";
    const std::string& id = by_sample ? one.sample : one.spectrum;
    if (!seen.insert(fmt::format("{} {}", key, id)).second)
      entry.refuse_key(key, fmt::format("{} is excluded already", quoted(id)));
    plan.exclusion_lines.push_back(entry.line());
  }
}

void read_windows(const TomlTable& top, Plan& plan) {
  const auto entries = read_named_entries(top, "window", plan.recipe.windows, plan.window_lines);
  for (std::size_t i = 0; i < entries.size(); ++i) check_window(entries[i], plan.recipe.windows[i]);
}

void read_pretreatment(const TomlTable& top, Plan& plan) {
  read_table(top, "pretreatment", plan.recipe.pretreatment);
}

void read_regression(const TomlTable& top, Plan& plan) {
  RegressionRecipe& regression = plan.recipe.regression;
  if (const auto table = read_table(top, "regression", regression))
    check_factors(*table, regression.factors, regression.max_factors);
}

void read_components(const TomlTable& top, Plan& plan) {
  Recipe& recipe = plan.recipe;
  const auto entries = read_named_entries(top, "component", recipe.components, plan.component_lines);
  if (entries.empty()) {
    throw Error(ErrorKind::Usage, "missing",
                {.file = std::string(top.path),
                 .line = 0,
                 .field = "[[component]]",
                 .hint = "a plan needs at least one component, with its name"});
  }
  const std::vector<std::string> names = names_of(recipe.windows);
  const std::set<std::string> window_names(names.begin(), names.end());
  for (std::size_t i = 0; i < entries.size(); ++i)
    check_component(entries[i], recipe.components[i], recipe, window_names);
}

void read_cross_validation(const TomlTable& top, Plan& plan) {
  CrossValidation& asked = plan.recipe.cross_validation;
  const auto table = read_table(top, "cross_validation", asked);
  if (!table) return;
  const bool has_groups = !plan.standards.group.empty();
  const FoldScheme scheme = scheme_in_force(asked, has_groups);
  if (scheme == FoldScheme::LeaveGroupOut && !has_groups) {
    table->refuse_key("scheme", "leave-group-out needs to know the groups",
                      "[standards] group names the column of the reference table that holds them");
  }
  check_scheme_keys(*table, asked, scheme);
}

void read_interval(const TomlTable& top, Plan& plan) {
  const auto table = read_table(top, "interval", plan.recipe.interval);
  if (!table || plan.recipe.interval.about != IntervalAbout::True) return;
  std::string lacking;
  for (const ComponentRecipe& component : plan.recipe.components) {
    if (!component.lab_error.given())
      lacking += fmt::format("{}{}", lacking.empty() ? "" : ", ", quoted(component.name));
  }
  if (!lacking.empty())
    table->refuse_key("about",
                      "\"true\" needs the lab_error of every component; it is missing for " + lacking,
                      "add lab_error, or write about = \"reference\"");
  for (const ComponentRecipe& component : plan.recipe.components) {
    if (!component.lab_error.column.empty())
      table->refuse_key(
          "about",
          fmt::format("\"true\" needs lab_error as numbers; for {} it is a column, which says nothing of "
                      "new samples",
                      quoted(component.name)),
          "write lab_error = { absolute = ..., relative = ... }");
  }
}

void read_decision(const TomlTable& top, Plan& plan) { read_table(top, "decision", plan.recipe.decision); }

void read_limits(const TomlTable& top, Plan& plan) { read_table(top, "limits", plan.recipe.limits); }

void read_validation(const TomlTable& top, Plan& plan) {
  const auto table = find_table(top, "validation");
  if (!table) return;
  const auto accept = find_table(*table, "accept", "accept", "[validation.accept]");
  if (accept) read_accept(*accept, plan.recipe);
  if (accept && table->keys.size() == 1) return;  // criteria alone: the set is named when it is tested

  SetFiles files;
  files.replicate = plan.standards.replicate;
  files.axis = plan.standards.axis;
  files.ordinate = plan.standards.ordinate;
  files.line = table->line();
  read_options(*table, files, {"accept"});
  check_set_files(*table, files);
  plan.validation = std::move(files);
}

}  // namespace bandwright
