// Chronodrome, GPL-3.0-or-later.
// Unknowns in this order: cosine and sine of each harmonic, then b0, b1, b2 of the baseline over u, the time
// scaled to about -1 to 1. The normal matrix is built on one triangle and solved by Cholesky's method.
#include "conditioning/harmonics.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <numbers>

namespace chronodrome::conditioning {
namespace {

constexpr std::size_t kMostHarmonics = 8;
constexpr std::size_t kMostUnknowns = 2 * kMostHarmonics + 3;
constexpr double kTwoPi = 2.0 * std::numbers::pi;

/// A rotating phasor for each harmonic: cos and sin without calling them for every sample.
class Phasors {
public:
  Phasors(std::span<const int> numbers, double cycles_per_step, double cycles_at_start)
      : count_(numbers.size()) {
    for (std::size_t k = 0; k < count_; ++k) {
      const double number = numbers[k];
      step_[k] = {std::cos(kTwoPi * number * cycles_per_step), std::sin(kTwoPi * number * cycles_per_step)};
      now_[k] = {std::cos(kTwoPi * number * cycles_at_start), std::sin(kTwoPi * number * cycles_at_start)};
    }
  }
  [[nodiscard]] double cosine(std::size_t k) const { return now_[k][0]; }
  [[nodiscard]] double sine(std::size_t k) const { return now_[k][1]; }
  void advance() {
    for (std::size_t k = 0; k < count_; ++k) {
      const double c = now_[k][0] * step_[k][0] - now_[k][1] * step_[k][1];
      now_[k][1] = now_[k][0] * step_[k][1] + now_[k][1] * step_[k][0];
      now_[k][0] = c;
    }
  }

private:
  std::size_t count_;
  std::array<std::array<double, 2>, kMostHarmonics> step_{};
  std::array<std::array<double, 2>, kMostHarmonics> now_{};
};

struct Normal {
  std::size_t unknowns = 0;
  std::size_t used = 0;
  std::array<std::array<double, kMostUnknowns>, kMostUnknowns> matrix{}; // lower triangle
  std::array<double, kMostUnknowns> right{};

  void add(const std::array<double, kMostUnknowns>& basis, double value) {
    for (std::size_t i = 0; i < unknowns; ++i) {
      const double b = basis[i];
      right[i] += b * value;
      for (std::size_t j = 0; j <= i; ++j)
        matrix[i][j] += b * basis[j];
    }
    ++used;
  }

