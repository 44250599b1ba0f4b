// SPDX-License-Identifier: Apache-2.0
// Leave-one-out over every number of factors, timed. For each job it leaves in DIRECTORY, as plain doubles
// in the order of rows:
//   JOB.spectra (n x p), JOB.reference (n), JOB.held_out (n x a), and JOB.times: a line "workers seconds" a
//   run.
#include <fmt/format.h>

#include <chrono>
#include <cstdio>
#include <exception>
#include <fstream>
#include <numeric>
#include <string>
#include <vector>

#include "base/error.hpp"
#include "base/number_text.hpp"
#include "base/worker_pool.hpp"
#include "beer_lambert.hpp"
#include "numerics/linear_algebra.hpp"
#include "resampling/folds.hpp"
#include "resampling/held_out.hpp"

namespace bandwright {
namespace {

struct Job {
  std::string name;
  Index samples;
  Index points;
  Index factors;
  int runs;  ///< timed, after one that is not
};

const std::vector<Job> kJobs{
    {.name = "a", .samples = 100, .points = 1000, .factors = 10, .runs = 7},
    {.name = "b", .samples = 500, .points = 2000, .factors = 20, .runs = 3},
};
constexpr Index kComponents = 8;
constexpr double kNoise = 1e-3;

void write_doubles(const std::string& path, const double* values, Index count) {
  std::ofstream file(path, std::ios::binary);
  file.write(reinterpret_cast<const char*>(values), count * static_cast<Index>(sizeof(double)));
  if (!file.flush())
    throw Error(ErrorKind::Output, "cannot be written", {.file = path, .line = 0, .field = {}, .hint = {}});
}

TrainingData training_data(const Mixtures& mixtures) {
  const Index n = mixtures.spectra.rows();
  TrainingData data{
      .axis = Axis(Vector::LinSpaced(mixtures.spectra.cols(), 4000.0, 650.0), AxisUnit::Wavenumber),
      .spectra = mixtures.spectra,
      .reference = mixtures.amount,
      .sample_of_row = std::vector<Index>(static_cast<std::size_t>(n)),
      .row_weights = Vector::Ones(n)};
  std::iota(data.sample_of_row.begin(), data.sample_of_row.end(), Index{0});
  return data;
}

void run(const Job& job, const std::string& directory) {
  const Mixtures mixtures = beer_lambert_mixtures(job.samples, job.points, kComponents, kNoise, 1);
  const TrainingData data = training_data(mixtures);
  const CalibrationRecipe recipe{.windows = {whole_axis(data.axis)},
                                 .steps = {},
                                 .scaling = Scaling::Centre,
                                 .kind = RegressionKind::Pls,
                                 .max_factors = job.factors};
  const std::vector<Fold> folds = make_folds({.scheme = FoldScheme::LeaveOneOut}, job.samples, {});

  std::string times;
  Matrix predicted;
  for (const unsigned workers : {1U, 2U}) {
    WorkerPool pool(workers);
    for (int r = 0; r <= job.runs; ++r) {
      const auto start = std::chrono::steady_clock::now();
      const HeldOut held_out = refit_folds(recipe, data, folds, pool);
      const std::chrono::duration<double> seconds = std::chrono::steady_clock::now() - start;
      if (r > 0) times += fmt::format("{} {:.6f}\n", workers, seconds.count());
      if (predicted.size() > 0 && predicted != held_out.predicted)
        throw Error(ErrorKind::Internal, "two runs of job " + job.name + " differ");
      predicted = held_out.predicted;
    }
  }

  const std::string stem = directory + "/" + job.name;
  write_doubles(stem + ".spectra", data.spectra.data(), data.spectra.size());
  write_doubles(stem + ".reference", data.reference.data(), data.reference.size());
  write_doubles(stem + ".held_out", predicted.data(), predicted.size());
  std::ofstream(stem + ".times") << times;
  fmt::print("job {}: n {}, p {}, factors 1 .. {}; seconds by workers:\n{}", job.name, job.samples,
             job.points, predicted.cols(), times);
}

}  // namespace
}  // namespace bandwright

int main(int argc, char** argv) try {
  if (argc < 2) {
    fmt::print(stderr, "usage: {} DIRECTORY [JOB...]\n", argv[0]);
    return 2;
  }
  bandwright::check_linear_algebra();
  const std::vector<std::string> wanted(argv + 2, argv + argc);
  for (const bandwright::Job& job : bandwright::kJobs)
    if (wanted.empty() || std::find(wanted.begin(), wanted.end(), job.name) != wanted.end())
      run(job, argv[1]);
  return 0;
} catch (const std::exception& error) {
  fmt::print(stderr, "{}\n", error.what());
  return 1;
}
