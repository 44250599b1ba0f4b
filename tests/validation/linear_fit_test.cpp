// SPDX-License-Identifier: Apache-2.0
#include "validation/linear_fit.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <fstream>
#include <nlohmann/json.hpp>
#include <sstream>
#include <string>

#include "base/error.hpp"
#include "support/close.hpp"

namespace bandwright {
namespace {

// NIST Statistical Reference Datasets, certified values (tests/data/nist_strd/SOURCE.md). The certified
// values themselves agree with exact arithmetic to 5e-15; QR on columns of length 1 loses about the
// condition number, 20 for the quadratic of Pontius, and its intercept cancels four more digits.
constexpr Tolerance kLine{.relative = 1e-12, .absolute = 0.0};
constexpr Tolerance kQuadratic{.relative = 1e-10, .absolute = 0.0};

struct Dataset {
  Vector x;
  Vector y;
};

Dataset read_dataset(const std::string& name) {
  std::ifstream file(std::string(BANDWRIGHT_TEST_DATA) + "/nist_strd/" + name + ".csv");
  std::string line;
  std::getline(file, line);
  std::vector<double> x;
  std::vector<double> y;
  while (std::getline(file, line)) {
    std::istringstream cells(line);
    std::string cell;
    std::getline(cells, cell, ',');
    y.push_back(std::stod(cell));
    std::getline(cells, cell, ',');
    x.push_back(std::stod(cell));
  }
  return {Eigen::Map<Vector>(x.data(), static_cast<Index>(x.size())),
          Eigen::Map<Vector>(y.data(), static_cast<Index>(y.size()))};
}

struct Certified {
  Vector coefficients;
  Vector standard_errors;
  double residual_sd;
};

Certified read_certified(const std::string& name) {
  std::ifstream file(std::string(BANDWRIGHT_TEST_DATA) + "/nist_strd/certified.json");
  const auto certified = nlohmann::json::parse(file).at(name).at("certified");
  const auto vector_of = [&](const char* key) {
    const auto& list = certified.at(key);
    Vector values(static_cast<Index>(list.size()));
    for (std::size_t i = 0; i < list.size(); ++i)
      values[static_cast<Index>(i)] = std::stod(list[i].get<std::string>());
    return values;
  };
  return {vector_of("coefficients"), vector_of("standard_errors"),
          std::stod(certified.at("residual_sd").get<std::string>())};
}

void expect_certified(const LinearFit& fit, const std::string& name, Tolerance tolerance) {
  const Certified want = read_certified(name);
  EXPECT_TRUE(expect_close(fit.coefficients, want.coefficients, tolerance));
  EXPECT_TRUE(expect_close(fit.standard_errors, want.standard_errors, tolerance));
  EXPECT_TRUE(expect_close(fit.residual_sd, want.residual_sd, tolerance));
}

TEST(LinearFit, StraightLineGivesTheCertifiedValuesOfNorris) {
  const Dataset data = read_dataset("Norris");
  ASSERT_EQ(data.x.size(), 36);
  expect_certified(fit_line(data.x, data.y), "Norris", kLine);
}

TEST(LinearFit, QuadraticGivesTheCertifiedValuesOfPontius) {
  const Dataset data = read_dataset("Pontius");
  Matrix X(data.x.size(), 3);
  X.col(0).setOnes();
  X.col(1) = data.x;
  X.col(2) = data.x.cwiseAbs2();
  expect_certified(fit_linear(X, data.y), "Pontius", kQuadratic);
}

TEST(LinearFit, LineThroughTheOriginGivesTheCertifiedValuesOfNoInt1AndNoInt2) {
  for (const char* name : {"NoInt1", "NoInt2"}) {
    const Dataset data = read_dataset(name);
    Matrix X(data.x.size(), 1);
    X.col(0) = data.x;
    expect_certified(fit_linear(X, data.y), name, kLine);
  }
}

TEST(LinearFit, ResidualsAreOrthogonalToTheDesign) {
  const Dataset data = read_dataset("Norris");
  const LinearFit fit = fit_line(data.x, data.y);
  const Vector residuals = data.y.array() - fit.coefficients[0] - fit.coefficients[1] * data.x.array();
  EXPECT_NEAR(residuals.sum() / data.y.sum(), 0.0, 1e-13);
  EXPECT_NEAR(residuals.dot(data.x) / data.y.dot(data.x), 0.0, 1e-13);
  EXPECT_TRUE(expect_close(fit.rss, residuals.squaredNorm(), {.relative = 1e-10, .absolute = 0.0}));
}

TEST(LinearFit, RefusesWhatHasNoSolution) {
  const Vector two = Vector::Ones(2);
  EXPECT_THROW(static_cast<void>(fit_line(two, two)), Error);  // no degrees of freedom
  const Vector four = Vector::Ones(4);
  EXPECT_THROW(static_cast<void>(fit_line(four, four)), Error);  // x does not vary
  EXPECT_THROW(static_cast<void>(fit_line(Vector::LinSpaced(4, 0, 1), two)), Error);
  try {
    static_cast<void>(fit_line(two, two));
  } catch (const Error& error) {
    EXPECT_STREQ(error.what(), "a least-squares fit of 2 coefficients needs more than 2 values; there are 2");
  }
}

}  // namespace
}  // namespace bandwright
