// Chronodrome, GPL-3.0-or-later.
#include "session/progress.h"

#include <algorithm>

namespace chronodrome::session {

bool Progress::is_stopped() const {
  return watch_.cancelled != nullptr && watch_.cancelled->load();
}

void Progress::expect(const std::vector<recording::Channel>& channels) {
  for (const auto& channel : channels)
    samples_ += channel.time_base().size();
}

bool Progress::read_on(const recording::Channel& channel, std::size_t samples) {
  if (is_stopped()) return false;
  if (!watch_.progress) return true;
  const std::lock_guard lock(mutex_);
  passed_ += samples;
  const double share = static_cast<double>(passed_) / static_cast<double>(std::max<std::size_t>(1, samples_));
  told_ = std::max(told_, stages::kPairing * std::min(1.0, share));
  watch_.progress(told_, "finding activations on " + channel.label);
  return !is_stopped();
}

void Progress::tell(double share, const std::string& doing) {
  if (!watch_.progress || is_stopped()) return;
  const std::lock_guard lock(mutex_);
  told_ = std::max(told_, share);
  watch_.progress(told_, doing);
}

} // namespace chronodrome::session
