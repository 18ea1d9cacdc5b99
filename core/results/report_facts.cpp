// Chronodrome, GPL-3.0-or-later.
#include "results/report_facts.h"

#include <algorithm>

#include "numerics/robust.h"

namespace chronodrome::results {
namespace {

using recording::Role;
using session::SessionResult;

constexpr double kCycles = 3.25; // three whole cycles, the first mark a little inside
constexpr Seconds kShortest{0.2};
constexpr Seconds kLongest{6.0};

/// Marks of a channel inside a stretch.
std::vector<double> times_in(const activation::ChannelActivations& channel, Seconds start, Seconds end) {
  std::vector<double> times;
  for (const auto& mark : channel.marks) {
    if (mark.time >= start && mark.time < end) times.push_back(mark.time.value());
  }
  return times;
}

std::optional<double> cycle_of(const std::vector<double>& times) {
  if (times.size() < 3) return std::nullopt;
  std::vector<double> cycles;
  for (std::size_t i = 1; i < times.size(); ++i)
    cycles.push_back(times[i] - times[i - 1]);
  return numerics::median(cycles);
}

/// Index of the channel that leads: sinus or atrial if there is one with beats, else the first with beats.
std::optional<std::size_t> leading_channel(const SessionResult& result) {
  std::optional<std::size_t> first;
  for (std::size_t i = 0; i < result.channels.size(); ++i) {
    if (result.activations[i].marks.empty()) continue;
    const Role role = result.channels[i].role;
    if (role == Role::sinus || role == Role::atrial) return i;
    if (!first) first = i;
  }
  return first;
}

/// Cycles of the slowest channel that beats in the window; a blocked ventricle shows a beat or two.
double length_for(const SessionResult& result, std::size_t lead, Seconds start, Seconds end) {
  double length = 0.0;
  for (std::size_t i = 0; i < result.channels.size(); ++i) {
    const auto cycle = cycle_of(times_in(result.activations[i], start, end));
    if (cycle) length = std::max(length, (i == lead ? kCycles : 1.75) * *cycle);
  }
  return length;
}

/// The windows of a curve's first measure that have a length, in order of the steps.
std::vector<Excerpt> windows_of(const SessionResult& result, int curve) {
  std::vector<Excerpt> windows;
  const std::string* measure = nullptr;
  for (const auto& row : result.responses.rows) {
    if (row.curve != curve) continue;
    if (measure == nullptr) measure = &row.measure;
    if (row.measure != *measure || !(row.window_end > row.window_start)) continue;
    windows.push_back({curve, row.concentration, {}, {}, row.window_start, row.window_end});
  }
  return windows;
}

std::vector<Excerpt> three_of(std::vector<Excerpt> steps) {
  if (steps.size() <= 3) return steps;
  return {steps.front(), steps[steps.size() / 2], steps.back()};
}

/// Begins a quarter of a cycle before the beat nearest to the middle of the window, inside the window.
void place(Excerpt& excerpt, const SessionResult& result, std::size_t lead, double length) {
  const double low = excerpt.window_start.value();
  const double high = excerpt.window_end.value();
  double start = 0.5 * (low + high - length);
  const auto times = times_in(result.activations[lead], excerpt.window_start, excerpt.window_end);
  if (const auto cycle = cycle_of(times)) {
    const auto after = std::lower_bound(times.begin(), times.end(), start);
    if (after != times.end()) start = *after - 0.25 * *cycle;
  }
  start = std::clamp(start, low, std::max(low, high - length));
  excerpt.start = Seconds(start);
  excerpt.end = Seconds(std::min(high, start + length));
}

} // namespace

std::vector<Excerpt> typical_beats(const SessionResult& result) {
  std::vector<Excerpt> all;
  const auto lead = leading_channel(result);
  if (!lead) return all;
  for (const auto& curve : result.plan.curves) {
    auto steps = three_of(windows_of(result, curve.number));
    double length = kShortest.value();
    double shortest_window = kLongest.value();
    for (const auto& step : steps) {
      length = std::max(length, length_for(result, *lead, step.window_start, step.window_end));
      shortest_window = std::min(shortest_window, (step.window_end - step.window_start).value());
    }
    length = std::min(length, shortest_window);
    for (auto& step : steps) {
      place(step, result, *lead, length);
      all.push_back(step);
    }
  }
  return all;
}

std::vector<ChannelQuality> channel_qualities(const SessionResult& result) {
  const double low_confidence = std::get<double>(result.settings.at("intervals.low_confidence"));
  std::vector<ChannelQuality> all;
  for (std::size_t i = 0; i < result.channels.size(); ++i) {
    const auto& found = result.activations[i];
    ChannelQuality one;
    one.channel = result.channels[i].label;
    one.activations = found.marks.size();
    one.low_confidence =
        static_cast<std::size_t>(std::count_if(found.marks.begin(), found.marks.end(), [&](const auto& mark) {
          return mark.confidence < low_confidence;
        }));
    std::vector<double> ratios, hums;
    double length = 0.0, clipped = 0.0, lost = 0.0;
    for (const auto& window : found.quality) {
      const double seconds = (window.span.end - window.span.start).value();
      length += seconds;
      clipped += window.clipped_share * seconds;
      lost += window.unreadable_share * seconds;
      if (window.signal_to_noise > 0.0) ratios.push_back(window.signal_to_noise);
      hums.push_back(window.mains_rms);
      if (one.lowest_index && *one.lowest_index <= window.index) continue;
      one.lowest_index = window.index;
      one.lowest_start = window.span.start;
    }
    if (!ratios.empty()) one.signal_to_noise = numerics::median(ratios);
    if (found.mains_hz != 0.0 && !hums.empty()) one.mains_rms = numerics::median(hums);
    one.clipped_share = length > 0.0 ? clipped / length : 0.0;
    one.unreadable_share = length > 0.0 ? lost / length : 0.0;
    one.mains_hz = found.mains_hz;
    if (!found.marks.empty()) one.timing_sd = found.timing_sd;
    all.push_back(std::move(one));
  }
  return all;
}

std::vector<RhythmSum> rhythm_sums(const SessionResult& result) {
  std::vector<RhythmSum> sums;
  for (const auto& episode : result.rhythm.episodes) {
    auto at = std::find_if(sums.begin(), sums.end(),
                           [&](const RhythmSum& sum) { return sum.kind == episode.kind; });
    if (at == sums.end()) at = sums.insert(at, {episode.kind, 0, {}, {}, episode.start});
    const Seconds length = episode.end - episode.start;
    ++at->episodes;
    at->total += length;
    at->longest = std::max(at->longest, length);
  }
  return sums;
}

} // namespace chronodrome::results
