// Chronodrome, GPL-3.0-or-later.
#include "session/preview_traces.h"

#include <algorithm>

namespace chronodrome::session {
namespace {

constexpr Seconds kClose{2.0};

PreviewTrace trace_over(const recording::Channel& channel, Seconds from, Seconds to, std::size_t columns) {
  PreviewTrace trace;
  trace.span = {from, to};
  trace.pieces = recording::trace_of(channel, from, to, columns);
  trace.range = recording::range_of(trace.pieces).value_or(recording::MinMax{});
  return trace;
}

} // namespace

std::vector<SignalPreview> preview_traces(const std::shared_ptr<const recording::Recording>& recording,
                                          std::size_t columns) {
  std::vector<SignalPreview> previews(recording->signals.size());
  for (std::size_t i = 0; i < previews.size(); ++i) {
    const auto& signal = recording->signals[i];
    const auto& runs = signal.time_base.runs();
    if (runs.empty() || !signal.envelope || !(recording->duration > Seconds(0.0))) continue;
    recording::Channel channel;
    channel.recording = recording;
    channel.signal = i;
    previews[i].whole = trace_over(channel, Seconds(0.0), recording->duration, columns);
    const auto longest = std::max_element(runs.begin(), runs.end(),
                                          [](const auto& a, const auto& b) { return a.count < b.count; });
    const Seconds length = period_of(signal.time_base.rate()) * static_cast<double>(longest->count);
    const Seconds shown = std::min(kClose, length);
    const Seconds from = longest->start + (length - shown) * 0.5;
    previews[i].close = trace_over(channel, from, from + shown, columns);
  }
  return previews;
}

} // namespace chronodrome::session
