// Chronodrome, GPL-3.0-or-later.
// The search works on differences of grouped samples, which weigh slow wander down by (f / 50 Hz)^2 and leave
// a line and its neighbours alike.
#include "conditioning/mains_presence.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <numbers>

namespace chronodrome::conditioning {
namespace {

constexpr double kTwoPi = 2.0 * std::numbers::pi;
constexpr std::size_t kPooled = 6;  // stretches to either side whose powers are compared
constexpr std::size_t kTracked = 5; // ... over which the phase is followed
// A line whose slope is below this share of the beats' moves no activation, and the foot of paced beats can
// look like it: their rate divides the mains frequency as often as not.
constexpr double kFaintest = 1e-3;
constexpr std::array<double, 4> kSides_hz = {-6.5, -3.5, 3.5, 6.5};
constexpr std::size_t kProbes = 1 + kSides_hz.size();

/// Phasors of the line and its neighbours, group by group from the start of a stretch: cosine and negative
/// sine of each frequency, side by side.
struct ProbeTable {
  ProbeTable(double nominal, double rate, std::size_t grouping, std::size_t groups)
      : line_cycles_per_sample(nominal / rate), phasors(groups) {
    for (std::size_t p = 0; p < kProbes; ++p) {
      const double f = nominal + (p == 0 ? 0.0 : kSides_hz[p - 1]);
      for (std::size_t g = 0; g < groups; ++g) {
        const double angle = -kTwoPi * std::fmod(f / rate * static_cast<double>(g * grouping), 1.0);
        phasors[g][2 * p] = std::cos(angle);
        phasors[g][2 * p + 1] = std::sin(angle);
      }
    }
  }
  double line_cycles_per_sample;
  std::vector<std::array<double, 2 * kProbes>> phasors;
};

HumProbe probe(std::span<const double> samples, std::span<const std::uint8_t> masked, std::size_t first,
               std::size_t end, std::size_t grouping, const ProbeTable& table) {
  HumProbe found;
  found.first = first;
  found.end = end;
  std::array<double, 2 * kProbes> sums{};
  const double share = 1.0 / static_cast<double>(grouping);
  double before = 0.0;
  bool have_before = false;
  std::size_t used = 0;
  std::size_t g = 0;
  for (std::size_t at = first; at + grouping <= end; at += grouping, ++g) {
    double mean = 0.0;
    unsigned bad = 0;
    for (std::size_t i = at; i < at + grouping; ++i) {
      mean += samples[i];
      bad |= masked[i];
    }
    mean *= share;
    const double d = mean - before;
    if (at > first) found.largest_step = std::max(found.largest_step, std::abs(d));
    if (bad == 0 && have_before) {
      ++used;
      const auto& phasors = table.phasors[g];
      for (std::size_t k = 0; k < 2 * kProbes; ++k)
        sums[k] += d * phasors[k];
    }
    have_before = bad == 0;
    before = mean;
  }
  const double start = -kTwoPi * std::fmod(table.line_cycles_per_sample * static_cast<double>(first), 1.0);
  found.line = std::complex(sums[0], sums[1]) * std::polar(1.0, start);
  const auto power = [&](std::size_t p) {
    return sums[2 * p] * sums[2 * p] + sums[2 * p + 1] * sums[2 * p + 1];
  };
  found.line_power = power(0);
  if (used > 0) found.line_step = 2.0 * std::sqrt(power(0)) / static_cast<double>(used);
  for (std::size_t p = 1; p < kProbes; ++p)
    found.side_power += power(p) / static_cast<double>(kSides_hz.size());
  return found;
}

/// Stretches first ... end - 1 beside the one in the middle.
struct Around {
  Around(std::size_t at, std::size_t reach, std::size_t count)
      : first(at > reach ? at - reach : 0), end(std::min(count, at + reach + 1)) {}
  std::size_t first, end;
};

/// Median of a member over the stretches around one.
double median_of(const std::vector<HumProbe>& probes, const Around& around, double HumProbe::*member) {
  std::array<double, 2 * std::max(kPooled, kTracked) + 1> values{};
  const std::size_t n = around.end - around.first;
  for (std::size_t k = 0; k < n; ++k)
    values[k] = probes[around.first + k].*member;
  const auto middle = values.begin() + static_cast<std::ptrdiff_t>(n / 2);
  std::nth_element(values.begin(), middle, values.begin() + static_cast<std::ptrdiff_t>(n));
  return *middle;
}

/// Power at the line over that at the sides, each the median over the neighbouring stretches: one full of
/// artefacts neither hides hum nor looks like it.
double pooled_ratio(const std::vector<HumProbe>& probes, std::size_t at) {
  const Around around(at, kPooled, probes.size());
  const double line = median_of(probes, around, &HumProbe::line_power);
  const double step = median_of(probes, around, &HumProbe::line_step);
  if (line <= 0.0 || step < kFaintest * median_of(probes, around, &HumProbe::largest_step)) return 0.0;
  // A line without any neighbour at all is a line: rounding sets the floor.
  return line / std::max(median_of(probes, around, &HumProbe::side_power), 1e-24 * line);
}

/// The phasors of the neighbouring stretches, those of artefacts held down to the usual size.
struct Track {
  std::vector<std::complex<double>> phasors;
  std::vector<double> times; ///< of the middles, from that of the stretch in question
  /// Sum with the phases turned back by what `offset` Hz would have turned them.
  [[nodiscard]] std::complex<double> turned_back(double offset) const {
    std::complex<double> sum;
    for (std::size_t k = 0; k < phasors.size(); ++k)
      sum += phasors[k] * std::polar(1.0, -kTwoPi * offset * times[k]);
    return sum;
  }
};

Track track_around(const std::vector<HumProbe>& probes, std::size_t at, double rate) {
  Track track;
  const Around around(at, kTracked, probes.size());
  const double usual = std::sqrt(median_of(probes, around, &HumProbe::line_power));
  const auto middle = [&](std::size_t k) {
    return 0.5 * static_cast<double>(probes[k].first + probes[k].end) / rate;
  };
  for (std::size_t k = around.first; k < around.end; ++k) {
    const double size = std::abs(probes[k].line);
    if (size <= 0.0) continue;
    track.phasors.push_back(probes[k].line * (std::min(size, usual) / size));
    track.times.push_back(middle(k) - middle(at));
  }
  return track;
}

/// How far the line lies from the nominal frequency: where the phasors of the neighbouring stretches agree
/// best, made finer by a straight line through their phases.
double offset_hz(const std::vector<HumProbe>& probes, std::size_t at, double rate) {
  constexpr double kStep_hz = 0.05;
  const Track track = track_around(probes, at, rate);
  double best = 0.0;
  double agreement = -1.0;
  for (int k = -10; k <= 10; ++k) {
    const double size = std::abs(track.turned_back(k * kStep_hz));
    if (size > agreement) best = k * kStep_hz, agreement = size;
  }
  const std::complex<double> sum = track.turned_back(best);
  double w = 0.0, wt = 0.0, wp = 0.0, wtt = 0.0, wtp = 0.0;
  for (std::size_t k = 0; k < track.phasors.size(); ++k) {
    const double t = track.times[k];
    const double phase = std::arg(track.phasors[k] * std::polar(1.0, -kTwoPi * best * t) * std::conj(sum));
    if (std::abs(phase) > 0.5 * std::numbers::pi) continue; // an artefact, no part of the line
    const double weight = std::abs(track.phasors[k]);
    w += weight;
    wt += weight * t;
    wp += weight * phase;
    wtt += weight * t * t;
    wtp += weight * t * phase;
  }
  const double spread = w * wtt - wt * wt;
  return best + (spread > 0.0 ? (w * wtp - wt * wp) / spread / kTwoPi : 0.0);
}

} // namespace

std::vector<double> hum_frequencies(std::span<const double> samples, std::span<const std::uint8_t> masked,
                                    std::span<const std::size_t> borders, Hertz rate, std::size_t grouping,
                                    const MainsSettings& settings) {
  std::vector<double> nominals;
  if (settings.nominal != MainsChoice::sixty) nominals.push_back(50.0);
  if (settings.nominal != MainsChoice::fifty) nominals.push_back(60.0);
  const std::size_t count = borders.size() - 1;
  std::size_t longest = 0;
  for (std::size_t k = 0; k < count; ++k)
    longest = std::max(longest, borders[k + 1] - borders[k]);
  std::vector<double> frequency(count, 0.0);
  std::vector<double> best(count, settings.presence_ratio);
  for (const double nominal : nominals) {
    // The farthest neighbour must stay below half the rate of the groups.
    if ((nominal + 7.0) * 2.0 * static_cast<double>(grouping) >= rate.value()) continue;
    const ProbeTable table(nominal, rate.value(), grouping, longest / grouping + 1);
    std::vector<HumProbe> probes;
    for (std::size_t k = 0; k < count; ++k)
      probes.push_back(probe(samples, masked, borders[k], borders[k + 1], grouping, table));
    for (std::size_t k = 0; k < count; ++k) {
      const double ratio = pooled_ratio(probes, k);
      if (ratio <= best[k]) continue;
      best[k] = ratio;
      frequency[k] = nominal + std::clamp(offset_hz(probes, k, rate.value()), -0.5, 0.5);
    }
  }
  return frequency;
}

} // namespace chronodrome::conditioning
