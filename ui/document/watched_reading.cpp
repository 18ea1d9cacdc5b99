// Chronodrome, GPL-3.0-or-later.
#include "ui/document/watched_reading.h"

#include <algorithm>
#include <atomic>
#include <filesystem>
#include <memory>
#include <mutex>

#include "intake/watched_source.h"

namespace fs = std::filesystem;

namespace chronodrome::ui {
namespace {

/// How many bytes have come of all that are expected: a file is read for its digest, then for its samples.
class ByteCount {
public:
  ByteCount(const std::vector<std::string>& paths, const session::Watch& watch) : watch_(watch) {
    for (const auto& path : paths) {
      std::error_code fault;
      const auto size = fs::file_size(path, fault);
      if (!fault) expected_ += 2.0 * static_cast<double>(size);
    }
  }
  void tell(std::uint64_t delivered, const std::string& path) {
    if (!watch_.progress) return;
    const std::lock_guard lock(mutex_);
    const double share = std::min(0.99, static_cast<double>(delivered) / std::max(1.0, expected_));
    if (share < told_) return; // threads may come here in another order than they read
    told_ = share;
    watch_.progress(share, "reading " + fs::path(path).filename().string());
  }

private:
  const session::Watch& watch_;
  std::mutex mutex_;
  double expected_ = 0.0, told_ = 0.0;
};

class ReportingSource : public intake::WatchedSource {
public:
  ReportingSource(const intake::ByteSource& source, std::atomic<std::uint64_t>& delivered,
                  const std::atomic<bool>& cancelled, ByteCount& count)
      : WatchedSource(source, delivered, cancelled), all_delivered_(delivered), count_(count) {}

  [[nodiscard]] Result<std::size_t> read_at(std::uint64_t offset, std::span<std::byte> out) const override {
    auto got = WatchedSource::read_at(offset, out);
    count_.tell(all_delivered_.load(std::memory_order_relaxed), path());
    return got;
  }

private:
  std::atomic<std::uint64_t>& all_delivered_;
  ByteCount& count_;
};

} // namespace

Result<recording::Recording> readWatched(const std::vector<std::string>& paths,
                                         const intake::ReadSettings& settings, const session::Watch& watch) {
  ByteCount count(paths, watch);
  std::atomic<std::uint64_t> delivered{0};
  for (const auto& path : paths) {
    const auto source = intake::open_source_file(path);
    if (!source) return source.error();
    const ReportingSource watched(**source, delivered, *watch.cancelled, count);
    auto recording = intake::read_recording(watched, settings);
    if (!recording || paths.size() == 1) return recording;
    // Of several files each has now left its samples in the cache, where the joining finds them.
  }
  return intake::read_recordings(paths, settings);
}

} // namespace chronodrome::ui
