// Chronodrome, GPL-3.0-or-later.
#include "intake/watched_source.h"

namespace chronodrome::intake {

Result<std::size_t> WatchedSource::read_at(std::uint64_t offset, std::span<std::byte> out) const {
  if (cancelled_.load(std::memory_order_relaxed))
    return Error{ErrorCode::cancelled, path(), {}, "the reading was stopped", "start it again"};
  auto got = source_.read_at(offset, out);
  if (got) delivered_.fetch_add(*got, std::memory_order_relaxed);
  return got;
}

} // namespace chronodrome::intake
