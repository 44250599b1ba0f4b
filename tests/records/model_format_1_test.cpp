// SPDX-License-Identifier: Apache-2.0
// A model file of format 1, written once, is read and predicts the same for ever: tests/data/models/v1.
#include <gtest/gtest.h>

#include <cmath>
#include <cstdlib>
#include <filesystem>
#include <fstream>
#include <iterator>
#include <nlohmann/json.hpp>

#include "base/digest.hpp"
#include "base/number_text.hpp"
#include "records/model_file.hpp"
#include "support/close.hpp"
#include "support/sample_model.hpp"
#include "support/test_data.hpp"

namespace bandwright {
namespace {

const std::string kFolder = "models/v1/";
constexpr const char* kModelSha256 = "c55a7ef3731eecc67af03d36fb4a156d0ddcb630c690fceca0aa024123f21296";

// Products are rounded differently on other processors; p and a are below 100, five digits of room.
constexpr Tolerance kRoundOff{.relative = 1e-10, .absolute = 1e-12};

std::string path_of(const std::string& name) {
  return std::string(BANDWRIGHT_TEST_DATA) + "/" + kFolder + name;
}

std::string bytes_of(const std::string& name) {
  std::ifstream stream(path_of(name), std::ios::binary);
  return {std::istreambuf_iterator<char>(stream), std::istreambuf_iterator<char>()};
}

/// What a spectrum gives: in the order of the columns of predictions.csv.
struct Estimate {
  double value;
  double t2;
  double q;
};

Estimate estimate(const ComponentModel& component, const Matrix& spectrum) {
  const Projection p = project(component.calibration, spectrum, component.factors());
  return {p.value[0], static_cast<double>(component.statistics.samples - 1) * p.leverage[0], p.q[0]};
}

/// Calls use(component, spectrum, row of predictions.csv) for every pinned number.
template <class Use>
void for_each_pinned(Use&& use) {
  const NumberTable spectra = read_number_table(kFolder + "spectra.csv", true);
  const NumberTable pinned = read_number_table(kFolder + "predictions.csv", true);
  ASSERT_EQ(pinned.headings, (std::vector<std::string>{"component", "value", "t2", "q"}));
  ASSERT_EQ(pinned.values.rows(), 2 * spectra.values.rows());
  for (Index i = 0; i < pinned.values.rows(); ++i) {
    const Matrix spectrum = spectra.values.row(i / 2);
    ASSERT_EQ(pinned.names[static_cast<std::size_t>(i)], spectra.names[static_cast<std::size_t>(i / 2)]);
    const Estimate want{pinned.values(i, 1), pinned.values(i, 2), pinned.values(i, 3)};
    use(static_cast<std::size_t>(pinned.values(i, 0)), spectrum, want);
  }
}

/// Writes the pinned files, where they do not exist: once in the life of the format.
TEST(ModelFormat1, WritesThePinnedFilesOnceWhenAskedTo) {
  if (std::getenv("BANDWRIGHT_REGENERATE") == nullptr) GTEST_SKIP() << "not asked for";
  ASSERT_FALSE(std::filesystem::exists(path_of("two_components.model.json")))
      << "the pinned files are never replaced";
  const Model& model = sample_model();
  std::ofstream(path_of("two_components.model.json"), std::ios::binary) << format_model(model);
  const OpenData& data = beerlambert4();
  std::ofstream spectra(path_of("spectra.csv"), std::ios::binary);
  std::ofstream predictions(path_of("predictions.csv"), std::ios::binary);
  spectra << "spectrum";
  for (const double position : data.axis.positions()) spectra << ',' << exact_text(position);
  predictions << "spectrum,component,value,t2,q\n";
  for (const std::string name : {"T01", "T02", "T11", "T16"}) {
    const Matrix spectrum = data.spectra_at(data.rows_of({name}));
    spectra << '\n' << name;
    for (Index j = 0; j < spectrum.cols(); ++j) spectra << ',' << exact_text(spectrum(0, j));
    for (std::size_t c = 0; c < model.components.size(); ++c) {
      const Estimate e = estimate(model.components[c], spectrum);
      predictions << name << ',' << c << ',' << exact_text(e.value) << ',' << exact_text(e.t2) << ','
                  << exact_text(e.q) << '\n';
    }
  }
  spectra << '\n';
}

TEST(ModelFormat1, ThePinnedFileIsTheOneThatWasPinned) {
  EXPECT_EQ(sha256(bytes_of("two_components.model.json")), kModelSha256);
}

TEST(ModelFormat1, IsReadAndPredictsThePinnedNumbers) {
  const Model model = parse_model(bytes_of("two_components.model.json"), "two_components.model.json");
  for_each_pinned([&](std::size_t component, const Matrix& spectrum, const Estimate& want) {
    const Estimate got = estimate(model.components[component], spectrum);
    EXPECT_TRUE(expect_close(got.value, want.value, kRoundOff));
    EXPECT_TRUE(expect_close(got.t2, want.t2, kRoundOff));
    EXPECT_TRUE(expect_close(got.q, want.q, kRoundOff));
  });
}

/// The steps of models/README.md in plain loops, from the file alone; savitzky-golay with 5 points, degree 2,
/// first derivative by its closed form: least squares over t = -2 .. 2 give the slope sum t y / 10 and the
/// curvature term sum (t^2 - 2) y / 14, hence the derivative slope + 2 t curvature at t.
class ByTheReadme {
 public:
  explicit ByTheReadme(const nlohmann::json& document) : document_(document) {}

