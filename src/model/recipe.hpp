// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <array>
#include <optional>
#include <string>
#include <string_view>
#include <utility>
#include <variant>
#include <vector>

#include "base/matrix.hpp"
#include "base/options.hpp"
#include "pretreatment/scaling.hpp"
#include "pretreatment/step.hpp"
#include "regression/regression.hpp"
#include "resampling/factor_rules.hpp"
#include "resampling/folds.hpp"
#include "spectra/axis.hpp"
#include "spectra/spectra_set.hpp"
#include "spectra/window.hpp"

/// What a plan asks for. Each struct is one table of the plan, described once; the reader in
/// records/ fills it, nothing here knows files.

namespace bandwright {

/// A number of factors, or the rule that chooses it.
using FactorChoice = std::variant<FactorRule, Index>;

/// Standard deviation of the reported reference value, in the unit of the component:
/// sqrt(absolute^2 + (relative * value)^2); or a column of the reference table that holds it.
struct LabError {
  double absolute = 0.0;
  double relative = 0.0;
  std::string column;  ///< empty = not by column

  [[nodiscard]] bool given() const { return absolute > 0.0 || relative > 0.0 || !column.empty(); }

  template <class Visitor>
  static void describe(Visitor&& visit) {
    visit("absolute", &LabError::absolute, at_least(0),
          "standard deviation at a value of 0, in the unit of the component");
    visit("relative", &LabError::relative, at_least(0), "part in proportion to the value: 0.02 = 2 %");
  }
};

struct Pretreatment {
  std::vector<Step> steps;
  Scaling scaling = Scaling::Centre;

  template <class Visitor>
  static void describe(Visitor&& visit) {
    visit("steps", &Pretreatment::steps, any_value(), "what is done to each spectrum, in this order");
    visit("scaling", &Pretreatment::scaling, any_value(),
          "what is done to each variable before the regression");
  }
};

struct RegressionRecipe {
  RegressionKind kind = RegressionKind::Pls;
  FactorChoice factors = FactorRule::FTest;
  Index max_factors = 15;

  template <class Visitor>
  static void describe(Visitor&& visit) {
    visit("kind", &RegressionRecipe::kind, any_value(), "kind of regression");
    visit("factors", &RegressionRecipe::factors, between(1, 1000),
          "a number of factors, or the rule that chooses it");
    visit("max_factors", &RegressionRecipe::max_factors, between(1, 1000),
          "the error curve is computed up to this number, also when factors is a number");
  }
};

struct ComponentRecipe {
  std::string name;
  std::string column;  ///< of the reference table; empty = name
  std::string unit;    ///< empty = the one in the heading of the reference table
  LabError lab_error;
  std::optional<double> spec_min;
  std::optional<double> spec_max;
  std::vector<std::string> windows;  ///< names; empty = all
  std::optional<FactorChoice> factors;
  std::optional<RegressionKind> kind;
  std::optional<std::vector<Step>> steps;
  std::optional<Scaling> scaling;

  [[nodiscard]] const std::string& reference_column() const { return column.empty() ? name : column; }

  template <class Visitor>
  static void describe(Visitor&& visit) {
    visit("name", &ComponentRecipe::name, any_value(), "how results call the component");
    visit("column", &ComponentRecipe::column, any_value(),
          "column of the reference table; default: the name");
    visit("unit", &ComponentRecipe::unit, any_value(),
          "unit of the reference values; default: the one in the heading");
    visit("lab_error", &ComponentRecipe::lab_error, at_least(0),
          "intermediate precision of the reported reference value: { absolute, relative }, a number, or a "
          "column's name");
    visit("spec_min", &ComponentRecipe::spec_min, any_value(), "lower specification limit");
    visit("spec_max", &ComponentRecipe::spec_max, any_value(), "upper specification limit");
    visit("windows", &ComponentRecipe::windows, any_value(), "names of the windows used; default: all");
    visit("factors", &ComponentRecipe::factors, between(1, 1000), "overrides [regression] factors");
    visit("kind", &ComponentRecipe::kind, any_value(), "overrides [regression] kind");
    visit("steps", &ComponentRecipe::steps, any_value(), "overrides [pretreatment] steps");
    visit("scaling", &ComponentRecipe::scaling, any_value(), "overrides [pretreatment] scaling");
  }
};

/// What an interval is meant to hold.
enum class IntervalAbout {
  Reference,  ///< the value the reference method would give
  True,       ///< the true value: the reference method's error is taken off
};

template <>
struct EnumTexts<IntervalAbout> {
  static constexpr std::array entries{std::pair{IntervalAbout::Reference, std::string_view{"reference"}},
                                      std::pair{IntervalAbout::True, std::string_view{"true"}}};
};

enum class IntervalKind { Propagated };

template <>
struct EnumTexts<IntervalKind> {
  static constexpr std::array entries{std::pair{IntervalKind::Propagated, std::string_view{"propagated"}}};
};

struct IntervalRecipe {
  IntervalKind kind = IntervalKind::Propagated;
  double level = 0.95;
  IntervalAbout about = IntervalAbout::Reference;

