// SPDX-License-Identifier: Apache-2.0
// The keys that scripts rely on, with their types, as docs/json.md promises them.
#include <gtest/gtest.h>

#include <nlohmann/json.hpp>
#include <sstream>

#include "base/number_text.hpp"
#include "cli/program.hpp"

namespace bandwright::cli_tests {
namespace {

using Json = nlohmann::ordered_json;

enum class Kind { Text, Count, Number, NumberOrNull, Bool, TextOrNull, List, Object };

bool is_of(const Json& value, Kind kind) {
  switch (kind) {
    case Kind::Text:
      return value.is_string();
    case Kind::Count:
      return value.is_number_integer();
    case Kind::Number:
      return value.is_number_float();
    case Kind::NumberOrNull:
      return value.is_number_float() || value.is_null();
    case Kind::Bool:
      return value.is_boolean();
    case Kind::TextOrNull:
      return value.is_string() || value.is_null();
    case Kind::List:
      return value.is_array();
    case Kind::Object:
      return value.is_object();
  }
  return false;
}

void expect_keys(const Json& object, std::initializer_list<std::pair<const char*, Kind>> keys) {
  ASSERT_TRUE(object.is_object());
  for (const auto& [key, kind] : keys) {
    ASSERT_TRUE(object.contains(key)) << key;
    EXPECT_TRUE(is_of(object[key], kind)) << key << ": " << object[key].dump().substr(0, 80);
  }
}

/// What every document carries.
void expect_heading(const Json& document) {
  expect_keys(document, {{"format", Kind::Count}, {"tool", Kind::Object}, {"model", Kind::Object}});
  EXPECT_EQ(document["format"], 1);
  EXPECT_EQ(document["tool"]["name"], "bandwright");
  expect_keys(document["tool"], {{"version", Kind::Text}});
  expect_keys(document["model"], {{"file", Kind::Text}, {"id", Kind::Text}, {"title", Kind::Text}});
  EXPECT_EQ(document["model"]["file"], "model.json");
  EXPECT_EQ(document["model"]["id"].get<std::string>().size(), 64U);
}

std::vector<std::string> cells_of(const std::string& line) {
  std::vector<std::string> cells;
  std::istringstream in(line);
  for (std::string cell; std::getline(in, cell, ',');) cells.push_back(cell);
  return cells;
}

class JsonContract : public ::testing::Test {
 protected:
  void SetUp() override {
    scratch.add_tiny();
    const Outcome got = run(scratch, {"calibrate", "plan.toml", "--out", "model.json", "--json"});
    ASSERT_EQ(got.status, 0);
    calibration = Json::parse(got.out);
  }

  Json document(const std::vector<std::string>& arguments, int status) {
    const Outcome got = run(scratch, arguments);
    EXPECT_EQ(got.status, status);
    EXPECT_EQ(got.out.find('\n'), got.out.size() - 1) << "one line and one document";
    return Json::parse(got.out);
  }

