// Chronodrome, GPL-3.0-or-later.
#include "session/inspection.h"

#include <algorithm>
#include <optional>

#include "activation/compute.h"
#include "base/parallel.h"
#include "numerics/robust.h"

namespace chronodrome::session {
namespace {

SignalLook look_at(const recording::Signal& signal, const activation::ChannelActivations& found) {
  SignalLook look;
  if (signal.envelope && signal.time_base.size() > 0) {
    const auto range = signal.envelope->columns(*signal.samples, 0, signal.time_base.size(), 1).front();
    look.min = range.min;
    look.max = range.max;
  }
  std::vector<double> noise;
  double clipped = 0.0;
  for (const auto& window : found.quality) {
    if (window.unreadable_share < 0.5) noise.push_back(window.noise_sd);
    clipped += window.clipped_share * (window.span.end - window.span.start).value();
  }
  if (!noise.empty()) look.noise_sd = numerics::median(noise);
  const double length = (signal.time_base.end() - signal.time_base.start()).value();
  for (const auto& gap : signal.time_base.gaps()) {
    ++look.gaps;
    look.missing += gap.end - gap.start;
  }
  double unreadable = 0.0;
  for (const auto& bad : found.unreadable) {
    if (bad.reason == "gap") continue;
    unreadable += (bad.span.end - bad.span.start).value();
    if (std::find(look.reasons.begin(), look.reasons.end(), bad.reason) == look.reasons.end())
      look.reasons.push_back(bad.reason);
  }
  const double readable = length - look.missing.value();
  if (readable > 0.0) {
    look.clipped_share = std::min(1.0, clipped / readable);
    look.unreadable_share = std::min(1.0, unreadable / readable);
  }
  return look;
}

} // namespace

Result<std::vector<SignalLook>> inspect(const std::shared_ptr<const recording::Recording>& recording,
                                        unsigned threads) {
  const std::size_t count = recording->signals.size();
  std::vector<SignalLook> looks(count);
  std::vector<std::optional<Error>> failures(count);
  parallel_for(count, threads, [&](std::size_t i) {
    if (recording->signals[i].time_base.size() == 0) return;
    recording::Channel channel;
    channel.label = recording->signals[i].source_as_written;
    channel.unit = recording->signals[i].unit;
    channel.recording = recording;
    channel.signal = i;
    const auto found = activation::compute(channel, {});
    if (!found) {
      failures[i] = found.error();
    } else {
      looks[i] = look_at(recording->signals[i], *found);
    }
  });
  for (const auto& failure : failures) {
    if (failure) return *failure;
  }
  return looks;
}

} // namespace chronodrome::session
