// Chronodrome, GPL-3.0-or-later.
#include "session/inspection.h"

#include <algorithm>
#include <cmath>
#include <optional>

#include "activation/compute.h"
#include "base/parallel.h"
#include "numerics/robust.h"

namespace chronodrome::session {
namespace {

/// What the unit makes likely, so that the signal is looked at by the right rules; nothing more follows from
/// it.
recording::Role likely_role(const std::string& unit) {
  for (const char* electrical : {"mV", "uV", "V", "counts", ""}) {
    if (unit == electrical) return recording::Role::ventricular;
  }
  if (unit == "mmHg") return recording::Role::pressure;
  return unit == "mN" || unit == "g" ? recording::Role::tension : recording::Role::other;
}

/// SD of white noise from differences of neighbours, robust against beats: median over up to 60 windows of
/// one second that are spread evenly over the signal.
double noise_of(const recording::Signal& signal) {
  const auto window = static_cast<std::size_t>(std::max(16.0, signal.time_base.rate().value()));
  const std::size_t size = signal.time_base.size();
  if (size < window) return 0.0;
  constexpr std::size_t kWindows = 60;
  const std::size_t stride = std::max(window, size / kWindows);
  std::vector<double> samples(window);
  std::vector<double> steps(window - 1);
  std::vector<double> noise;
  for (std::size_t first = 0; first + window <= size; first += stride) {
    signal.samples->read(first, samples);
    for (std::size_t i = 0; i + 1 < window; ++i)
      steps[i] = samples[i + 1] - samples[i];
    noise.push_back(numerics::mad_sd(steps) / std::sqrt(2.0));
  }
  return numerics::median(noise);
}

SignalLook look_at(const recording::Signal& signal, const activation::ChannelActivations& found) {
  SignalLook look;
  if (signal.envelope && signal.time_base.size() > 0) {
    const auto range = signal.envelope->columns(*signal.samples, 0, signal.time_base.size(), 1).front();
    look.min = range.min;
    look.max = range.max;
  }
  look.noise_sd = noise_of(signal);
  double clipped = 0.0;
  for (const auto& window : found.quality) {
    clipped += window.clipped_share * (window.span.end - window.span.start).value();
  }
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
    channel.role = likely_role(channel.unit);
    if (recording::is_electrogram(channel.role)) channel.lead = recording::Lead::bipolar;
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
