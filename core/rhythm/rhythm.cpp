// Chronodrome, GPL-3.0-or-later.
#include "rhythm/rhythm.h"

#include <algorithm>
#include <tuple>

#include "rhythm/av_block.h"
#include "rhythm/silence.h"

namespace chronodrome::rhythm {
namespace {

/// What no other row covers is regular.
std::vector<Episode> regular_between(const std::vector<Episode>& others, Seconds end) {
  std::vector<Episode> found;
  Seconds reached(0.0);
  const auto close = [&](Seconds until) {
    if (until - reached > Seconds(1e-9)) found.push_back({reached, until, "regular", ""});
  };
  for (const auto& episode : others) {
    if (episode.start > reached) close(episode.start);
    reached = std::max(reached, episode.end);
  }
  close(end);
  return found;
}

void sort_by_start(std::vector<Episode>& episodes) {
  std::sort(episodes.begin(), episodes.end(), [](const Episode& a, const Episode& b) {
    return std::tuple(a.start.value(), a.end.value(), a.kind) <
           std::tuple(b.start.value(), b.end.value(), b.kind);
  });
}

void add_unreadable(const activation::ChannelActivations& chamber, std::vector<Episode>& episodes) {
  for (const auto& bad : chamber.unreadable) {
    episodes.push_back(
        {bad.span.start, bad.span.end, "unreadable", "channel=" + chamber.channel + ";reason=" + bad.reason});
  }
}

} // namespace

std::optional<Error> RhythmSettings::check() const {
  const auto wrong = [](const char* what, const char* remedy) {
    return Error{ErrorCode::bad_usage, "", {}, what, remedy};
  };
  if (!(first_degree_ratio > 1.0))
    return wrong("rhythm.first_degree_ratio must exceed 1", "set it to 1.5, for example");
  if (!(reference_period > Seconds(0.0)))
    return wrong("rhythm.reference_period_s must exceed 0", "leave it out for 60 s");
  if (!(pause_ratio > 1.0)) return wrong("rhythm.pause_ratio must exceed 1", "set it to 1.7, for example");
  if (!(arrest_shortest > Seconds(0.0)) || !(arrest_cycles > 0.0)) {
    return wrong("rhythm.arrest_shortest_s and rhythm.arrest_cycles must exceed 0",
                 "leave them out for 5 s and 6 cycles");
  }
  if (complete_block_beats < 2 || !(complete_block_time > Seconds(0.0))) {
    return wrong("rhythm.complete_block_beats must be 2 or more and rhythm.complete_block_s above 0",
                 "leave them out for 5 beats and 2 s");
  }
  if (running_beats < 3) return wrong("rhythm.running_beats must be 3 or more", "leave it out for 8");
  if (longest_group < 3) return wrong("rhythm.longest_group must be 3 or more", "leave it out for 15");
  if (!(timing_tolerance >= Seconds(0.0)))
    return wrong("rhythm.timing_tolerance_s must not be negative", "leave it out for 0.001 s");
  return std::nullopt;
}

Result<Rhythm> compute(const RhythmInputs& inputs, const RhythmSettings& settings) {
  if (auto error = settings.check()) return *error;
  Rhythm rhythm;
  auto& episodes = rhythm.episodes;
  if (inputs.atrial != nullptr) {
    add_unreadable(*inputs.atrial, episodes);
    const auto silence = find_silence(*inputs.atrial, true, inputs.end, settings);
    episodes.insert(episodes.end(), silence.begin(), silence.end());
  }
  if (inputs.ventricular != nullptr) {
    add_unreadable(*inputs.ventricular, episodes);
    // The ventricle leads where no atrial electrode was recorded.
    if (inputs.atrial == nullptr) {
      const auto silence = find_silence(*inputs.ventricular, false, inputs.end, settings);
      episodes.insert(episodes.end(), silence.begin(), silence.end());
    }
  }
  if (inputs.av != nullptr) {
    const auto block = find_av_block(*inputs.av, inputs.end, settings);
    episodes.insert(episodes.end(), block.begin(), block.end());
  }
  sort_by_start(episodes);
  const auto regular = regular_between(episodes, inputs.end);
  if (inputs.atrial != nullptr || inputs.ventricular != nullptr) {
    episodes.insert(episodes.end(), regular.begin(), regular.end());
  }
  sort_by_start(episodes);
  return rhythm;
}

} // namespace chronodrome::rhythm
