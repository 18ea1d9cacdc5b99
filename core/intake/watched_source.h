// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <atomic>
#include <cstdint>
#include <string>

#include "base/result.h"
#include "intake/source_file.h"

namespace chronodrome::intake {

/// Another source, with the way to see how far reading has come and to stop it from another thread.
/// Errors of read_at: those of the source; cancelled, once `cancelled` has become true.
class WatchedSource : public ByteSource {
public:
  /// Requires: source, delivered and cancelled outlive this object. `delivered` counts bytes handed out; a
  /// reader may take a file twice (its digest, then its samples).
  WatchedSource(const ByteSource& source, std::atomic<std::uint64_t>& delivered,
                const std::atomic<bool>& cancelled)
      : source_(source), delivered_(delivered), cancelled_(cancelled) {}

  [[nodiscard]] const std::string& path() const override { return source_.path(); }
  [[nodiscard]] std::uint64_t size() const override { return source_.size(); }
  [[nodiscard]] Result<std::size_t> read_at(std::uint64_t offset, std::span<std::byte> out) const override;
  [[nodiscard]] bool changed() const override { return source_.changed(); }

private:
  const ByteSource& source_;
  std::atomic<std::uint64_t>& delivered_;
  const std::atomic<bool>& cancelled_;
};

} // namespace chronodrome::intake