  [[nodiscard]] Estimate of(std::size_t c, const Matrix& spectrum) const {
    const nlohmann::json& component = document_.at("components").at(c);
    std::vector<double> x;
    for (const auto& window : component.at("windows")) append_window(window, spectrum, x);
    const nlohmann::json& regression = component.at("regression");
    const auto a = regression.at("factors").get<std::size_t>();
    for (std::size_t j = 0; j < x.size(); ++j)
      x[j] = (x[j] - number(component.at("scaling").at("mean"), j)) /
             number(component.at("scaling").at("scale"), j);
    Estimate out{component.at("response_mean").get<double>(), 0.0, 0.0};
    std::vector<double> rest = x;
    for (std::size_t k = 0; k < a; ++k) {
      double score = 0.0;
      for (std::size_t j = 0; j < x.size(); ++j) score += x[j] * number(regression.at("rotations").at(k), j);
      for (std::size_t j = 0; j < x.size(); ++j)
        rest[j] -= score * number(regression.at("loadings").at(k), j);
      out.value += score * number(regression.at("y_loadings"), k);
      out.t2 += score * score / number(regression.at("score_squares"), k);
    }
    out.t2 *= component.at("statistics").at("samples").get<double>() - 1.0;
    for (const double r : rest) out.q += r * r;
    return out;
  }

 private:
  static double number(const nlohmann::json& list, std::size_t i) { return list.at(i).get<double>(); }

  void append_window(const nlohmann::json& window, const Matrix& spectrum, std::vector<double>& out) const {
    const auto position = [&](std::size_t i) { return number(document_.at("axis").at("positions"), i); };
    const double low = std::min(window.at("from").get<double>(), window.at("to").get<double>());
    const double high = std::max(window.at("from").get<double>(), window.at("to").get<double>());
    const auto usable = [&](std::size_t i) {
      for (const auto& stretch : window.at("except"))
        if (position(i) >= number(stretch, 0) && position(i) <= number(stretch, 1)) return false;
      return true;
    };
    const auto inside = [&](std::size_t i) { return usable(i) && position(i) >= low && position(i) <= high; };
    std::vector<double> values;
    for (std::size_t i = 0; i < static_cast<std::size_t>(spectrum.cols()); ++i) {
      if (!inside(i)) continue;
      std::size_t middle = i;  // of the five points used: as near to i as the left-out stretches let it
      while (!usable(middle - 1) || !usable(middle - 2)) ++middle;
      while (!usable(middle + 1) || !usable(middle + 2)) --middle;
      double slope = 0.0;
      double curvature = 0.0;
      for (int t = -2; t <= 2; ++t) {
        const double y = spectrum(0, static_cast<Index>(middle) + t);
        slope += t * y / 10.0;
        curvature += (t * t - 2) * y / 14.0;
      }
      const double t = static_cast<double>(i) - static_cast<double>(middle);
      values.push_back((slope + 2.0 * t * curvature) / (position(1) - position(0)));
    }
    double mean = 0.0;
    for (const double v : values) mean += v / static_cast<double>(values.size());
    double squares = 0.0;
    for (const double v : values) squares += (v - mean) * (v - mean);
    const double spread = std::sqrt(squares / static_cast<double>(values.size() - 1));
    for (const double v : values) out.push_back((v - mean) / spread);
    EXPECT_EQ(values.size(), window.at("points").get<std::size_t>());
  }

  const nlohmann::json& document_;
};

TEST(ModelFormat1, PredictsWhatItsDescriptionSays) {
  const nlohmann::json document = nlohmann::json::parse(bytes_of("two_components.model.json"));
  const ByTheReadme by_the_readme(document);
  for_each_pinned([&](std::size_t component, const Matrix& spectrum, const Estimate& want) {
    const Estimate got = by_the_readme.of(component, spectrum);
    EXPECT_TRUE(expect_close(got.value, want.value, kRoundOff));
    EXPECT_TRUE(expect_close(got.t2, want.t2, kRoundOff));
    EXPECT_TRUE(expect_close(got.q, want.q, kRoundOff));
  });
}

}  // namespace
}  // namespace bandwright
