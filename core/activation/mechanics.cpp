// Chronodrome, GPL-3.0-or-later.
#include "activation/mechanics.h"

#include <algorithm>
#include <cmath>

#include "activation/finish.h"
#include "activation/slope.h"
#include "numerics/robust.h"

namespace chronodrome::activation {
namespace {

constexpr double kFootShare = 0.05;
constexpr Seconds kLocal{10.0};
constexpr double kShareOfLargest = 0.2;

double rise_at(std::span<const double> x, std::size_t n, double fs) {
  return 0.5 * fs * (x[n + 1] - x[n - 1]);
}

/// First sample position after `peak` at which the signal has fallen to `level`; 0 if not before `to`.
double falls_to(std::span<const double> x, std::size_t peak, std::size_t to, double level) {
  for (std::size_t n = peak + 1; n < to; ++n) {
    if (x[n] > level) continue;
    const double drop = x[n - 1] - x[n];
    return static_cast<double>(n) - (drop > 0.0 ? (level - x[n]) / drop : 0.0);
  }
  return 0.0;
}

/// Noise over the root of the summed squared slopes, which for a rise like a tanh of height D and slope R are
/// 2/3 rate D R; 1.5 for the loss of a slope detector; at least a twentieth of a sample.
Seconds timing_sd_of(const ChannelScan& scan, const std::vector<MechanicalBeat>& beats) {
  const double fs = scan.channel->time_base().rate().value();
  std::vector<double> noise;
  for (const WindowNoise& window : scan.noise)
    noise.push_back(window.noise_sd);
  std::vector<double> energies;
  for (const MechanicalBeat& beat : beats)
    energies.push_back(2.0 / 3.0 * fs * beat.developed * beat.rate_of_rise);
  if (noise.empty() || energies.empty()) return Seconds(0.05 / fs);
  return Seconds(std::max(0.05 / fs, 1.5 * numerics::median(noise) / std::sqrt(numerics::median(energies))));
}

} // namespace

Twitch measure_twitch(std::span<const double> x, std::size_t rise, std::size_t from, std::size_t to,
                      Hertz rate, bool is_pressure) {
  const double fs = rate.value();
  Twitch twitch;
  const Summit summit =
      parabola_summit(rise_at(x, rise - 1, fs), rise_at(x, rise, fs), rise_at(x, rise + 1, fs));
  twitch.rise_at = static_cast<double>(rise) + summit.offset;
  twitch.rate_of_rise = summit.height;
  const double limit = is_pressure ? kFootShare * summit.height : 0.0;
  std::size_t foot = rise;
  while (foot > from + 1 && foot > 1 && rise_at(x, foot - 1, fs) > limit)
    --foot;
  foot = foot > 1 ? foot - 1 : foot;
  // The lowest of the two samples that the zero of a tension's derivative may lie between.
  if (!is_pressure && x[foot + 1] < x[foot]) ++foot;
  twitch.foot_at = static_cast<double>(foot);
  twitch.foot = x[foot];
  std::size_t peak = rise;
  while (peak + 2 < to && rise_at(x, peak, fs) > 0.0)
    ++peak;
  // A notch on the way up is no peak: the highest sample until the pressure is half-way down again.
  std::size_t best = peak;
  for (std::size_t n = peak; n + 1 < to && x[n] > 0.5 * (x[best] + twitch.foot); ++n)
    if (x[n] > x[best]) best = n;
  if (best > 0 && x[best - 1] > x[best]) --best;
  const Summit top = parabola_summit(x[best - 1], x[best], x[best + 1]);
  twitch.peak_at = static_cast<double>(best) + top.offset;
  twitch.peak = top.height;
  twitch.half_at = falls_to(x, best, to, 0.5 * (twitch.peak + twitch.foot));
  std::size_t steepest = best + 1;
  for (std::size_t n = best + 1; n + 1 < to; ++n)
    if (rise_at(x, n, fs) < rise_at(x, steepest, fs)) steepest = n;
  if (steepest + 2 < x.size() && steepest >= 2) {
    twitch.rate_of_fall = -parabola_summit(-rise_at(x, steepest - 1, fs), -rise_at(x, steepest, fs),
                                           -rise_at(x, steepest + 1, fs))
                               .height;
  }
  return twitch;
}

MechanicalBeat beat_of(const Twitch& twitch, Seconds time, Seconds foot, Seconds peak,
                       Seconds half_relaxation) {
  MechanicalBeat beat;
  beat.time = time;
  beat.foot = foot;
  beat.peak = peak;
  beat.diastolic = twitch.foot;
  beat.systolic = twitch.peak;
  beat.developed = twitch.peak - twitch.foot;
  beat.rate_of_rise = twitch.rate_of_rise;
  beat.rate_of_fall = twitch.rate_of_fall;
  beat.time_to_peak = peak - foot;
  beat.half_relaxation = half_relaxation;
  return beat;
}

ChannelActivations finish_mechanical(const ChannelScan& scan, const ActivationSettings& settings) {
  const recording::Channel& channel = *scan.channel;
  ChannelActivations result;
  result.channel = channel.label;
  result.method = "steepest rise; " + scan.report.method;
  result.warnings = scan.report.warnings;
  for (const auto& range : scan.report.unreadable)
    result.unreadable.push_back({range.span, range.reason});
  result.unreadable = in_order(std::move(result.unreadable));
  const auto& all = scan.twitches;
  std::vector<double> window;
  std::size_t first = 0;
  std::size_t end = 0;
  for (std::size_t i = 0; i < all.size(); ++i) {
    while (all[i].time - all[first].time > kLocal)
      ++first;
    while (end < all.size() && all[end].time - all[i].time <= kLocal)
      ++end;
    window.clear();
    for (std::size_t k = first; k < end; ++k) {
      if (all[k].rate_of_rise > scan.twitch_floors[k]) window.push_back(all[k].rate_of_rise);
    }
    const double floor = scan.twitch_floors[i];
    if (window.empty() || all[i].rate_of_rise <= floor) continue;
    std::sort(window.begin(), window.end());
    const double largest = window[window.size() > 1 ? window.size() - 2 : 0];
    std::erase_if(window, [&](double rise) { return rise < kShareOfLargest * largest; });
    const double level = numerics::quantile(window, 0.75);
    if (all[i].rate_of_rise < settings.twitch_share * level) continue;
    const bool lost = std::any_of(result.unreadable.begin(), result.unreadable.end(), [&](const auto& u) {
      return u.span.start <= all[i].time && all[i].time < u.span.end;
    });
    if (lost) continue;
    if (!result.marks.empty() && all[i].time <= result.marks.back().time) continue;
    Activation mark;
    mark.time = all[i].time;
    mark.sample = scan.twitch_samples[i];
    mark.amplitude = all[i].developed;
    mark.confidence = std::clamp(all[i].rate_of_rise / (0.7 * level), 0.0, 1.0);
    if (floor > 0.0) mark.confidence *= std::clamp((all[i].rate_of_rise / floor - 1.0) / 2.0, 0.0, 1.0);
    result.marks.push_back(mark);
    result.beats.push_back(all[i]);
  }
  result.timing_sd = timing_sd_of(scan, result.beats);
  // Half relaxation must come before the next beat's foot.
  for (std::size_t i = 0; i + 1 < result.beats.size(); ++i) {
    MechanicalBeat& beat = result.beats[i];
    if (beat.half_relaxation > Seconds(0.0) && beat.peak + beat.half_relaxation > result.beats[i + 1].foot)
      beat.half_relaxation = Seconds(0.0);
  }
  return result;
}

} // namespace chronodrome::activation
