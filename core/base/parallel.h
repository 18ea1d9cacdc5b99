// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <functional>

namespace chronodrome {

/// Calls work(0) ... work(count - 1) on up to `threads` threads (0: as many as the machine has). Each call
/// must write only to its own place, so that the result is the same for any number of threads. The exception
/// of the lowest failing index is thrown again after all have ended.
void parallel_for(std::size_t count, unsigned threads, const std::function<void(std::size_t)>& work);

} // namespace chronodrome
