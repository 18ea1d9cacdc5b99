// Chronodrome, GPL-3.0-or-later.
#include "simulation/waves.h"

#include <algorithm>
#include <cmath>
#include <numbers>

namespace chronodrome::simulation {
namespace {

struct SampleRange {
  std::size_t first = 0, last = 0; ///< end exclusive
};

SampleRange samples_between(double from, double to, Hertz rate, std::size_t size) {
  const double first = std::ceil(std::max(from, 0.0) * rate.value());
  const double last = std::floor(to * rate.value()) + 1.0;
  if (last <= first) return {};
  const double end = std::min(last, static_cast<double>(size));
  if (end <= first) return {};
  return {static_cast<std::size_t>(first), static_cast<std::size_t>(end)};
}

} // namespace

double unipolar_wave(double u) {
  return -u * std::exp(0.5 - 0.5 * u * u);
}

double bipolar_wave(double u) {
  return (1.0 - u * u) * std::exp(-0.5 * u * u);
}

double bump_wave(double u) {
  return std::exp(-0.5 * u * u);
}

void add_wave(std::span<double> samples, Hertz rate, double (*wave)(double), Seconds t0, Seconds width,
              double height, double reach) {
  const double w = width.value();
  const auto range = samples_between(t0.value() - reach * w, t0.value() + reach * w, rate, samples.size());
  for (std::size_t i = range.first; i < range.last; ++i)
    samples[i] += height * wave((static_cast<double>(i) / rate.value() - t0.value()) / w);
}

double Contraction::at(Seconds since) const {
  if (since <= Seconds(0.0) || since >= length()) return 0.0;
  if (since < rise) return 0.5 - 0.5 * std::cos(std::numbers::pi * (since / rise));
  if (since <= rise + plateau) return 1.0;
  return 0.5 + 0.5 * std::cos(std::numbers::pi * ((since - rise - plateau) / fall));
}

void add_contraction(std::span<double> samples, Hertz rate, const Contraction& contraction, Seconds foot,
                     double height) {
  const auto range =
      samples_between(foot.value(), (foot + contraction.length()).value(), rate, samples.size());
  for (std::size_t i = range.first; i < range.last; ++i)
    samples[i] += height * contraction.at(Seconds(static_cast<double>(i) / rate.value()) - foot);
}

} // namespace chronodrome::simulation
