// Chronodrome, GPL-3.0-or-later.
#include "base/parallel.h"

#include <algorithm>
#include <atomic>
#include <exception>
#include <thread>
#include <vector>

namespace chronodrome {

void parallel_for(std::size_t count, unsigned threads, const std::function<void(std::size_t)>& work) {
  if (threads == 0) threads = std::max(1U, std::thread::hardware_concurrency());
  const std::size_t workers = std::min<std::size_t>(threads, count);
  std::vector<std::exception_ptr> failures(count);
  std::atomic<std::size_t> next{0};
  const auto run = [&] {
    for (std::size_t i = next++; i < count; i = next++) {
      try {
        work(i);
      } catch (...) {
        failures[i] = std::current_exception();
      }
    }
  };
  {
    std::vector<std::jthread> pool;
    for (std::size_t i = 1; i < workers; ++i)
      pool.emplace_back(run);
    run();
  }
  for (const auto& failure : failures) {
    if (failure) std::rethrow_exception(failure);
  }
}

} // namespace chronodrome
