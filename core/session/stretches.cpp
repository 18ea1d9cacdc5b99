// Chronodrome, GPL-3.0-or-later.
#include "session/stretches.h"

#include <algorithm>
#include <tuple>

#include "activation/stimuli.h"

namespace chronodrome::session {

std::vector<PlateauWindow> plateau_windows(const SessionResult& result) {
  std::vector<PlateauWindow> windows;
  for (const auto& row : result.responses.rows) {
    if (!(row.window_end > row.window_start)) continue;
    const auto same = std::find_if(windows.begin(), windows.end(), [&](const PlateauWindow& window) {
      return window.span.start == row.window_start && window.span.end == row.window_end &&
             window.curve == row.curve && window.concentration == row.concentration;
    });
    if (same != windows.end()) {
      same->measures.push_back(row.measure);
    } else {
      windows.push_back(
          {{row.window_start, row.window_end}, row.curve, row.agent, row.concentration, {row.measure}});
    }
  }
  std::stable_sort(windows.begin(), windows.end(), [](const PlateauWindow& a, const PlateauWindow& b) {
    return std::tuple(a.span.start, a.span.end) < std::tuple(b.span.start, b.span.end);
  });
  return windows;
}

SessionResult unanalysed(const std::shared_ptr<const recording::Recording>& recording) {
  SessionResult result;
  result.recording = recording;
  for (std::size_t i = 0; i < recording->signals.size(); ++i) {
    recording::Channel channel;
    channel.label = recording->signals[i].source;
    channel.unit = recording->signals[i].unit;
    channel.recording = recording;
    channel.signal = i;
    activation::ChannelActivations activations;
    activations.channel = channel.label;
    for (const auto& gap : channel.time_base().gaps())
      activations.unreadable.push_back({gap, "gap"});
    result.activations.push_back(std::move(activations));
    result.channels.push_back(std::move(channel));
  }
  return result;
}

conditioning::ConditioningSettings with_stimuli_blanked(const std::vector<recording::Channel>& channels,
                                                        const conditioning::ConditioningSettings& settings) {
  conditioning::ConditioningSettings blanking = settings;
  for (const auto& channel : channels) {
    if (channel.role != recording::Role::stimulus || channel.time_base().size() == 0) continue;
    const auto spans = activation::blanked_by(activation::find_stimuli(channel));
    blanking.blanked.insert(blanking.blanked.end(), spans.begin(), spans.end());
  }
  std::sort(blanking.blanked.begin(), blanking.blanked.end(),
            [](const recording::Span& a, const recording::Span& b) { return a.start < b.start; });
  return blanking;
}

} // namespace chronodrome::session
