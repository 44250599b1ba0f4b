// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <cstddef>
#include <functional>
#include <memory>

namespace bandwright {

/// Workers that live as long as the pool, for loops of independent jobs. Each job writes only its
/// own slot, sums are taken afterwards in index order: results do not depend on the worker count.
class WorkerPool {
 public:
  /// `workers` counts the calling thread; at least 1.
  explicit WorkerPool(unsigned workers = default_workers());
  ~WorkerPool();
  WorkerPool(const WorkerPool&) = delete;
  WorkerPool& operator=(const WorkerPool&) = delete;
  WorkerPool(WorkerPool&&) = delete;
  WorkerPool& operator=(WorkerPool&&) = delete;

  [[nodiscard]] unsigned workers() const noexcept;

  /// Runs job(0) .. job(count - 1), each once, and returns when all are done. When jobs throw, no
  /// new job is begun and the exception of the lowest index among those begun is rethrown.
  /// Not reentrant: a job must not call into the pool it runs on.
  void for_each_index(std::size_t count, const std::function<void(std::size_t)>& job);

  /// Processors this process may use (its affinity mask, not the machine's count).
  [[nodiscard]] static unsigned default_workers();

 private:
  struct State;
  std::unique_ptr<State> state_;
};

}  // namespace bandwright
