// SPDX-License-Identifier: Apache-2.0
#include "model/standards.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <limits>

#include "base/error.hpp"
#include "support/error_text.hpp"

namespace bandwright {
namespace {

using testing::ElementsAre;

SpectraSet spectra_named(const std::vector<std::string>& ids) {
  SpectraSet set;
  set.axis = Axis((Vector(3) << 1, 2, 3).finished(), AxisUnit::Nanometre);
  set.ids = ids;
  set.values.resize(static_cast<Index>(ids.size()), 3);
  for (Index i = 0; i < set.values.rows(); ++i) {
    set.values.row(i).setConstant(static_cast<double>(i));
    set.origins.push_back({"s.csv", static_cast<std::size_t>(i) + 2});
  }
  return set;
}

ReferenceTable table_of(const std::vector<std::string>& samples, const Vector& values) {
  ReferenceTable table;
  table.samples = samples;
  for (std::size_t i = 0; i < samples.size(); ++i) table.origins.push_back({"r.csv", i + 2});
  table.columns.push_back({"water", "wt%", values});
  return table;
}

Recipe recipe_with_replicates() {
  Recipe recipe;
  recipe.replicate_mark = "-r";
  return recipe;
}

TEST(Standards, SamplesAreNumberedInTheOrderOfTheTable) {
  const SpectraSet spectra = spectra_named({"C-r1", "A-r1", "A-r2", "B", "C-r2"});
  const ReferenceTable table = table_of({"A", "B", "C"}, (Vector(3) << 1, 2, 3).finished());
  const MatchedStandards got = match_standards(recipe_with_replicates(), spectra, table);
  EXPECT_THAT(got.spectrum_rows, ElementsAre(0, 1, 2, 3, 4));
  EXPECT_THAT(got.sample_of_spectrum, ElementsAre(2, 0, 0, 1, 2));
  EXPECT_THAT(got.table_rows, ElementsAre(0, 1, 2));
  EXPECT_TRUE(got.warnings.empty());
  EXPECT_TRUE(got.groups.empty());
}

TEST(Standards, TrainingDataWeighReplicates) {
  const SpectraSet spectra = spectra_named({"C-r1", "A-r1", "A-r2", "A-r3", "C-r2"});
  const ReferenceTable table = table_of({"A", "C"}, (Vector(2) << 1, 3).finished());
  const MatchedStandards matched = match_standards(recipe_with_replicates(), spectra, table);
  std::vector<Index> rows;
  const TrainingData data = training_data(matched, spectra, table.columns[0], rows);
  EXPECT_THAT(rows, ElementsAre(0, 1, 2, 3, 4));
  EXPECT_THAT(data.sample_of_row, ElementsAre(1, 0, 0, 0, 1));
  EXPECT_TRUE(data.reference == (Vector(5) << 3, 1, 1, 1, 3).finished());
  EXPECT_TRUE(data.row_weights == (Vector(5) << 0.5, 1.0 / 3, 1.0 / 3, 1.0 / 3, 0.5).finished());
  EXPECT_EQ(data.samples(), 2);
  EXPECT_EQ(data.spectra(4, 0), 4.0);
}

TEST(Standards, SamplesWithoutAValueKeepTheirNumberButServeNot) {
  const SpectraSet spectra = spectra_named({"A", "B", "C"});
  const ReferenceTable table =
      table_of({"A", "B", "C"}, (Vector(3) << 1, std::numeric_limits<double>::quiet_NaN(), 3).finished());
  const MatchedStandards matched = match_standards({}, spectra, table);
  EXPECT_EQ(matched.samples(), 3);
  std::vector<Index> rows;
  const TrainingData data = training_data(matched, spectra, table.columns[0], rows);
  EXPECT_THAT(rows, ElementsAre(0, 2));
  EXPECT_THAT(data.sample_of_row, ElementsAre(0, 2));
  EXPECT_EQ(data.samples(), 2);
}

TEST(Standards, WhatIsUnmatchedIsNamedInAWarning) {
  const SpectraSet spectra = spectra_named({"A", "X1", "X2", "X3", "X4", "X5", "X6", "X7"});
  const ReferenceTable table = table_of({"A", "B"}, Vector::Ones(2));
  const MatchedStandards got = match_standards({}, spectra, table);
  EXPECT_THAT(got.spectrum_rows, ElementsAre(0));
  ASSERT_EQ(got.warnings.size(), 2u);
  EXPECT_EQ(got.warnings[0].text,
            "not used: 7 spectra without a row in the reference table: X1, X2, X3, X4, X5 and 2 more");
  EXPECT_EQ(got.warnings[1].text, "not used: 1 row of the reference table without a spectrum: B");
}

TEST(Standards, ExclusionsLeaveSamplesOrSpectraOutWithoutAWarning) {
  const SpectraSet spectra = spectra_named({"A-r1", "A-r2", "B", "C"});
  ReferenceTable table = table_of({"A", "B", "C"}, Vector::Ones(3));
  table.groups = {"g1", "g2", "g3"};
  Recipe recipe = recipe_with_replicates();
  recipe.exclusions = {{"B", "", "leaked"}, {"", "A-r2", "bubble"}};
  const MatchedStandards got = match_standards(recipe, spectra, table);
  EXPECT_THAT(got.spectrum_rows, ElementsAre(0, 3));
  EXPECT_THAT(got.table_rows, ElementsAre(0, 2));
  EXPECT_THAT(got.groups, ElementsAre("g1", "g3"));
  EXPECT_TRUE(got.warnings.empty());
}

TEST(Standards, ExclusionsOfWhatDoesNotExistAreRefused) {
  const SpectraSet spectra = spectra_named({"A", "B"});
  const ReferenceTable table = table_of({"A", "B"}, Vector::Ones(2));
  const auto refused = [&](const Exclusion& exclusion) {
    Recipe recipe;
    recipe.exclusions = {exclusion};
    return error_text(ErrorKind::Usage, [&] { static_cast<void>(match_standards(recipe, spectra, table)); });
  };
  EXPECT_EQ(refused({"S13", "", "x"}),
            "[[exclude]] \"S13\": there is no such sample among the standards (check the name, or remove the "
            "entry)");
  EXPECT_EQ(
      refused({"", "S13-r2", "x"}),
      "[[exclude]] \"S13-r2\": there is no such spectrum among the standards (check the name, or remove the "
      "entry)");
}

TEST(Standards, NoMatchAtAllIsRefused) {
  EXPECT_EQ(error_text(ErrorKind::Input,
                       [] {
                         static_cast<void>(match_standards({}, spectra_named({"A-1", "B-1"}),
                                                           table_of({"A", "B"}, Vector::Ones(2))));
                       }),
            "no spectrum belongs to a sample of the reference table (compare the names; replicate spectra "
            "need the key replicate)");
}

}  // namespace
}  // namespace bandwright
