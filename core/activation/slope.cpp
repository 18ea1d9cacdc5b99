// Chronodrome, GPL-3.0-or-later.
#include "activation/slope.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <numbers>

namespace chronodrome::activation {
namespace {

// Reach 1, 2, 3: sum of the squared weights (both sides) and the divisor.
constexpr std::array<double, 4> kSquares = {0.0, 2.0, 10.0, 28.0};
constexpr std::array<double, 4> kDivisor = {0.0, 2.0, 10.0, 28.0};

std::size_t reach_for(double rate) {
  if (rate >= 2000.0) return 3;
  return rate < 800.0 ? 1 : 2;
}

} // namespace

SlopeFilter::SlopeFilter(Hertz rate)
    : rate_(rate.value()), reach_(reach_for(rate.value())), scale_(rate_ / kDivisor[reach_]),
      noise_gain_(scale_ * std::sqrt(kSquares[reach_])) {}

double SlopeFilter::gain_at(Hertz frequency) const {
  const double w = 2.0 * std::numbers::pi * frequency.value() / rate_;
  double sum = 0.0;
  for (std::size_t k = 1; k <= reach_; ++k)
    sum += static_cast<double>(k) * 2.0 * std::sin(w * static_cast<double>(k));
  return sum / kDivisor[reach_] / w;
}

Summit parabola_summit(double left, double middle, double right) {
  const double bend = left - 2.0 * middle + right;
  if (!(bend < 0.0)) return {0.0, middle};
  const double offset = std::clamp((left - right) / (2.0 * bend), -0.5, 0.5);
  return {offset, middle - 0.25 * (left - right) * offset};
}

std::size_t detection_width(Hertz rate, Seconds mean_over) {
  return 2 * static_cast<std::size_t>(0.5 * mean_over.value() * rate.value() + 1e-9) + 1;
}

void detection_function(std::span<const double> detection, const SlopeFilter& slope, Hertz rate,
                        Seconds mean_over, std::vector<double>& scratch, std::vector<double>& strength) {
  const std::size_t n = detection.size();
  strength.assign(n, 0.0);
  if (n <= 2 * slope.reach()) return;
  const std::size_t width = detection_width(rate, mean_over);
  if (width == 1 || n <= width) {
    slope.magnitudes(detection, strength);
    return;
  }
  scratch.assign(n, 0.0);
  slope.magnitudes(detection, scratch);
  // A sum over any `width` samples is the tail of one group of that size and the head of the next: nothing is
  // ever subtracted, so that silence sums to exactly zero.
  std::vector<double> tail(width);
  const double share = 1.0 / static_cast<double>(width);
  const std::size_t half = width / 2;
  for (std::size_t group = 0; group + width <= n; group += width) {
    double sum = 0.0;
    for (std::size_t i = width; i-- > 0;)
      tail[i] = sum += scratch[group + i];
    strength[group + half] = tail[0] * share;
    double head = 0.0;
    const std::size_t more = std::min(width - 1, n - group - width);
    for (std::size_t i = 0; i < more; ++i) {
      head += scratch[group + width + i];
      strength[group + half + 1 + i] = (tail[i + 1] + head) * share;
    }
  }
}

void SlopeFilter::magnitudes(std::span<const double> x, std::span<double> out) const {
  const std::size_t n = x.size();
  // One loop a length, so that none asks at every sample.
  if (reach_ == 1) {
    for (std::size_t i = 1; i + 1 < n; ++i)
      out[i] = std::abs(scale_ * (x[i + 1] - x[i - 1]));
  } else if (reach_ == 2) {
    for (std::size_t i = 2; i + 2 < n; ++i)
      out[i] = std::abs(scale_ * (2.0 * (x[i + 2] - x[i - 2]) + (x[i + 1] - x[i - 1])));
  } else {
    for (std::size_t i = 3; i + 3 < n; ++i)
      out[i] = std::abs(scale_ *
                        (3.0 * (x[i + 3] - x[i - 3]) + 2.0 * (x[i + 2] - x[i - 2]) + (x[i + 1] - x[i - 1])));
  }
}

} // namespace chronodrome::activation
