// Chronodrome, GPL-3.0-or-later.
#include "activation/deflection.h"

#include <algorithm>
#include <array>
#include <cmath>

#include "conditioning/conditioning.h"

namespace chronodrome::activation {
namespace {

/// Reach of a deflection about its steepest part, in units of peak to peak over steepest slope. The lobes of
/// a front with Gaussian derivative lie at 0.8 of it, the peak of a Gaussian at 0.6.
constexpr double kExtent = 1.6;

struct Window {
  std::size_t first = 0;
  std::size_t end = 0; ///< exclusive
};

Window about(std::size_t centre, double half_s, double fs, std::size_t size, std::size_t edge) {
  const auto half = static_cast<std::size_t>(std::ceil(half_s * fs));
  const std::size_t first = std::max(centre > half ? centre - half : 0, edge);
  const std::size_t end = std::min(centre + half + 1, size > edge ? size - edge : 0);
  return {first, std::max(first, end)};
}

/// Extreme of sign * value(n) over a window, refined by a parabola where both neighbours exist.
template <class Value>
Summit extreme(Window window, double sign, Value value, std::size_t lowest, std::size_t highest,
               double& position) {
  std::size_t best = window.first;
  double height = sign * value(best);
  for (std::size_t n = window.first + 1; n < window.end; ++n) {
    const double v = sign * value(n);
    if (v > height) best = n, height = v;
  }
  Summit summit{0.0, height};
  if (best > lowest && best + 1 < highest)
    summit = parabola_summit(sign * value(best - 1), height, sign * value(best + 1));
  position = static_cast<double>(best) + summit.offset;
  return summit;
}

/// Median of up to 25 samples spread evenly over a stretch: a level, for which more would be wasted.
double median_within(std::span<const double> x, double first, double end) {
  const double n = static_cast<double>(x.size());
  const auto low = static_cast<std::size_t>(std::clamp(first, 0.0, n));
  const auto high = static_cast<std::size_t>(std::clamp(end, 0.0, n));
  if (high <= low) return 0.0;
  constexpr std::size_t kMost = 25;
  std::array<double, kMost> some{};
  const std::size_t stride = (high - low + kMost - 1) / kMost;
  std::size_t count = 0;
  for (std::size_t i = low; i < high; i += stride)
    some[count++] = x[i];
  const auto middle = some.begin() + static_cast<std::ptrdiff_t>(count / 2);
  std::nth_element(some.begin(), middle, some.begin() + static_cast<std::ptrdiff_t>(count));
  return *middle;
}

/// How far the level right behind a deflection differs from that right before it, as far as it still does so
/// 2 to 3 refractory times away: a wave that follows the beat comes back, a beat beside a step has none.
double lasting_shift(std::span<const double> x, double centre, double near, double refractory,
                     double near_length) {
  if (centre < 3.0 * refractory || centre + 3.0 * refractory + 1.0 >= static_cast<double>(x.size()))
    return 0.0;
  const double close = median_within(x, centre + near, centre + near + near_length) -
                       median_within(x, centre - near - near_length, centre - near);
  const double far = median_within(x, centre + 2.0 * refractory, centre + 3.0 * refractory) -
                     median_within(x, centre - 3.0 * refractory, centre - 2.0 * refractory);
  if (close * far <= 0.0) return 0.0;
  return std::abs(close) < std::abs(far) ? close : far;
}

/// A second steep part at least 70 % as steep, more than 3 ms away, with a flatter part between.
bool has_second_fall(std::span<const double> x, Window window, const SlopeFilter& slope, double at,
                     double fall, double fs) {
  const double far = 3e-3 * fs;
  for (std::size_t n = window.first + 1; n + 1 < window.end; ++n) {
    if (std::abs(static_cast<double>(n) - at) <= far) continue;
    const double here = -slope.at(x, n);
    if (here >= 0.7 * fall && here >= -slope.at(x, n - 1) && here > -slope.at(x, n + 1)) return true;
  }
  return false;
}

/// Centroid of the squared slope over a window that moves along with it: of a broad deflection the peak can
/// be either flank, as noise decides, and a window about one flank holds only part of the other.
double centre_of_slope(std::span<const double> x, std::size_t peak, double half_s, double fs,
                       const SlopeFilter& slope) {
  constexpr int kMoves = 8;
  double centre = static_cast<double>(peak);
  for (int move = 0; move < kMoves; ++move) {
    const Window window =
        about(static_cast<std::size_t>(std::llround(centre)), half_s, fs, x.size(), slope.reach());
    double energy = 0.0;
    double moment = 0.0; // about the first sample
    for (std::size_t n = window.first; n < window.end; ++n) {
      const double square = slope.at(x, n) * slope.at(x, n);
      energy += square;
      moment += static_cast<double>(n - window.first) * square;
    }
    if (energy <= 0.0) break;
    const double next = static_cast<double>(window.first) + moment / energy;
    const bool stays = std::abs(next - centre) < 0.01;
    centre =
        std::clamp(next, static_cast<double>(peak) - half_s * fs, static_cast<double>(peak) + half_s * fs);
    if (stays) break;
  }
  return std::max(centre, 0.0);
}

Shape shape_of(std::span<const double> x, double centre, double width, double fs) {
  constexpr std::size_t n = std::tuple_size_v<Shape>;
  std::array<double, n> points{};
  double mean = 0.0;
  for (std::size_t k = 0; k < n; ++k) {
    const double share = static_cast<double>(k) / static_cast<double>(n - 1);
    const double at = std::clamp(centre + (-1.0 / 3.0 + share * 5.0 / 6.0) * width * fs, 0.0,
                                 static_cast<double>(x.size()) - 1.001);
    const auto i = static_cast<std::size_t>(at);
    const double f = at - static_cast<double>(i);
    points[k] = i + 1 < x.size() ? x[i] * (1.0 - f) + x[i + 1] * f : x[i];
    mean += points[k] / static_cast<double>(n);
  }
  double largest = 0.0;
  for (double& p : points)
    p -= mean, largest = std::max(largest, std::abs(p));
  Shape shape{};
  if (largest <= 0.0) return shape;
  for (std::size_t k = 0; k < n; ++k)
    shape[k] = static_cast<std::int8_t>(std::lround(127.0 * points[k] / largest));
  return shape;
}

/// The middle of a clipped run, where the lobe was cut off: its flanks are all that is known of the peak.
void centre_on_clip(std::span<const std::uint8_t> flags, double& position) {
  const auto at = static_cast<std::size_t>(std::max(0.0, std::round(position)));
  if (at >= flags.size() || (flags[at] & conditioning::kClipped) == 0) return;
  std::size_t first = at;
  std::size_t last = at;
  while (first > 0 && (flags[first - 1] & conditioning::kClipped) != 0)
    --first;
  while (last + 1 < flags.size() && (flags[last + 1] & conditioning::kClipped) != 0)
    ++last;
  position = 0.5 * static_cast<double>(first + last);
}

} // namespace

void measure_deflection(const DeflectionSignals& signals, std::size_t peak, Hertz rate,
                        const SlopeFilter& slope, const conditioning::SpeciesTraits& traits,
                        Seconds refractory, Candidate& candidate) {
  const double fs = rate.value();
  const auto x = signals.timing;
  const std::size_t reach = slope.reach();
  const double refine = traits.refine_window.value();
  const Window steep = about(peak, refine, fs, x.size(), reach);
  const double half_width = std::max(refine, 0.5 * traits.deflection_width.value());
  const Window lobes = about(peak, half_width, fs, x.size(), 0);
  const auto slope_at = [&](std::size_t n) { return slope.at(x, n); };
  const auto value_at = [&](std::size_t n) { return x[n]; };
  candidate.centre_at = static_cast<double>(peak);
  if (steep.first < steep.end) {
    candidate.fall =
        static_cast<float>(extreme(steep, -1.0, slope_at, reach, x.size() - reach, candidate.fall_at).height);
    candidate.rise =
        static_cast<float>(extreme(steep, 1.0, slope_at, reach, x.size() - reach, candidate.rise_at).height);
    candidate.is_double = has_second_fall(x, steep, slope, candidate.fall_at, candidate.fall, fs);
    double energy = 0.0;
    for (std::size_t n = std::max(lobes.first, reach); n < std::min(lobes.end, x.size() - reach); ++n)
      energy += slope_at(n) * slope_at(n);
    candidate.slope_energy = static_cast<float>(energy);
    candidate.centre_at = centre_of_slope(x, peak, half_width, fs, slope);
  }
  const double centre = static_cast<double>(peak);
  const double around = std::max(0.04, 1.5 * traits.deflection_width.value()) * fs;
  const double baseline = median_within(x, centre - around, centre + around + 1.0);
  const Summit highest = extreme(lobes, 1.0, value_at, 0, x.size(), candidate.top_at);
  const Summit lowest = extreme(lobes, -1.0, value_at, 0, x.size(), candidate.bottom_at);
  candidate.amplitude = static_cast<float>(highest.height + lowest.height);
  const double steepest = candidate.fall >= candidate.rise ? candidate.fall_at : candidate.rise_at;
  const double steepness = static_cast<double>(std::max(candidate.fall, candidate.rise));
  // The lobes of the deflection itself lie beside its steepest part; farther away another wave may be larger.
  const double extent =
      steepness > 0.0 ? kExtent * static_cast<double>(candidate.amplitude) / steepness : half_width;
  const Window own = about(static_cast<std::size_t>(std::max(0.0, std::round(steepest))),
                           std::min(half_width, extent), fs, x.size(), 0);
  if (own.first < own.end) {
    candidate.top =
        static_cast<float>(extreme(own, 1.0, value_at, 0, x.size(), candidate.top_at).height - baseline);
    candidate.bottom =
        static_cast<float>(extreme(own, -1.0, value_at, 0, x.size(), candidate.bottom_at).height + baseline);
  }
  for (std::size_t n = lobes.first; n < lobes.end; ++n)
    candidate.is_clipped = candidate.is_clipped || (signals.flags[n] & conditioning::kClipped) != 0;
  if (candidate.is_clipped) {
    centre_on_clip(signals.flags, candidate.top_at);
    centre_on_clip(signals.flags, candidate.bottom_at);
  }
  candidate.baseline_shift = static_cast<float>(
      lasting_shift(x, centre, half_width * fs + 0.002 * fs, refractory.value() * fs, 0.02 * fs));
  candidate.shape = shape_of(signals.detection, candidate.centre_at, traits.deflection_width.value(), fs);
}

double similarity(const Shape& a, const Shape& b) {
  double ab = 0.0, aa = 0.0, bb = 0.0;
  for (std::size_t k = 0; k < a.size(); ++k) {
    ab += static_cast<double>(a[k]) * b[k];
    aa += static_cast<double>(a[k]) * a[k];
    bb += static_cast<double>(b[k]) * b[k];
  }
  return aa > 0.0 && bb > 0.0 ? ab / std::sqrt(aa * bb) : 0.0;
}

} // namespace chronodrome::activation