  Scratch scratch;
  Json calibration;
};

TEST_F(JsonContract, Calibrate) {
  expect_heading(calibration);
  expect_keys(calibration, {{"samples", Kind::Count},
                            {"spectra", Kind::Count},
                            {"points", Kind::Count},
                            {"spectrum_ids", Kind::List},
                            {"components", Kind::List},
                            {"excluded", Kind::List},
                            {"warnings", Kind::List}});
  ASSERT_EQ(calibration["components"].size(), 2U);
  for (const Json& component : calibration["components"]) {
    expect_keys(component, {{"name", Kind::Text},
                            {"unit", Kind::Text},
                            {"kind", Kind::Text},
                            {"factors", Kind::Count},
                            {"rule", Kind::Text},
                            {"samples", Kind::Count},
                            {"rmsec", Kind::Number},
                            {"sec", Kind::Number},
                            {"rmsecv", Kind::Number},
                            {"bias_cv", Kind::Number},
                            {"r2_cv", Kind::Number},
                            {"curve", Kind::List},
                            {"reference", Kind::List},
                            {"fitted", Kind::List},
                            {"cross_validated", Kind::List},
                            {"coefficients", Kind::Object}});
    for (const Json& point : component["curve"])
      expect_keys(point, {{"factors", Kind::Count},
                          {"rmsec", Kind::Number},
                          {"rmsecv", Kind::Number},
                          {"press", Kind::Number},
                          {"bias_cv", Kind::Number}});
    expect_keys(component["coefficients"],
                {{"axis", Kind::List}, {"values", Kind::List}, {"intercept", Kind::Number}});
    EXPECT_EQ(component["coefficients"]["axis"].size(), component["coefficients"]["values"].size());
  }
  EXPECT_EQ(calibration["excluded"][0], Json({{"sample", "S13"}, {"reason", "cell leaked, rescan failed"}}));
  EXPECT_EQ(calibration["excluded"][1], Json({{"spectrum", "S05-r2"}, {"reason", "lid open"}}));
}

TEST_F(JsonContract, ListsOfValuesFollowTheSpectrumIdsAndAreNullWhereNothingWasDetermined) {
  const Json& ids = calibration["spectrum_ids"];
  EXPECT_EQ(ids.size(), calibration["spectra"].get<std::size_t>());
  const Json& water = calibration["components"][1];
  for (const char* key : {"reference", "fitted", "cross_validated"}) {
    ASSERT_EQ(water[key].size(), ids.size());
    for (std::size_t i = 0; i < ids.size(); ++i) {
      const auto id = ids[i].get<std::string>();
      const bool without = id.starts_with("S04") || id.starts_with("S17");
      EXPECT_EQ(water[key][i].is_null(), without) << key << " of " << id;
    }
  }
}

TEST_F(JsonContract, Validate) {
  const Json validation = document({"validate", "model.json", "--json"}, 1);
  expect_heading(validation);
  expect_keys(validation,
              {{"spectrum_ids", Kind::List}, {"components", Kind::List}, {"verdict", Kind::Text}});
  EXPECT_EQ(validation["verdict"], "failed");
  EXPECT_EQ(validation["components"][0]["verdict"], "passed");
  for (const Json& component : validation["components"]) {
    expect_keys(component, {{"name", Kind::Text},
                            {"unit", Kind::Text},
                            {"n", Kind::Count},
                            {"verdict", Kind::Text},
                            {"reference", Kind::List},
                            {"predicted", Kind::List}});
    for (const char* key : {"rmsep", "sep", "bias", "slope", "intercept", "r2", "rpd", "rer", "bias_t",
                            "bias_t_limit", "bias_limit", "sep_limit", "slope_low", "slope_high", "coverage"})
      expect_keys(component, {{key, Kind::Number}});
    EXPECT_EQ(component["reference"].size(), component["n"].get<std::size_t>());
    EXPECT_EQ(component["predicted"].size(), component["n"].get<std::size_t>());
  }
}

/// Two samples leave no degree of freedom for the line's residuals.
TEST_F(JsonContract, WhatIsUndefinedIsNull) {
  const std::string table = scratch.read("validation.csv");
  scratch.write("two.csv", table.substr(0, table.find("V3,")));
  const Json validation = document(
      {"validate", "model.json", "--json", "--spectra", "validation_spectra.csv", "--reference", "two.csv"},
      1);
  EXPECT_EQ(validation["components"][0]["n"], 2);
  EXPECT_TRUE(validation["components"][0]["slope_low"].is_null());
  EXPECT_TRUE(validation["components"][0]["joint_f"].is_null());
}

TEST_F(JsonContract, Predict) {
  scratch.write("flat.csv", scratch.read("new_spectra.csv") + "flat" +
                                replaced(std::string(41, 'x'), "x", ",0.5") + "\n");
  const Json prediction = document({"predict", "model.json", "flat.csv", "--json"}, 3);
  expect_heading(prediction);
  expect_keys(prediction, {{"results", Kind::List}});
  ASSERT_EQ(prediction["results"].size(), 8U);
  for (const Json& result : prediction["results"]) {
    expect_keys(result, {{"sample", Kind::Text},
                         {"spectrum", Kind::Text},
                         {"refused", Kind::TextOrNull},
                         {"components", Kind::List}});
    EXPECT_EQ(result["refused"].is_string(), result["spectrum"] == "flat");
    EXPECT_EQ(result["components"].size(), result["spectrum"] == "flat" ? 0U : 2U);
    for (const Json& component : result["components"]) {
      expect_keys(
          component,
          {{"name", Kind::Text}, {"unit", Kind::Text}, {"flags", Kind::List}, {"verdict", Kind::Text}});
      for (const char* key : {"value", "low", "high", "level", "leverage", "t2", "t2_limit", "q", "q_limit"})
        expect_keys(component, {{key, Kind::Number}});
    }
  }
  EXPECT_EQ(prediction["results"][6]["components"][0]["flags"],
            Json({"outside range", "unlike the standards", "unexplained spectrum", "saturated"}));
}

/// JSON and CSV come from two different writers of numbers: read back, both give the same doubles.
TEST_F(JsonContract, DoublesRoundTrip) {
  const Json prediction = document({"predict", "model.json", "new_spectra.csv", "--json"}, 0);
  std::istringstream csv(run(scratch, {"predict", "model.json", "new_spectra.csv", "--csv"}).out);
  std::string line;
  std::getline(csv, line);
  const std::vector<std::string> heading = cells_of(line);
  for (const Json& result : prediction["results"]) {
    for (const Json& component : result["components"]) {
      ASSERT_TRUE(std::getline(csv, line));
      const std::vector<std::string> cells = cells_of(line);
      ASSERT_EQ(cells[1], result["spectrum"].get<std::string>());
      ASSERT_EQ(cells[3], component["name"].get<std::string>());
      for (std::size_t i = 5; i < 14; ++i)
        EXPECT_EQ(parse_number(cells[i]).value(), component[heading[i]].get<double>()) << heading[i];
    }
  }
}

}  // namespace
}  // namespace bandwright::cli_tests
