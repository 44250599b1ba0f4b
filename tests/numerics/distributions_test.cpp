// SPDX-License-Identifier: Apache-2.0
#include "numerics/distributions.hpp"

#include <fmt/format.h>
#include <gtest/gtest.h>

#include <cmath>
#include <limits>

#include "base/error.hpp"
#include "support/close.hpp"
#include "support/error_text.hpp"
#include "support/test_data.hpp"

namespace bandwright {
namespace {

struct TabulatedQuantile {
  std::string distribution;
  double df1 = 0.0;
  double df2 = 0.0;
  double p = 0.0;
  double quantile = 0.0;
};

std::vector<TabulatedQuantile> table() {
  const auto cells = read_cells("stat_tables/quantiles.csv");
  const auto number = [](const std::string& cell) { return cell.empty() ? 0.0 : std::stod(cell); };
  std::vector<TabulatedQuantile> rows;
  for (std::size_t i = 1; i < cells.size(); ++i)
    rows.push_back(
        {cells[i][0], number(cells[i][1]), number(cells[i][2]), number(cells[i][3]), number(cells[i][4])});
  return rows;
}

double quantile_of(const TabulatedQuantile& row) {
  if (row.distribution == "normal") return normal_quantile(row.p);
  if (row.distribution == "t") return t_quantile(row.p, row.df1);
  if (row.distribution == "chi2") return chi_squared_quantile(row.p, row.df1);
  return f_quantile(row.p, row.df1, row.df2);
}

// stat_tables: 20 digits by arbitrary-precision arithmetic. The library reaches 1e-12 in every row. At
// p = 0.5 normal and t are exactly 0, which has no relative error.
TEST(Distributions, EveryTabulatedQuantile) {
  const auto rows = table();
  ASSERT_EQ(rows.size(), 2210u);
  double worst = 0.0;
  for (const TabulatedQuantile& row : rows) {
    const double got = quantile_of(row);
    EXPECT_TRUE(
        expect_close(got, row.quantile, {.relative = 1e-12, .absolute = row.quantile == 0.0 ? 1e-300 : 0.0}))
        << row.distribution << " " << row.df1 << " " << row.df2 << " p = " << row.p;
    if (row.quantile != 0.0) worst = std::max(worst, std::abs(got / row.quantile - 1.0));
  }
  RecordProperty("worst_relative_error", fmt::format("{:.2g}", worst));
}

// The same table from the other end: p is decimal, so 1 - p is rounded to 1e-16 first, which moves a
// quantile by up to 1e-16 / (tail * slope); the tails here are 0.001 and more.
TEST(Distributions, UpperQuantilesAreThoseOfTheComplement) {
  for (const TabulatedQuantile& row : table()) {
    if (row.distribution == "normal" || row.quantile == 0.0) continue;
    const double tail = 1.0 - row.p;
    const double got = row.distribution == "t"      ? t_upper_quantile(tail, row.df1)
                       : row.distribution == "chi2" ? chi_squared_upper_quantile(tail, row.df1)
                                                    : f_upper_quantile(tail, row.df1, row.df2);
    EXPECT_TRUE(expect_close(got, row.quantile, {.relative = 1e-12}))
        << row.distribution << row.df1 << " " << row.df2 << " " << row.p;
  }
}

TEST(Distributions, TailsUndoQuantiles) {
  for (const TabulatedQuantile& row : table()) {
    const Tolerance rounding{.relative = 1e-11};
    if (row.distribution == "normal") {
      EXPECT_TRUE(expect_close(normal_upper_tail(row.quantile), 1.0 - row.p, rounding));
    }
    if (row.distribution == "t") {
      EXPECT_TRUE(expect_close(t_upper_tail(row.quantile, row.df1), 1.0 - row.p, rounding));
    }
    if (row.distribution == "f") {
      EXPECT_TRUE(expect_close(f_upper_tail(row.quantile, row.df1, row.df2), 1.0 - row.p, rounding));
    }
  }
}

TEST(Distributions, FarTailsKeepTheirDigits) {
  for (const double tail : {1e-20, 1e-30}) {  // 1 - tail is 1 in a double
    constexpr Tolerance kRounding{.relative = 1e-11};
    EXPECT_TRUE(expect_close(t_upper_tail(t_upper_quantile(tail, 7.0), 7.0), tail, kRounding));
    EXPECT_TRUE(expect_close(f_upper_tail(f_upper_quantile(tail, 3.0, 20.0), 3.0, 20.0), tail, kRounding));
    // chi-squared with two degrees of freedom: P(X > x) = exp(-x / 2).
    EXPECT_TRUE(expect_close(chi_squared_upper_quantile(tail, 2.0), -2.0 * std::log(tail), kRounding));
  }
}

// Values as common statistical tables print them.
TEST(Distributions, PrintedTables) {
  constexpr Tolerance kFourDecimals{.absolute = 5.1e-5};
  for (const auto& [df, value] : std::vector<std::pair<double, double>>{{1, 12.7062},
                                                                        {2, 4.3027},
                                                                        {3, 3.1824},
                                                                        {4, 2.7764},
                                                                        {5, 2.5706},
                                                                        {10, 2.2281},
                                                                        {15, 2.1314},
                                                                        {19, 2.0930},
                                                                        {20, 2.0860},
                                                                        {30, 2.0423},
                                                                        {59, 2.0010},
                                                                        {120, 1.9799}})
    EXPECT_TRUE(expect_close(t_two_sided(0.95, df), value, kFourDecimals)) << df;
  for (const auto& [df, value] : std::vector<std::pair<double, double>>{
           {5, 2.0150}, {10, 1.8125}, {19, 1.7291}, {20, 1.7247}, {30, 1.6973}})
    EXPECT_TRUE(expect_close(t_quantile(0.95, df), value, kFourDecimals)) << df;
  for (const auto& [df, value] : std::vector<std::pair<double, double>>{
           {1, 3.8415}, {2, 5.9915}, {3, 7.8147}, {5, 11.0705}, {10, 18.3070}, {20, 31.4104}})
    EXPECT_TRUE(expect_close(chi_squared_quantile(0.95, df), value, kFourDecimals)) << df;
  for (const auto& [df, value] : std::vector<std::pair<double, double>>{
           {1, 6.6349}, {2, 9.2103}, {3, 11.3449}, {5, 15.0863}, {10, 23.2093}})
    EXPECT_TRUE(expect_close(chi_squared_upper_quantile(0.01, df), value, kFourDecimals)) << df;
  for (const auto& [df1, df2, value] : std::vector<std::tuple<double, double, double>>{{1, 10, 4.9646},
                                                                                       {2, 18, 3.5546},
                                                                                       {3, 20, 3.0984},
                                                                                       {5, 20, 2.7109},
                                                                                       {20, 20, 2.1242},
                                                                                       {19, 100, 1.6915},
                                                                                       {20, 100, 1.6764}})
    EXPECT_TRUE(expect_close(f_quantile(0.95, df1, df2), value, kFourDecimals)) << df1 << " " << df2;
  for (const auto& [p, value] : std::vector<std::pair<double, double>>{
           {0.95, 1.644854}, {0.975, 1.959964}, {0.99, 2.326348}, {0.995, 2.575829}})
    EXPECT_TRUE(expect_close(normal_quantile(p), value, {.absolute = 5.1e-7})) << p;
  // F(0.75; n, n), the limit of the factor rule.
  for (const auto& [df, value] : std::vector<std::pair<double, double>>{
           {8, 1.6396}, {10, 1.5513}, {20, 1.3580}, {24, 1.3214}, {30, 1.2823}, {50, 1.2115}, {100, 1.1449}})
    EXPECT_TRUE(expect_close(f_quantile(0.75, df, df), value, kFourDecimals)) << df;
}

// Closed forms: Beta(1, b) has P(X <= x) = 1 - (1 - x)^b, Beta(a, 1) has x^a; and k F / (k F + m) of an
// F(k, m) variable is Beta(k/2, m/2).
TEST(Distributions, BetaQuantiles) {
  for (const double p : {0.01, 0.5, 0.95, 0.999}) {
    EXPECT_TRUE(
        expect_close(beta_quantile(p, 1.0, 4.5), -std::expm1(std::log1p(-p) / 4.5), {.relative = 1e-13}));
    EXPECT_TRUE(expect_close(beta_quantile(p, 2.5, 1.0), std::pow(p, 1.0 / 2.5), {.relative = 1e-13}));
    const double f = f_quantile(p, 3.0, 26.0);
    EXPECT_TRUE(expect_close(beta_quantile(p, 1.5, 13.0), 3.0 * f / (3.0 * f + 26.0), {.relative = 1e-12}));
  }
}

TEST(Distributions, ArgumentsOutsideTheirRangeAreRefused) {
  const double nan = std::numeric_limits<double>::quiet_NaN();
  const auto refused = [](auto call) {
    return error_text(ErrorKind::Numerical, [&] { static_cast<void>(call()); });
  };
  for (const double p : {0.0, 1.0, -0.1, 1.1, nan}) {
    SCOPED_TRACE(p);
    EXPECT_EQ(refused([&] { return normal_quantile(p); }),
              fmt::format("the normal quantile does not exist for {}", p));
    EXPECT_EQ(refused([&] { return t_quantile(p, 5); }),
              fmt::format("the t quantile does not exist for {}, 5", p));
    EXPECT_EQ(refused([&] { return t_upper_quantile(p, 5); }),
              fmt::format("the t quantile does not exist for {}, 5", p));
    EXPECT_EQ(refused([&] { return chi_squared_quantile(p, 5); }),
              fmt::format("the chi-squared quantile does not exist for {}, 5", p));
    EXPECT_EQ(refused([&] { return chi_squared_upper_quantile(p, 5); }),
              fmt::format("the chi-squared quantile does not exist for {}, 5", p));
    EXPECT_EQ(refused([&] { return f_quantile(p, 2, 5); }),
              fmt::format("the F quantile does not exist for {}, 2, 5", p));
    EXPECT_EQ(refused([&] { return f_upper_quantile(p, 2, 5); }),
              fmt::format("the F quantile does not exist for {}, 2, 5", p));
    EXPECT_EQ(refused([&] { return beta_quantile(p, 2, 5); }),
              fmt::format("the beta quantile does not exist for {}, 2, 5", p));
  }
  for (const double df : {0.0, -1.0, nan}) {
    SCOPED_TRACE(df);
    EXPECT_EQ(refused([&] { return t_quantile(0.9, df); }),
              fmt::format("the t quantile does not exist for 0.9, {}", df));
    EXPECT_EQ(refused([&] { return chi_squared_quantile(0.9, df); }),
              fmt::format("the chi-squared quantile does not exist for 0.9, {}", df));
    EXPECT_EQ(refused([&] { return f_quantile(0.9, df, 5); }),
              fmt::format("the F quantile does not exist for 0.9, {}, 5", df));
    EXPECT_EQ(refused([&] { return f_quantile(0.9, 5, df); }),
              fmt::format("the F quantile does not exist for 0.9, 5, {}", df));
    EXPECT_EQ(refused([&] { return beta_quantile(0.9, df, 5); }),
              fmt::format("the beta quantile does not exist for 0.9, {}, 5", df));
    EXPECT_EQ(refused([&] { return t_upper_tail(1.0, df); }),
              fmt::format("the t tail does not exist for 1, {}", df));
    EXPECT_EQ(refused([&] { return f_upper_tail(1.0, df, 5); }),
              fmt::format("the F tail does not exist for 1, {}, 5", df));
  }
  EXPECT_EQ(refused([&] { return normal_upper_tail(nan); }), "the normal tail does not exist for nan");
  EXPECT_EQ(refused([&] { return t_upper_tail(nan, 5); }), "the t tail does not exist for nan, 5");
  EXPECT_EQ(refused([&] { return f_upper_tail(nan, 2, 5); }), "the F tail does not exist for nan, 2, 5");
  EXPECT_EQ(refused([&] { return f_upper_tail(-1, 2, 5); }), "the F tail does not exist for -1, 2, 5");
}

}  // namespace
}  // namespace bandwright
