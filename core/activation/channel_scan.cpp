// Chronodrome, GPL-3.0-or-later.
#include "activation/channel_scan.h"

#include <algorithm>
#include <cmath>

#include "activation/candidate_search.h"
#include "activation/deflection.h"
#include "activation/noise_meter.h"

namespace chronodrome::activation {
namespace {

/// Deflections this near to something that cannot be read are artefacts of its edge.
constexpr double kEdge_s = 3e-3;

class ElectrogramScan {
public:
  ElectrogramScan(const recording::Channel& channel, const ActivationSettings& settings, ChannelScan& scan)
      : channel_(channel), settings_(settings), scan_(scan), rate_(channel.time_base().rate()), slope_(rate_),
        meter_(channel) {}

  void receive(const conditioning::ConditionedBlock& block) {
    detection_function(block.detection, slope_, rate_, scan_.traits.detection_mean, scratch_, strength_);
    PeakSearch search;
    search.rate = rate_;
    search.refractory = scan_.refractory;
    search.floor_ratio = settings_.noise_ratio;
    // Four times this are two steps of the converter passing through the mean.
    search.least_noise = 0.5 * block.step * rate_.value() /
                         static_cast<double>(detection_width(rate_, scan_.traits.detection_mean));
    const std::size_t low = block.core_first - block.first;
    const std::size_t high = block.core_end - block.first;
    const std::vector<Peak> peaks = find_peaks(strength_, low, high, search);
    for (const Peak& peak : peaks)
      keep(block, peak);
    measure_noise(block, peaks);
  }

  std::vector<WindowNoise> finish() { return meter_.finish(); }

private:
  void keep(const conditioning::ConditionedBlock& block, const Peak& peak) {
    if (touches_edge(block, peak.index)) return;
    Candidate candidate;
    candidate.run = block.run;
    candidate.height = static_cast<float>(peak.height);
    candidate.noise = static_cast<float>(peak.noise);
    candidate.slow_noise = static_cast<float>(peak.slow_noise);
    measure_deflection({block.timing, block.detection, block.flags}, peak.index, rate_, slope_, scan_.traits,
                       scan_.refractory, candidate);
    const double first = static_cast<double>(block.first);
    candidate.peak = peak.index + block.first;
    candidate.fall_at += first;
    candidate.rise_at += first;
    candidate.top_at += first;
    candidate.bottom_at += first;
    candidate.centre_at += first;
    candidate.time = channel_.time_at(candidate.centre_at);
    scan_.candidates.push_back(candidate);
  }

  /// True within 3 ms of a bridged stretch or of the ends of the run.
  [[nodiscard]] bool touches_edge(const conditioning::ConditionedBlock& block, std::size_t at) const {
    const auto edge = static_cast<std::size_t>(std::ceil(kEdge_s * rate_.value()));
    if (at < edge || at + edge >= block.flags.size()) return true;
    return std::any_of(block.flags.begin() + static_cast<std::ptrdiff_t>(at - edge),
                       block.flags.begin() + static_cast<std::ptrdiff_t>(at + edge + 1),
                       [](std::uint8_t f) { return (f & conditioning::kUnreadable) != 0; });
  }

  /// Noise is what lies between the deflections: not within their width, not where the signal moves strongly.
  void measure_noise(const conditioning::ConditionedBlock& block, const std::vector<Peak>& peaks) {
    const auto width = static_cast<std::size_t>(scan_.traits.deflection_width.value() * rate_.value());
    std::size_t next = 0;
    meter_.look_at(block, [&](std::size_t i) {
      while (next < peaks.size() && peaks[next].index + width < i)
        ++next;
      if (next >= peaks.size()) return true;
      return i + width < peaks[next].index && strength_[i] < 3.0 * peaks[next].noise;
    });
  }

  const recording::Channel& channel_;
  const ActivationSettings& settings_;
  ChannelScan& scan_;
  Hertz rate_;
  SlopeFilter slope_;
  NoiseMeter meter_;
  std::vector<double> scratch_, strength_;
};

} // namespace

Seconds refractory_of(const recording::Channel& channel, const ActivationSettings& settings) {
  const auto traits = conditioning::traits_of(settings.conditioning.species);
  const bool atrial = channel.role == recording::Role::atrial || channel.role == recording::Role::sinus;
  return atrial ? settings.refractory_atrial.value_or(traits.refractory_atrial)
                : settings.refractory_ventricular.value_or(traits.refractory_ventricular);
}

Result<ChannelScan> scan_electrogram(const recording::Channel& channel, const ActivationSettings& settings,
                                     const conditioning::Proceed& proceed) {
  ChannelScan scan;
  scan.channel = &channel;
  scan.traits = conditioning::traits_of(settings.conditioning.species);
  scan.refractory = refractory_of(channel, settings);
  ElectrogramScan electrogram(channel, settings, scan);
  auto report = conditioning::condition(
      channel, settings.conditioning,
      [&](const conditioning::ConditionedBlock& block) { electrogram.receive(block); }, proceed);
  if (!report.ok()) return report.error();
  scan.report = std::move(report).value();
  scan.noise = electrogram.finish();
  return scan;
}

} // namespace chronodrome::activation
