// SPDX-License-Identifier: Apache-2.0
#include "base/worker_pool.hpp"

#include <sched.h>

#include <algorithm>
#include <atomic>
#include <condition_variable>
#include <cstdint>
#include <exception>
#include <mutex>
#include <thread>
#include <utility>
#include <vector>

namespace bandwright {

struct WorkerPool::State {
  std::mutex mutex;
  std::condition_variable work_ready;
  std::condition_variable work_done;
  const std::function<void(std::size_t)>* job = nullptr;
  std::size_t count = 0;
  std::atomic<std::size_t> next{0};
  std::uint64_t round = 0;   // which loop the workers are asked to join
  std::size_t running = 0;   // workers still inside the current loop
  std::exception_ptr fault;  // of the lowest index that threw
  std::size_t fault_index = 0;
  bool stopping = false;
  std::vector<std::jthread> threads;

  void run_jobs() {
    for (std::size_t i = next.fetch_add(1); i < count; i = next.fetch_add(1)) {
      try {
        (*job)(i);
      } catch (...) {
        const std::lock_guard guard(mutex);
        if (!fault || i < fault_index) {
          fault = std::current_exception();
          fault_index = i;
        }
        next = count;
      }
    }
  }

  void serve() {
    std::uint64_t seen = 0;
    for (;;) {
      {
        std::unique_lock lock(mutex);
        work_ready.wait(lock, [&] { return stopping || round != seen; });
        if (stopping) return;
        seen = round;
      }
      run_jobs();
      const std::lock_guard guard(mutex);
      if (--running == 0) work_done.notify_one();
    }
  }
};

WorkerPool::WorkerPool(unsigned workers) : state_(std::make_unique<State>()) {
  for (unsigned i = 1; i < std::max(workers, 1U); ++i)
    state_->threads.emplace_back([state = state_.get()] { state->serve(); });
}

WorkerPool::~WorkerPool() {
  {
    const std::lock_guard guard(state_->mutex);
    state_->stopping = true;
  }
  state_->work_ready.notify_all();
}

unsigned WorkerPool::workers() const noexcept { return static_cast<unsigned>(state_->threads.size()) + 1U; }

void WorkerPool::for_each_index(std::size_t count, const std::function<void(std::size_t)>& job) {
  if (count == 0) return;
  State& s = *state_;
  const bool together = count > 1 && !s.threads.empty();
  {
    const std::lock_guard guard(s.mutex);
    s.job = &job;
    s.count = count;
    s.next = 0;
    s.fault = nullptr;
    s.running = together ? s.threads.size() : 0;
    if (together) ++s.round;
  }
  if (together) s.work_ready.notify_all();
  s.run_jobs();
  std::unique_lock lock(s.mutex);
  s.work_done.wait(lock, [&] { return s.running == 0; });
  s.job = nullptr;
  if (s.fault) std::rethrow_exception(std::exchange(s.fault, nullptr));
}

unsigned WorkerPool::default_workers() {
  cpu_set_t allowed;
  CPU_ZERO(&allowed);
  if (sched_getaffinity(0, sizeof allowed, &allowed) != 0) return 1;
  return static_cast<unsigned>(std::max(CPU_COUNT(&allowed), 1));
}

}  // namespace bandwright
