// SPDX-License-Identifier: Apache-2.0
#include "formats/csv_spectra.hpp"

#include <gtest/gtest.h>
#include <rapidcheck/gtest.h>

#include <cmath>
#include <cstdint>
#include <cstring>
#include <optional>
#include <string>
#include <tuple>
#include <vector>

#include "formats/files.hpp"
#include "formats/refusal.hpp"

namespace bandwright {
namespace {

using Ids = std::vector<std::string>;

constexpr std::size_t kLargestTestFile = 1 << 24;

CsvSpectra parse(std::string_view text, const CsvSpectraOptions& options = {}) {
  return parse_csv_spectra(text, "x.csv", options);
}

CsvSpectra collect(std::string_view text) {
  return parse(text, {.axis = {}, .ordinate = {}, .bad_spectrum = BadSpectrum::Collect});
}

std::string refusal_of(std::string_view text, const CsvSpectraOptions& options = {}) {
  return refusal([&] { static_cast<void>(parse(text, options)); });
}

Matrix two_by_three() {
  Matrix values(2, 3);
  values << 0.5, 0.25, 0.125, -1.0, 2.0, 0.001;
  return values;
}

/// The same two spectra in every dialect that laboratories send.
TEST(CsvSpectra, EveryDialectGivesTheSameSet) {
  const std::vector<std::string> dialects = {
      "sample,4000,3998,3996\nS1,0.5,0.25,0.125\nS2,-1,2,1e-3\n",
      "sample;4000;3998;3996\r\nS1;0,5;0,25;0,125\r\nS2;-1;2;0,001\r\n",
      "sample;4000.0;3998.0;3996\nS1;0.5;0.25;0.125\nS2;-1;2;0.001",
      "sample\t4000\t3998\t3996\rS1\t0,5\t0,25\t0,125\rS2\t-1\t2\t1E-3\r",
      "\xEF\xBB\xBF\"sample\",\"4000\",\"3998\",\"3996\"\n\"S1\",\"0.5\",\"0.25\",\"0.125\"\n\n\"S2\",-1,+2, "
      ".001 \n,,,\n",
      "x,S1,S2\n4000,0.5,-1\n3998,0.25,2\n3996,0.125,0.001\n",
      "x;S1;S2\r\n4000,0;0,5;-1\r\n3998,0;0,25;2\r\n3996,0;0,125;0,001\r\n",
      "\nx\tS1\tS2\r\r4000\t.5\t-1\r3998\t.25\t2\r3996\t.125\t.001",
  };
  for (const std::string& dialect : dialects) {
    const CsvSpectra result = parse(dialect);
    EXPECT_EQ(result.spectra.ids, (Ids{"S1", "S2"})) << dialect;
    EXPECT_EQ(result.spectra.axis.positions(), Eigen::Vector3d(4000, 3998, 3996)) << dialect;
    EXPECT_EQ(result.spectra.values, two_by_three()) << dialect;
    EXPECT_TRUE(result.warnings.empty()) << dialect;
    EXPECT_TRUE(result.refused.empty()) << dialect;
  }
}

TEST(CsvSpectra, RemembersWhereEachSpectrumStands) {
  const SpectraSet rows = parse("sample,4000\n\nS1,1\n\"S\n2\",1\nS3,1\n").spectra;
  EXPECT_EQ(rows.origins[0].file, "x.csv");
  EXPECT_EQ(rows.origins[0].line, 3U);
  EXPECT_EQ(rows.origins[2].line, 6U);
  EXPECT_EQ(parse("\nnm,S1\n1000,1\n").spectra.origins[0].line, 2U);
}

TEST(CsvSpectra, UnitAndOrdinateComeFromTheLabelOrTheOptions) {
  EXPECT_EQ(parse("wavenumber [cm-1],S1\n4000,1\n").spectra.axis.unit(), AxisUnit::Wavenumber);
  EXPECT_EQ(parse("nm,1000,1002\nS1,1,2\n").spectra.axis.unit(), AxisUnit::Nanometre);
  EXPECT_EQ(parse("x,1000,1002\nS1,1,2\n").spectra.axis.unit(), std::nullopt);
  const CsvSpectraOptions options{.axis = AxisUnit::Nanometre, .ordinate = Ordinate::Absorbance};
  const SpectraSet asked = parse("x,1000,1002\nS1,1,2\n", options).spectra;
  EXPECT_EQ(asked.axis.unit(), AxisUnit::Nanometre);
  EXPECT_EQ(asked.ordinate, Ordinate::Absorbance);
  EXPECT_EQ(parse("absorbance,1000\nS1,1\n").spectra.ordinate, Ordinate::Absorbance);
  EXPECT_EQ(refusal_of("wavenumber,1000\nS1,1\n", options),
            "x.csv:1: field 1: the heading says the axis unit is cm-1, but nm was asked for");
  EXPECT_EQ(refusal_of("% transmittance,1000\nS1,1\n", options),
            "x.csv:1: field 1: the heading says the ordinate is percent-transmittance, but absorbance was "
            "asked for");
  EXPECT_EQ(refusal_of("wavelength [um],2.5\nS1,1\n"),
            "x.csv:1: field 1: the label \"wavelength [um]\" names an axis unit other than cm-1 and nm "
            "(convert the axis "
            "to cm-1 or nm)");
}

TEST(CsvSpectra, SmallestFiles) {
  const SpectraSet one = parse("x,4000\nS1,0.5\n").spectra;
  EXPECT_EQ(one.size(), 1);
  EXPECT_EQ(one.points(), 1);
  EXPECT_EQ(one.values(0, 0), 0.5);
}

TEST(CsvSpectra, AHundredThousandPoints) {
  constexpr int kPoints = 100'000;
  std::string text = "x";
  std::string row = "\nS1";
  for (int j = 0; j < kPoints; ++j) {
    text += fmt::format(",{}", 1000 + j);
    row += ",0.5";
  }
  const SpectraSet spectra = parse(text + row).spectra;
  EXPECT_EQ(spectra.points(), kPoints);
  EXPECT_EQ(spectra.values.sum(), 0.5 * kPoints);
}

TEST(CsvSpectra, WarningsAreData) {
  const CsvSpectra latin = parse("Wellenzahl,4000\n\xE4,1\n");
  EXPECT_EQ(latin.spectra.ids, Ids{"\u00E4"});
  ASSERT_EQ(latin.warnings.size(), 1U);
  EXPECT_EQ(latin.warnings[0].one_line(), "x.csv: the text is not UTF-8; it was read as Windows-1252");
  const CsvSpectra low = parse("x,2.5,3\nS1,1,2\n");
  ASSERT_EQ(low.warnings.size(), 1U);
  EXPECT_EQ(low.warnings[0].one_line(),
            "x.csv: the axis goes down to 2.5, where neither cm-1 nor nm is infrared; is it in micrometres?");
}

struct Refusal {
  const char* text;
  const char* message;
};

TEST(CsvSpectra, RefusesRowsWithOneClearLine) {
  const std::vector<Refusal> table = {
      {"", "x.csv: the file is empty"},
      {"\n \n", "x.csv: the file is empty"},
      {"x,4000,3998\n", "x.csv:1: no spectra below the heading"},
      {"x,4000,3998\nS1,1,n/a\n", "x.csv:2: field 3: \"n/a\" is not a number"},
      {"x,4000,3998\nS1,1,\n", "x.csv:2: field 3: the field is empty where a number is expected"},
      {"x,4000,3998\nS1,1,inf\n", "x.csv:2: field 3: \"inf\" is not a finite number"},
      {"x,4000,3998\nS1,1,1e400\n",
       "x.csv:2: field 3: \"1e400\" is outside the range of double-precision numbers"},
      {"x,4000,3998\nS1,1,1e-400\n",
       "x.csv:2: field 3: \"1e-400\" is outside the range of double-precision numbers"},
      {"x,4000,3998\nS1,1\n", "x.csv:2: the line has 2 fields, the heading has 3"},
      {"x,4000,3998\nS1,1,2,3\n", "x.csv:2: the line has 4 fields, the heading has 3"},
      {"x,4000,3998\nS1,0,5,1,0\n",
       "x.csv:2: the line has 5 fields, the heading has 3 (a decimal comma needs semicolons or tabs between "
       "the fields)"},
      {"x,4000,3998\n,1,2\n", "x.csv:2: field 1: the spectrum has no id"},
      {"x,4000,3998\n\" \",1,2\n", "x.csv:2: field 1: the spectrum has no id"},
      {"x,4000,3998\nS1,1,2\nS2,1,2\nS1,3,4\n",
       "x.csv:4: field 1: the id \"S1\" is already at line 2 (ids must be unique)"},
      {"x;4000;3998\nS1;1.000,5;2\n",
       "x.csv:2: field 2: \"1.000,5\" holds both a point and a comma (write numbers without thousands "
       "separators)"},
      {"x;4000;3998\nS1;0,5;1.5\n",
       "x.csv:2: field 3: \"1.5\" has a decimal point, but line 2, field 2 has a decimal comma (one file "
       "uses one decimal "
       "sign)"},
      {"x,4000,399B,3996\nS1,1,2,3\n",
       "x.csv:1: field 3: \"399B\" is not a number (most fields of the heading are numbers, so it is read as "
       "the axis)"},
      {"x,4000,3998,\nS1,1,2,\n",
       "x.csv:1: field 4: the field is empty where a number is expected (most fields of the heading are "
       "numbers, so it is "
       "read as the axis)"},
      {"x,4000,4000\nS1,1,2\n", "x.csv:1: axis values 1 and 2 (4000 and 4000) break the rising order"},
      {"x,4000,-3998,5\nS1,1,2,3\n", "x.csv:1: axis value 2 is -3998; it must be a positive number"},
      {"x,4000,3998\nS1,1,\"2\n", "x.csv:2: field 3: a quote is opened and never closed"},
  };
  for (const Refusal& line : table) EXPECT_EQ(refusal_of(line.text), line.message);
}

TEST(CsvSpectra, RefusesColumnsWithOneClearLine) {
  const std::vector<Refusal> table = {
      {"x,S1,S2\n", "x.csv:1: no points below the heading"},
      {"x,S1,S2\n4000,1,2\n3998,1,n/a\n", "x.csv:3: field 3: \"n/a\" is not a number"},
      {"x,S1,S2\n4000,1,2\n3998,1\n", "x.csv:3: the line has 2 fields, the heading has 3"},
      {"x,S1,S2\n4000,1,2\nmean,1,2\n",
       "x.csv:3: field 1: \"mean\" is not a number (the heading is no axis, so the first column is read as "
       "the axis)"},
      {"x,S1,S1\n4000,1,2\n", "x.csv:1: field 3: the id \"S1\" is already at field 2 (ids must be unique)"},
      {"x,S1,\n4000,1,\n", "x.csv:1: field 3: the spectrum has no id"},
      {"x,S1\n4000,1\n3998,1\n3999,1\n",
       "x.csv: axis values 2 and 3 (3998 and 3999) break the falling order"},
  };
  for (const Refusal& line : table) EXPECT_EQ(refusal_of(line.text), line.message);
}

TEST(CsvSpectra, ARefusalIsOneLineHoweverLongTheCell) {
  const std::string message = refusal_of("x,4000\nS1," + std::string(60'000, 'y') + "\n");
  EXPECT_EQ(message, "x.csv:2: field 2: \"" + std::string(40, 'y') + "...\" is not a number");
}

TEST(CsvSpectra, CollectReadsTheOthers) {
  const CsvSpectra result =
      collect("x,4000,3998\nS1,1,2\nS2,n/a,2\nS3,3\nS4,4,5\n,6,7\nS5,1e400,\nS4,8,9\nS6,10,11\n");
  EXPECT_EQ(result.spectra.ids, (Ids{"S1", "S6"}));
  Matrix want(2, 2);
  want << 1, 2, 10, 11;
  EXPECT_EQ(result.spectra.values, want);
  EXPECT_EQ(result.spectra.origins[1].line, 9U);
  const std::vector<std::tuple<std::string, std::size_t, std::string>> refused = {
      {"S2", 3, "field 2: \"n/a\" is not a number"},
      {"S3", 4, "the line has 2 fields, the heading has 3"},
      {"S4", 5, "the id \"S4\" comes again at line 8"},
      {"", 6, "field 1: the spectrum has no id"},
      {"S5", 7, "field 2: \"1e400\" is outside the range of double-precision numbers"},
      {"S4", 8, "field 1: the id \"S4\" is already at line 5 (ids must be unique)"}};
  ASSERT_EQ(result.refused.size(), refused.size());
  for (std::size_t i = 0; i < refused.size(); ++i) {
    EXPECT_EQ(result.refused[i].id, std::get<0>(refused[i]));
    EXPECT_EQ(result.refused[i].origin.line, std::get<1>(refused[i]));
    EXPECT_EQ(result.refused[i].reason, std::get<2>(refused[i]));
  }
}

TEST(CsvSpectra, CollectReadsTheOtherColumns) {
  const CsvSpectra result = collect("x,S1,S2,S3,S3,S5\n4000,1,2,3,4,5\n3998,1,n/a,3,4,6\n3996,1,,3,4,7\n");
  EXPECT_EQ(result.spectra.ids, (Ids{"S1", "S5"}));
  Matrix want(2, 3);
  want << 1, 1, 1, 5, 6, 7;
  EXPECT_EQ(result.spectra.values, want);
  ASSERT_EQ(result.refused.size(), 3U);
  EXPECT_EQ(result.refused[0].id, "S2");
  EXPECT_EQ(result.refused[0].origin.line, 3U);
  EXPECT_EQ(result.refused[0].reason, "field 3: \"n/a\" is not a number");
  EXPECT_EQ(result.refused[1].reason, "the id \"S3\" comes again at field 5");
  EXPECT_EQ(result.refused[2].reason, "field 5: the id \"S3\" is already at field 4 (ids must be unique)");
}

TEST(CsvSpectra, CollectMayLeaveNoneButNeverHidesAFaultOfTheFile) {
  const CsvSpectra none = collect("x,4000,3998\nS1,1,n/a\n");
  EXPECT_EQ(none.spectra.size(), 0);
  EXPECT_EQ(none.spectra.points(), 2);
  EXPECT_EQ(none.refused.size(), 1U);
  EXPECT_EQ(refusal([] { static_cast<void>(collect("x,4000,3998\n")); }),
            "x.csv:1: no spectra below the heading");
  EXPECT_EQ(refusal([] { static_cast<void>(collect("x,S1\n4000,1\n3998\n")); }),
            "x.csv:3: the line has 1 fields, the heading has 2");
}

/// Many empty refused cells in short lines must not outgrow the memory set aside.
TEST(CsvSpectra, CollectHoldsManyEmptyCells) {
  std::string text = "x,S1,S2\n5000,,1\n";
  for (int i = 0; i < 2000; ++i) text += fmt::format("{},,\n", 4999 - i);
  const CsvSpectra result = collect(text);
  EXPECT_EQ(result.spectra.size(), 0);
  EXPECT_EQ(result.refused.size(), 2U);
}

TEST(CsvSpectra, MeatsAreReadWhole) {
  const std::string path = BANDWRIGHT_TEST_DATA "/meats/spectra.csv";
  const CsvSpectra meats = parse_csv_spectra(read_text_file(path, kLargestTestFile), path);
  EXPECT_EQ(meats.spectra.size(), 215);
  EXPECT_EQ(meats.spectra.points(), 100);
  EXPECT_EQ(meats.spectra.axis[0], 852.0);
  EXPECT_EQ(meats.spectra.axis[99], 1050.0);
  EXPECT_EQ(meats.spectra.ids.front(), "M001");
  EXPECT_EQ(meats.spectra.values(0, 0), 2.61776);  // first cell of the file
  EXPECT_EQ(meats.spectra.origins.back().line, 216U);
  EXPECT_TRUE(meats.warnings.empty());
}

TEST(CsvSpectra, BeerLambertIsReadWholeOnItsFallingAxis) {
  const std::string path = BANDWRIGHT_TEST_DATA "/beerlambert4/spectra.csv";
  const SpectraSet spectra =
      parse_csv_spectra(read_text_file(path, kLargestTestFile), path, {.axis = AxisUnit::Wavenumber}).spectra;
  EXPECT_EQ(spectra.size(), 41);
  EXPECT_EQ(spectra.points(), 226);
  EXPECT_EQ(spectra.axis[0], 1800.0);
  EXPECT_EQ(spectra.axis[225], 900.0);
  EXPECT_TRUE(spectra.axis.falling());
  EXPECT_EQ(spectra.values(0, 0), 0.002544);  // first cell of the file
}

void expect_same(const SpectraSet& got, const SpectraSet& want) {
  RC_ASSERT(got.ids == want.ids);
  RC_ASSERT(got.axis.positions() == want.axis.positions());
  RC_ASSERT(got.axis.unit() == want.axis.unit());
  RC_ASSERT(got.ordinate == want.ordinate);
  RC_ASSERT(got.values == want.values);
}

/// Any finite double, by its bits: subnormal and huge ones as well.
rc::Gen<double> any_double() {
  return rc::gen::suchThat(rc::gen::map(rc::gen::arbitrary<std::uint64_t>(),
                                        [](std::uint64_t bits) {
                                          double value = 0.0;
                                          std::memcpy(&value, &bits, sizeof value);
                                          return value;
                                        }),
                           [](double value) { return std::isfinite(value); });
}

rc::Gen<std::string> any_id() {
  return rc::gen::suchThat(
      rc::gen::container<std::string>(
          rc::gen::element('S', '1', '2', '-', '=', '\'', ',', ';', '"', ' ', '\t', '\n', '\r')),
      [](const std::string& id) { return id.find_first_not_of(" \t\r\n") != std::string::npos; });
}

SpectraSet any_set() {
  SpectraSet set;
  const auto ids = *rc::gen::nonEmpty(rc::gen::unique<std::vector<std::string>>(any_id()));
  auto steps = *rc::gen::nonEmpty(rc::gen::container<std::vector<int>>(rc::gen::inRange(1, 5000)));
  Vector positions(static_cast<Index>(steps.size()));
  double position = 0.0;
  for (std::size_t j = 0; j < steps.size(); ++j)
    positions[static_cast<Index>(j)] = position += static_cast<double>(steps[j]) / 7.0;
  if (*rc::gen::arbitrary<bool>()) positions = positions.reverse().eval();
  set.axis = Axis(positions, *rc::gen::element<std::optional<AxisUnit>>(std::nullopt, AxisUnit::Wavenumber,
                                                                        AxisUnit::Nanometre));
  set.ordinate = *rc::gen::element<std::optional<Ordinate>>(
      std::nullopt, Ordinate::Absorbance, Ordinate::PercentTransmittance, Ordinate::Reflectance);
  set.ids = ids;
  set.origins.assign(ids.size(), {});
  set.values.resize(static_cast<Index>(ids.size()), positions.size());
  for (double& value : set.values.reshaped()) value = *any_double();
  return set;
}

RC_GTEST_PROP(CsvSpectra, WhatIsWrittenReadsBackBitForBit, ()) {
  const SpectraSet set = any_set();
  expect_same(parse(format_csv_spectra(set)).spectra, set);
}

/// Ids that are numbers, rising like an axis, are the hardest to tell from one.
RC_GTEST_PROP(CsvSpectra, NumericIdsReadBackToo, ()) {
  SpectraSet set = any_set();
  int id = *rc::gen::inRange(1, 300);
  for (std::string& name : set.ids) name = fmt::format("{}", id++);
  expect_same(parse(format_csv_spectra(set)).spectra, set);
}

/// The turned file of the same cells gives the same spectra.
RC_GTEST_PROP(CsvSpectra, BothOrientationsAgree, ()) {
  const Index n = *rc::gen::inRange<Index>(1, 6);
  const Index p = *rc::gen::inRange<Index>(1, 6);
  Matrix values(n, p);
  for (double& value : values.reshaped()) value = *any_double();
  std::string rows = "x";
  std::string columns = "x";
  for (Index j = 0; j < p; ++j) rows += fmt::format(",{}", 4000 - 2 * j);
  for (Index i = 0; i < n; ++i) {
    columns += fmt::format(",S{}", i);
    rows += fmt::format("\nS{}", i);
    for (Index j = 0; j < p; ++j) rows += fmt::format(",{}", values(i, j));
  }
  for (Index j = 0; j < p; ++j) {
    columns += fmt::format("\n{}", 4000 - 2 * j);
    for (Index i = 0; i < n; ++i) columns += fmt::format(",{}", values(i, j));
  }
  const SpectraSet from_rows = parse(rows).spectra;
  RC_ASSERT(from_rows.values == values);
  expect_same(parse(columns).spectra, from_rows);
}

TEST(CsvSpectra, WriterGivesCommaSeparatedRows) {
  SpectraSet set;
  set.axis = Axis(Eigen::Vector2d(4000, 3998.5), AxisUnit::Wavenumber);
  set.ordinate = Ordinate::Absorbance;
  set.ids = {"S1", "=x;y"};
  set.values.resize(2, 2);
  set.values << 0.1, 1.0 / 3.0, -0.0, 1e-300;
  EXPECT_EQ(format_csv_spectra(set),
            "spectrum id [cm-1] [absorbance],4000,3998.5\nS1,0.1,0.3333333333333333\n\"'=x;y\",-0,1e-300\n");
  set.ids[0] = " ";
  EXPECT_EQ(refusal([&] { static_cast<void>(format_csv_spectra(set)); }, ErrorKind::Output),
            "the name \" \" cannot be written to a CSV file: it is blank or holds bytes that are not text");
}

}  // namespace
}  // namespace bandwright