  template <class Visitor>
  static void describe(Visitor&& visit) {
    visit("kind", &IntervalRecipe::kind, any_value(), "how the interval is made");
    visit("level", &IntervalRecipe::level, strictly_between(0.5, 1), "confidence level");
    visit("about", &IntervalRecipe::about, any_value(),
          "the value the reference method would give, or the true value");
  }
};

struct Decision {
  double risk = 0.05;  ///< one-sided risk of accepting what is outside

  template <class Visitor>
  static void describe(Visitor&& visit) {
    visit("risk", &Decision::risk, strictly_between(0, 0.5),
          "one-sided risk of accepting what is outside the specification limits");
  }
};

/// What an independent set must meet to be called "passed"; empty = not asked for.
struct AcceptCriteria {
  std::optional<double> sep_max;
  std::optional<double> rmsep_max;
  std::optional<double> bias_margin;   ///< largest |bias| allowed
  std::optional<double> coverage_min;  ///< share of reference values inside their intervals
  std::optional<Index> n_min;
  std::optional<double> range_min;  ///< share of the calibrated range that the set must span
  std::optional<double> r2_min;

  template <class Visitor>
  static void describe(Visitor&& visit) {
    visit("sep_max", &AcceptCriteria::sep_max, more_than(0),
          "largest SEP allowed, in the unit of the component");
    visit("rmsep_max", &AcceptCriteria::rmsep_max, more_than(0), "largest RMSEP allowed");
    visit("bias_margin", &AcceptCriteria::bias_margin, more_than(0), "largest bias allowed, either sign");
    visit("coverage_min", &AcceptCriteria::coverage_min, between(0, 1),
          "least share of reference values inside their intervals");
    visit("n_min", &AcceptCriteria::n_min, at_least(2), "fewest samples");
    visit("range_min", &AcceptCriteria::range_min, between(0, 1),
          "share of the calibrated range that the set must span");
    visit("r2_min", &AcceptCriteria::r2_min, between(0, 1), "least R2 (1 - SSE/SST)");
  }
};

/// Accept criteria of one component; fields given here override those for all.
struct ComponentAccept {
  std::string component;
  AcceptCriteria criteria;
};

struct AcceptRecipe {
  AcceptCriteria all;
  std::vector<ComponentAccept> per_component;

  /// The criteria for one component.
  [[nodiscard]] AcceptCriteria for_component(std::string_view name) const;
};

struct Limits {
  double max_absorbance = 2.0;  ///< above: saturated
  double significance = 0.01;   ///< chance that a good spectrum exceeds a T2 or Q limit

  template <class Visitor>
  static void describe(Visitor&& visit) {
    visit("max_absorbance", &Limits::max_absorbance, more_than(0), "a point above this counts as saturated");
    visit("significance", &Limits::significance, strictly_between(0, 0.5),
          "chance that the spectrum of a good sample exceeds its T2 limit; the same for Q");
  }
};

/// A sample or a spectrum left out of the standards, and why. One of the two ids is given.
struct Exclusion {
  std::string sample;
  std::string spectrum;
  std::string reason;

  template <class Visitor>
  static void describe(Visitor&& visit) {
    visit("sample", &Exclusion::sample, any_value(), "sample left out");
    visit("spectrum", &Exclusion::spectrum, any_value(), "or one spectrum left out");
    visit("reason", &Exclusion::reason, any_value(), "why; shown in every report");
  }
};

/// Everything a model is built from besides the data.
struct Recipe {
  std::string title;
  std::string replicate_mark;  ///< "-r": spectrum "S07-r2" belongs to sample "S07"; empty = none
  std::string group_column;    ///< samples of one group stay in one fold; empty = none
  std::vector<Exclusion> exclusions;
  std::vector<ComponentRecipe> components;  ///< at least one, names unique
  std::vector<Window> windows;              ///< empty = the whole axis
  Pretreatment pretreatment;
  RegressionRecipe regression;
  CrossValidation cross_validation;
  IntervalRecipe interval;
  Decision decision;
  AcceptRecipe accept;
  Limits limits;

  /// The component of that name. Throws Error(Internal) if the recipe has none.
  [[nodiscard]] const ComponentRecipe& component(std::string_view name) const;
};

}  // namespace bandwright
