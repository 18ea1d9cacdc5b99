// Chronodrome, GPL-3.0-or-later.
#include <algorithm>
#include <array>
#include <cmath>
#include <numbers>

#include "activation/mechanics.h"
#include "activation/noise_meter.h"
#include "activation/upstroke.h"

namespace chronodrome::activation {
namespace {

constexpr Seconds kExtraRefractory{20e-3};
constexpr double kNoiseWindow_s = 2.0;
constexpr double kFloorSds = 6.0;
constexpr double kFloorSteps = 3.0;
constexpr double kComparable = 0.3;

/// Largest rises first, each taking out lower ones nearer than `spacing`.
std::vector<std::size_t> spaced_rises(std::span<const double> x, std::size_t first, std::size_t end,
                                      std::size_t spacing) {
  std::vector<std::size_t> found;
  const auto rise = [&](std::size_t n) { return x[n + 1] - x[n - 1]; };
  for (std::size_t n = std::max<std::size_t>(first, 2); n < std::min(end, x.size() - 2); ++n) {
    if (rise(n) > 0.0 && rise(n) >= rise(n - 1) && rise(n) > rise(n + 1)) found.push_back(n);
  }
  std::vector<std::size_t> order(found.size());
  for (std::size_t i = 0; i < order.size(); ++i)
    order[i] = i;
  std::stable_sort(order.begin(), order.end(),
                   [&](std::size_t a, std::size_t b) { return rise(found[a]) > rise(found[b]); });
  std::vector<char> gone(found.size(), 0);
  for (const std::size_t i : order) {
    if (gone[i] != 0) continue;
    for (std::size_t k = i; k-- > 0 && found[i] - found[k] < spacing;)
      gone[k] = 1;
    for (std::size_t k = i + 1; k < found.size() && found[k] - found[i] < spacing; ++k)
      gone[k] = 1;
  }
  std::vector<std::size_t> kept;
  for (std::size_t i = 0; i < found.size(); ++i) {
    if (gone[i] == 0) kept.push_back(found[i]);
  }
  return kept;
}

/// Factor by which white noise of SD 1 before the low-pass appears in the derivative behind it: the root of
/// 2 / fs times the integral of (2 pi f)^2 / (1 + (sqrt(2) - 1) (f / cut-off)^4)^2, which is 0.538 (2 pi)^2
/// cut-off^3 in closed form.
double slope_noise_gain(double cutoff, double fs) {
  const double fc = std::min(cutoff, 0.5 * fs);
  return 2.0 * std::numbers::pi * std::sqrt(2.0 * 0.538 * fc * fc * fc / fs);
}

class MechanicalScan {
public:
  MechanicalScan(const recording::Channel& channel, const ActivationSettings& settings, ChannelScan& scan)
      : channel_(channel), scan_(scan), rate_(channel.time_base().rate()), meter_(channel),
        is_pressure_(channel.role == recording::Role::pressure) {
    const Hertz usual = is_pressure_ ? scan.traits.pressure_low_pass : scan.traits.tension_low_pass;
    noise_gain_ =
        slope_noise_gain(settings.conditioning.mechanical_low_pass.value_or(usual).value(), rate_.value());
  }

  void receive(const conditioning::ConditionedBlock& block) {
    if (block.timing.size() < 5) return;
    const double fs = rate_.value();
    const auto spacing = static_cast<std::size_t>(
        std::max(1.0, std::round((scan_.refractory + kExtraRefractory).value() * fs)));
    const std::size_t low = block.core_first - block.first;
    const std::size_t high = block.core_end - block.first;
    // Contractions beyond the block's own samples help to time those inside it.
    const std::size_t margin =
        8 * spacing + static_cast<std::size_t>(std::ceil(kUpstrokeNeighbours.value() * fs));
    const auto rises = spaced_rises(block.timing, low > margin ? low - margin : 0, high + margin, spacing);
    std::vector<Twitch> twitches;
    for (std::size_t i = 0; i < rises.size(); ++i) {
      const auto [from, to] = neighbours(block.timing, rises, i);
      twitches.push_back(measure_twitch(block.timing, rises[i], from, to, rate_, is_pressure_));
    }
    const std::vector<double> steepest = time_upstrokes(block.timing, twitches, rate_);
    prepare_noise(block);
    for (std::size_t i = 0; i < rises.size(); ++i) {
      if (rises[i] < low || rises[i] >= high) continue;
      if ((block.flags[rises[i]] & conditioning::kUnreadable) != 0) continue;
      // The neighbours may not carry the mark off the contraction's own upstroke.
      if (steepest[i] >= twitches[i].foot_at && steepest[i] <= twitches[i].peak_at)
        twitches[i].rise_at = steepest[i];
      keep(block, twitches[i], rises[i]);
    }
    meter_.look_at(block, [](std::size_t) { return true; });
  }