  /// Solution in place of `right`; false where the matrix is not safely positive definite.
  bool solve() {
    for (std::size_t i = 0; i < unknowns; ++i) {
      for (std::size_t j = 0; j <= i; ++j) {
        double sum = matrix[i][j];
        for (std::size_t k = 0; k < j; ++k)
          sum -= matrix[i][k] * matrix[j][k];
        if (i == j) {
          if (!(sum > 1e-6 * matrix[i][i])) return false;
          matrix[i][i] = std::sqrt(sum);
        } else {
          matrix[i][j] = sum / matrix[j][j];
        }
      }
    }
    for (std::size_t i = 0; i < unknowns; ++i) {
      for (std::size_t k = 0; k < i; ++k)
        right[i] -= matrix[i][k] * right[k];
      right[i] /= matrix[i][i];
    }
    for (std::size_t i = unknowns; i-- > 0;) {
      for (std::size_t k = i + 1; k < unknowns; ++k)
        right[i] -= matrix[k][i] * right[k];
      right[i] /= matrix[i][i];
    }
    return true;
  }
};

/// What is left of a sine of `cycles` per sample when `grouping` samples are averaged.
double averaging_gain(double cycles, std::size_t grouping) {
  if (grouping == 1) return 1.0;
  const double half = std::numbers::pi * cycles;
  const double n = static_cast<double>(grouping);
  return std::sin(n * half) / (n * std::sin(half));
}

void accumulate(const FitSamples& part, double cycles_per_sample, std::span<const int> numbers,
                std::size_t grouping, double origin, double scale, Normal& normal) {
  const double centre = part.first + 0.5 * static_cast<double>(grouping - 1) - origin;
  const double step = static_cast<double>(grouping);
  Phasors phasors(numbers, cycles_per_sample * step, cycles_per_sample * centre);
  std::array<double, kMostUnknowns> basis{};
  const std::size_t groups = part.values.size() / grouping;
  for (std::size_t g = 0; g < groups; ++g, phasors.advance()) {
    double sum = 0.0;
    unsigned masked = 0;
    for (std::size_t i = g * grouping; i < (g + 1) * grouping; ++i) {
      sum += part.values[i];
      masked |= part.masked[i];
    }
    if (masked != 0) continue;
    for (std::size_t k = 0; k < numbers.size(); ++k) {
      basis[2 * k] = phasors.cosine(k);
      basis[2 * k + 1] = phasors.sine(k);
    }
    const double u = (centre + step * static_cast<double>(g)) / scale;
    basis[2 * numbers.size()] = 1.0;
    basis[2 * numbers.size() + 1] = u;
    basis[2 * numbers.size() + 2] = u * u;
    normal.add(basis, sum / step);
  }
}

} // namespace

HarmonicFit fit_harmonics(std::span<const FitSamples> parts, double cycles_per_sample,
                          std::span<const int> numbers, std::size_t grouping, double origin) {
  HarmonicFit fit;
  fit.cycles_per_sample = cycles_per_sample;
  fit.origin = origin;
  numbers = numbers.first(std::min(numbers.size(), kMostHarmonics));
  double scale = 1.0;
  std::size_t total = 0;
  for (const FitSamples& part : parts) {
    scale = std::max({scale, std::abs(part.first - origin),
                      std::abs(part.first + static_cast<double>(part.values.size()) - origin)});
    total += part.values.size() / grouping;
  }
  Normal normal;
  normal.unknowns = 2 * numbers.size() + 3;
  for (const FitSamples& part : parts)
    accumulate(part, cycles_per_sample, numbers, grouping, origin, scale, normal);
  // Three cycles and a fifth of the stretch: less would let the hum be told from the mask only by chance.
  const double cycles = static_cast<double>(normal.used * grouping) * cycles_per_sample;
  const bool enough = cycles >= 3.0 && 5 * normal.used >= total && normal.used >= 2 * normal.unknowns;
  fit.solved = enough && normal.solve();
  for (std::size_t k = 0; k < numbers.size(); ++k) {
    Harmonic harmonic{numbers[k], 0.0, 0.0};
    if (fit.solved) {
      const double gain = averaging_gain(cycles_per_sample * numbers[k], grouping);
      harmonic.cosine = normal.right[2 * k] / gain;
      harmonic.sine = normal.right[2 * k + 1] / gain;
    }
    fit.harmonics.push_back(harmonic);
  }
  return fit;
}

void add_hum(const HarmonicFit& fit, double first, double from, double to, std::span<double> out) {
  if (!fit.solved || out.empty()) return;
  std::vector<int> numbers;
  for (const Harmonic& harmonic : fit.harmonics)
    numbers.push_back(harmonic.number);
  Phasors phasors(numbers, fit.cycles_per_sample, fit.cycles_per_sample * (first - fit.origin));
  // Half a cosine over the stretch: the weights of two neighbours add up to one.
  const std::array<int, 1> once = {1};
  const double n = static_cast<double>(out.size());
  Phasors flank(once, 0.5 / n, 0.25 / n);
  for (double& sample : out) {
    double hum = 0.0;
    for (std::size_t k = 0; k < fit.harmonics.size(); ++k)
      hum += fit.harmonics[k].cosine * phasors.cosine(k) + fit.harmonics[k].sine * phasors.sine(k);
    const double weight = 0.5 * (from + to) + 0.5 * (from - to) * flank.cosine(0);
    sample += weight * hum;
    phasors.advance();
    flank.advance();
  }
}

} // namespace chronodrome::conditioning
