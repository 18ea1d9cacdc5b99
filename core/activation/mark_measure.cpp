// Chronodrome, GPL-3.0-or-later.
#include "activation/mark_measure.h"

#include <algorithm>
#include <cmath>
#include <optional>

#include "activation/channel_scan.h"
#include "activation/deflection.h"
#include "activation/mechanics.h"
#include "conditioning/block_maker.h"

namespace chronodrome::activation {
namespace {

constexpr double kReach_s = 6.0;
constexpr Seconds kRiseWindow{20e-3};

/// The signal about a position, prepared as for detection. Nothing where the run is shorter than 32 samples.
std::optional<conditioning::ConditionedBlock> block_about(const recording::Channel& channel, double position,
                                                          const ActivationSettings& settings) {
  const recording::TimeBase& base = channel.time_base();
  const auto sample = std::min(static_cast<std::size_t>(std::max(0.0, position)), base.size() - 1);
  const std::size_t r = base.run_of(sample);
  const recording::Run& run = base.runs()[r];
  if (run.count < 32) return std::nullopt;
  const std::size_t at = sample - run.first;
  const auto reach = static_cast<std::size_t>(kReach_s * base.rate().value());
  conditioning::BlockMaker maker(channel, settings.conditioning);
  conditioning::StillWatch still(base.rate(), run.first, run.count);
  return maker.make(r, at > reach ? at - reach : 0, std::min(run.count, at + reach + 1), still);
}

} // namespace

double peak_to_peak_about(const recording::Channel& channel, double position,
                          const ActivationSettings& settings) {
  const auto block = block_about(channel, position, settings);
  if (!block) return 0.0;
  const Hertz rate = channel.time_base().rate();
  Candidate candidate;
  const double at = std::clamp(std::round(position) - static_cast<double>(block->first), 0.0,
                               static_cast<double>(block->timing.size() - 1));
  measure_deflection({block->timing, block->detection, block->flags}, static_cast<std::size_t>(at), rate,
                     SlopeFilter(rate), conditioning::traits_of(settings.conditioning.species),
                     refractory_of(channel, settings), candidate);
  return static_cast<double>(candidate.amplitude);
}

std::optional<MechanicalBeat> beat_about(const recording::Channel& channel, Seconds time,
                                         const ActivationSettings& settings) {
  const auto position = channel.time_base().position_at(time - channel.skew);
  if (!position) return std::nullopt;
  const auto block = block_about(channel, *position, settings);
  if (!block) return std::nullopt;
  const Hertz rate = channel.time_base().rate();
  const auto& x = block->timing;
  const double centre = *position - static_cast<double>(block->first);
  const double half = kRiseWindow.value() * rate.value();
  const auto low = static_cast<std::size_t>(std::max(2.0, std::floor(centre - half)));
  const auto high = static_cast<std::size_t>(
      std::clamp(std::ceil(centre + half), 2.0, static_cast<double>(x.size()) - 3.0));
  std::size_t best = low;
  for (std::size_t n = low; n <= high; ++n)
    if (x[n + 1] - x[n - 1] > x[best + 1] - x[best - 1]) best = n;
  if (low > high || x[best + 1] - x[best - 1] <= 0.0) return std::nullopt;
  // The neighbouring beats bound the search: the next rises at least a third as steep.
  const double comparable = 0.3 * (x[best + 1] - x[best - 1]);
  const auto spacing =
      static_cast<std::size_t>((refractory_of(channel, settings).value() + 0.02) * rate.value());
  std::size_t from = 1;
  std::size_t to = x.size() - 1;
  const auto is_rise = [&](std::size_t n) {
    const double here = x[n + 1] - x[n - 1];
    return here >= comparable && here >= x[n] - x[n - 2] && here > x[n + 2] - x[n];
  };
  for (std::size_t n = best > spacing ? best - spacing : 1; n > 2; --n)
    if (is_rise(n)) {
      from = n;
      break;
    }
  for (std::size_t n = best + spacing; n + 2 < x.size(); ++n)
    if (is_rise(n)) {
      to = n;
      break;
    }
  const Twitch twitch = measure_twitch(x, best, from, to, rate, channel.role == recording::Role::pressure);
  const auto time_of = [&](double at) { return channel.time_at(at + static_cast<double>(block->first)); };
  return beat_of(twitch, time, time_of(twitch.foot_at), time_of(twitch.peak_at),
                 twitch.half_at > 0.0 ? time_of(twitch.half_at) - time_of(twitch.peak_at) : Seconds(0.0));
}

} // namespace chronodrome::activation