  std::vector<WindowNoise> finish() { return meter_.finish(); }

private:
  /// The nearest rises of comparable steepness, at most 5 s away: foot and relaxation lie between them.
  [[nodiscard]] std::array<std::size_t, 2>
  neighbours(std::span<const double> x, const std::vector<std::size_t>& rises, std::size_t i) const {
    const auto reach = static_cast<std::size_t>(5.0 * rate_.value());
    const auto rise = [&](std::size_t n) { return x[n + 1] - x[n - 1]; };
    const double comparable = kComparable * rise(rises[i]);
    std::size_t from = rises[i] > reach ? rises[i] - reach : 1;
    std::size_t to = std::min(x.size() - 1, rises[i] + reach);
    for (std::size_t k = i; k-- > 0 && rises[k] > from;)
      if (rise(rises[k]) >= comparable) from = rises[k];
    for (std::size_t k = i + 1; k < rises.size() && rises[k] < to; ++k)
      if (rise(rises[k]) >= comparable) to = rises[k];
    return {from, to};
  }

  /// Running sum of what the low-pass took away.
  void prepare_noise(const conditioning::ConditionedBlock& block) {
    sums_.assign(block.detection.size() + 1, 0.0);
    for (std::size_t i = 0; i < block.detection.size(); ++i)
      sums_[i + 1] = sums_[i] + std::abs(block.detection[i]);
  }

  /// What noise, or three steps of the converter, can make of the derivative at a sample.
  [[nodiscard]] double floor_at(const conditioning::ConditionedBlock& block, std::size_t at) const {
    const double fs = rate_.value();
    const auto half = static_cast<std::size_t>(kNoiseWindow_s * fs);
    const std::size_t low = at > half ? at - half : 0;
    const std::size_t high = std::min(block.detection.size(), at + half);
    // Mean |x| of normal noise is sqrt(2/pi) of its SD.
    const double sd =
        (sums_[high] - sums_[low]) / static_cast<double>(high - low) * std::sqrt(std::numbers::pi / 2.0);
    return std::max(kFloorSds * noise_gain_ * sd, 0.0);
  }

  void keep(const conditioning::ConditionedBlock& block, const Twitch& twitch, std::size_t at) {
    const double floor = floor_at(block, at);
    if (twitch.rate_of_rise <= floor || twitch.peak - twitch.foot <= kFloorSteps * block.step) return;
    const auto time = [&](double position) {
      return channel_.time_at(position + static_cast<double>(block.first));
    };
    const Seconds peak = time(twitch.peak_at);
    const Seconds half = twitch.half_at > 0.0 ? time(twitch.half_at) - peak : Seconds(0.0);
    const MechanicalBeat beat = beat_of(twitch, time(twitch.rise_at), time(twitch.foot_at), peak, half);
    scan_.twitches.push_back(beat);
    scan_.twitch_samples.push_back(twitch.rise_at + static_cast<double>(block.first));
    scan_.twitch_floors.push_back(floor);
  }

  const recording::Channel& channel_;
  ChannelScan& scan_;
  Hertz rate_;
  NoiseMeter meter_;
  bool is_pressure_;
  double noise_gain_ = 0.0;
  std::vector<double> sums_;
};

} // namespace

Result<ChannelScan> scan_mechanical(const recording::Channel& channel, const ActivationSettings& settings,
                                    const conditioning::Proceed& proceed) {
  ChannelScan scan;
  scan.channel = &channel;
  scan.traits = conditioning::traits_of(settings.conditioning.species);
  scan.refractory = refractory_of(channel, settings);
  MechanicalScan mechanical(channel, settings, scan);
  auto report = conditioning::condition(
      channel, settings.conditioning,
      [&](const conditioning::ConditionedBlock& block) { mechanical.receive(block); }, proceed);
  if (!report.ok()) return report.error();
  scan.report = std::move(report).value();
  scan.noise = mechanical.finish();
  return scan;
}

} // namespace chronodrome::activation
