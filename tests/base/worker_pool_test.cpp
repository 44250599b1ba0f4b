// SPDX-License-Identifier: Apache-2.0
#include "base/worker_pool.hpp"

#include <gtest/gtest.h>

#include <atomic>
#include <chrono>
#include <stdexcept>
#include <string>
#include <thread>
#include <vector>

namespace bandwright {
namespace {

TEST(WorkerPool, RunsEveryJobOnce) {
  for (const unsigned workers : {1U, 2U, 4U}) {
    WorkerPool pool(workers);
    EXPECT_EQ(pool.workers(), workers);
    for (const std::size_t count : {0U, 1U, 2U, 3U, 1000U}) {
      std::vector<std::atomic<int>> runs(count);
      pool.for_each_index(count, [&](std::size_t i) { ++runs.at(i); });
      for (const auto& times : runs) EXPECT_EQ(times, 1);
    }
  }
}

TEST(WorkerPool, NoWorkerMeansTheCaller) {
  WorkerPool pool(0);
  EXPECT_EQ(pool.workers(), 1u);
  const auto caller = std::this_thread::get_id();
  pool.for_each_index(5, [&](std::size_t) { EXPECT_EQ(std::this_thread::get_id(), caller); });
}

TEST(WorkerPool, ResultsDoNotDependOnTheNumberOfWorkers) {
  const auto results = [](unsigned workers) {
    WorkerPool pool(workers);
    std::vector<double> out(500);
    pool.for_each_index(out.size(), [&](std::size_t i) { out[i] = 1.0 / static_cast<double>(i + 3); });
    double total = 0.0;
    for (const double value : out) total += value;
    return total;
  };
  EXPECT_EQ(results(1), results(2));
  EXPECT_EQ(results(1), results(4));
}

TEST(WorkerPool, JobsReallyRunSideBySide) {  // each of two jobs waits for the other
  WorkerPool pool(2);
  std::atomic<int> arrived{0};
  std::atomic<int> met{0};
  pool.for_each_index(2, [&](std::size_t) {
    ++arrived;
    const auto give_up = std::chrono::steady_clock::now() + std::chrono::seconds(20);
    while (arrived < 2 && std::chrono::steady_clock::now() < give_up) std::this_thread::yield();
    if (arrived == 2) ++met;
  });
  EXPECT_EQ(met, 2);
}

std::string thrown_by(WorkerPool& pool, std::size_t count, const std::function<void(std::size_t)>& job) {
  try {
    pool.for_each_index(count, job);
  } catch (const std::runtime_error& error) {
    return error.what();
  }
  return "nothing";
}

TEST(WorkerPool, LowestExceptionWins) {
  for (const unsigned workers : {1U, 2U, 4U}) {
    WorkerPool pool(workers);
    for (int round = 0; round < 50; ++round) {
      // Jobs are begun in order, so job 3 has begun when any later one throws, and it throws last.
      const std::string got = thrown_by(pool, 100, [](std::size_t i) {
        if (i == 3) std::this_thread::sleep_for(std::chrono::microseconds(200));
        if (i >= 3) throw std::runtime_error("job " + std::to_string(i));
      });
      EXPECT_EQ(got, "job 3");
    }
  }
}

TEST(WorkerPool, NoNewJobIsBegunAfterAnException) {
  WorkerPool pool(1);
  std::size_t last = 0;
  EXPECT_EQ(thrown_by(pool, 100,
                      [&](std::size_t i) {
                        last = i;
                        if (i == 5) throw std::runtime_error("stop");
                      }),
            "stop");
  EXPECT_EQ(last, 5u);
}

TEST(WorkerPool, WorksAgainAfterAnException) {
  WorkerPool pool(3);
  for (int round = 0; round < 20; ++round) {
    EXPECT_EQ(thrown_by(pool, 10, [](std::size_t) { throw std::runtime_error("each"); }), "each");
    std::atomic<int> runs{0};
    pool.for_each_index(10, [&](std::size_t) { ++runs; });
    EXPECT_EQ(runs, 10);
  }
}

TEST(WorkerPool, DefaultIsAtLeastOne) { EXPECT_GE(WorkerPool::default_workers(), 1U); }

}  // namespace
}  // namespace bandwright
