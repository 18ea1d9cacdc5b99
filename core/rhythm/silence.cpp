// Chronodrome, GPL-3.0-or-later.
#include "rhythm/silence.h"

#include <algorithm>

#include "base/number_text.h"
#include "numerics/robust.h"

namespace chronodrome::rhythm {
namespace {

bool readable(const activation::ChannelActivations& chamber, Seconds from, Seconds to) {
  return std::none_of(chamber.unreadable.begin(), chamber.unreadable.end(),
                      [&](const auto& bad) { return bad.span.start < to && from < bad.span.end; });
}

/// Median of up to `count` intervals that end at or before mark `last`, or of the first ones where none
/// precede.
double running_cycle(const std::vector<double>& intervals, std::size_t before, std::size_t count) {
  if (intervals.empty()) return 0.0;
  const std::size_t end = before > 0 ? before : std::min(count, intervals.size());
  const std::size_t start = end > count ? end - count : 0;
  return numerics::median(std::span(intervals).subspan(start, end - start));
}

} // namespace

std::vector<Episode> find_silence(const activation::ChannelActivations& chamber, bool is_atrial, Seconds end,
                                  const RhythmSettings& settings) {
  std::vector<Episode> found;
  const std::string who = is_atrial ? "atrial" : "ventricular";
  const auto& marks = chamber.marks;
  if (marks.empty()) {
    if (end >= settings.arrest_shortest && readable(chamber, Seconds(0.0), end)) {
      found.push_back(
          {Seconds(0.0), end, "arrest", "chamber=" + who + ";channel=" + chamber.channel + ";beats=0"});
    }
    return found;
  }
  // Only cycles that are not themselves pauses may set the running cycle.
  std::vector<double> cycles;
  const auto consider = [&](Seconds from, Seconds to, bool between_beats) {
    const double length = (to - from).value();
    const double cycle = running_cycle(cycles, cycles.size(), settings.running_beats);
    if (cycle <= 0.0 || !readable(chamber, from, to)) return false;
    const double arrest_limit = std::max(settings.arrest_shortest.value(), settings.arrest_cycles * cycle);
    const std::string numbers = "chamber=" + who + ";channel=" + chamber.channel +
                                ";interval_ms=" + fixed_text(length * 1e3, 1) +
                                ";running_cycle_ms=" + fixed_text(cycle * 1e3, 1);
    if (length > arrest_limit) {
      found.push_back({from, to, "arrest", numbers + ";limit_ms=" + fixed_text(arrest_limit * 1e3, 1)});
      return true;
    }
    // A ventricular pause below the arrest limit is what block and escape rows describe.
    if (between_beats && is_atrial && length > settings.pause_ratio * cycle) {
      found.push_back({from, to, "sinus_pause", numbers + ";ratio=" + fixed_text(length / cycle, 2)});
      return true;
    }
    return false;
  };
  // The cycle before the first interval is that of the first intervals, so that an early pause is seen too.
  for (std::size_t i = 1; i < marks.size() && cycles.size() < settings.running_beats; ++i) {
    cycles.push_back((marks[i].time - marks[i - 1].time).value());
  }
  const std::vector<double> opening = cycles;
  consider(Seconds(0.0), marks.front().time, false);
  cycles.clear();
  for (std::size_t i = 1; i < marks.size(); ++i) {
    const Seconds from = marks[i - 1].time;
    const Seconds to = marks[i].time;
    if (!readable(chamber, from, to)) continue;
    if (cycles.size() < settings.running_beats) {
      std::vector<double> padded = opening;
      padded.swap(cycles);
      const bool long_one = consider(from, to, true);
      cycles.swap(padded);
      if (long_one) continue;
    } else if (consider(from, to, true)) {
      continue;
    }
    cycles.push_back((to - from).value());
  }
  if (cycles.empty()) cycles = opening;
  consider(marks.back().time, end, false);
  return found;
}

} // namespace chronodrome::rhythm
