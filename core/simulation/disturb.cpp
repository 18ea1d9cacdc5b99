// Chronodrome, GPL-3.0-or-later.
//
// Symbols: fs sampling rate, f frequency, phi phase. A sinusoid runs by rotating a vector by 2 pi f / fs a
// sample; every kAnchor samples it is set anew from sine and cosine, so that rounding cannot accumulate.
#include "simulation/disturb.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <numbers>
#include <string>

#include "simulation/random.h"

namespace chronodrome::simulation {
namespace {

constexpr std::size_t kAnchor = 1024;
constexpr double kArtefactSeconds = 0.001;
constexpr double kArtefactTail = 0.3;

std::size_t sample_at(double time, Hertz rate, std::size_t size) {
  const double index = std::ceil(time * rate.value());
  return index <= 0.0 ? 0 : std::min(size, static_cast<std::size_t>(std::min(index, 1e15)));
}

/// Adds amplitude * sin(2 pi f t + phi) over samples first ... last - 1.
void add_sine(std::span<double> samples, std::size_t first, std::size_t last, Hertz rate, double frequency,
              double phase, double amplitude) {
  const double step = 2.0 * std::numbers::pi * frequency / rate.value();
  const double turn_cos = std::cos(step), turn_sin = std::sin(step);
  double s = 0.0, c = 0.0;
  for (std::size_t i = first; i < last; ++i) {
    if (i == first || i % kAnchor == 0) {
      // The whole turns are taken out first: the angle stays exact after hours.
      const double turns = frequency * (static_cast<double>(i) / rate.value());
      const double angle = 2.0 * std::numbers::pi * (turns - std::floor(turns)) + phase;
      s = std::sin(angle);
      c = std::cos(angle);
    }
    samples[i] += amplitude * s;
    const double next = s * turn_cos + c * turn_sin;
    c = c * turn_cos - s * turn_sin;
    s = next;
  }
}

void add_mains(std::span<double> samples, Hertz rate, const Disturbance& plan) {
  if (plan.mains_amplitude == 0.0) return;
  const double fundamental = (plan.mains + plan.mains_offset).value();
  std::size_t first = 0;
  double factor = 1.0;
  for (std::size_t k = 0; k <= plan.mains_steps.size(); ++k) {
    const bool more = k < plan.mains_steps.size();
    const std::size_t last =
        more ? sample_at(plan.mains_steps[k].time.value(), rate, samples.size()) : samples.size();
    const double amplitude = plan.mains_amplitude * factor;
    add_sine(samples, first, last, rate, fundamental, plan.mains_phase_rad, amplitude);
    for (std::size_t h = 0; h < plan.mains_harmonics.size(); ++h) {
      const double order = static_cast<double>(h + 2);
      // Above half the sampling rate the amplifier's filter has taken it out.
      if (order * fundamental >= 0.5 * rate.value()) break;
      if (plan.mains_harmonics[h] == 0.0) continue;
      add_sine(samples, first, last, rate, order * fundamental, order * plan.mains_phase_rad,
               amplitude * plan.mains_harmonics[h]);
    }
    if (more) factor = plan.mains_steps[k].value;
    first = std::max(first, last);
  }
}

/// 1/f noise: white noise through first-order low passes whose corners lie a factor 4 apart and whose gains
/// fall with the square root of the corner.
class PinkNoise {
public:
  PinkNoise(double sd, Hertz rate) {
    std::size_t used = 0;
    for (double corner = 0.05; used < kStages && corner < 0.25 * rate.value(); corner *= 4.0, ++used) {
      pull_[used] = 1.0 - std::exp(-2.0 * std::numbers::pi * corner / rate.value());
      gain_[used] = 1.0 / std::sqrt(corner);
    }
    // Variance of the sum: the stages share their white noise.
    double variance = 0.0;
    for (std::size_t j = 0; j < used; ++j) {
      for (std::size_t k = 0; k < used; ++k)
        variance += gain_[j] * gain_[k] * pull_[j] * pull_[k] / (1.0 - (1.0 - pull_[j]) * (1.0 - pull_[k]));
    }
    for (double& gain : gain_)
      gain *= variance > 0.0 ? sd / std::sqrt(variance) : 0.0;
  }

  double next(double white) {
    double sum = 0.0;
    for (std::size_t k = 0; k < kStages; ++k) {
      state_[k] += pull_[k] * (white - state_[k]);
      sum += gain_[k] * state_[k];
    }
    return sum;
  }

private:
  static constexpr std::size_t kStages = 8;
  std::array<double, kStages> pull_{}, gain_{}, state_{};
};

void add_noise(std::span<double> samples, Hertz rate, const Disturbance& plan, std::uint64_t seed,
               std::string_view stream) {
  if (plan.white_sd > 0.0) {
    Random random(seed, std::string(stream) + "/white");
    for (double& sample : samples)
      sample += plan.white_sd * random.normal();
  }
  if (plan.pink_sd > 0.0) {
    Random random(seed, std::string(stream) + "/pink");
    PinkNoise pink(plan.pink_sd, rate);
    for (double& sample : samples)
      sample += pink.next(random.normal());
  }
}

void add_artefacts(std::span<double> samples, Hertz rate, const Disturbance& plan,
                   std::span<const Stimulus> stimuli) {
  if (plan.artefact_amplitude == 0.0) return;
  const double tau = plan.artefact_tau.value();
  for (const Stimulus& stimulus : stimuli) {
    const double start = stimulus.time.value();
    const std::size_t last = sample_at(start + kArtefactSeconds + 12.0 * tau, rate, samples.size());
    for (std::size_t i = sample_at(start, rate, samples.size()); i < last; ++i) {
      const double since = static_cast<double>(i) / rate.value() - start;
      samples[i] += since < kArtefactSeconds ? plan.artefact_amplitude
                                             : -kArtefactTail * plan.artefact_amplitude *
                                                   std::exp(-(since - kArtefactSeconds) / tau);
    }
  }
}

} // namespace

void disturb(std::span<double> samples, Hertz rate, const Disturbance& plan,
             std::span<const Stimulus> stimuli, std::uint64_t seed, std::string_view stream) {
  add_noise(samples, rate, plan, seed, stream);
  add_mains(samples, rate, plan);
  if (plan.wander_amplitude != 0.0)
    add_sine(samples, 0, samples.size(), rate, plan.wander.value(), plan.wander_phase_rad,
             plan.wander_amplitude);
  add_artefacts(samples, rate, plan, stimuli);
  for (const auto& step : plan.baseline_steps) {
    for (std::size_t i = sample_at(step.time.value(), rate, samples.size()); i < samples.size(); ++i)
      samples[i] += step.value;
  }
  for (const recording::Span& span : plan.dropouts) {
    const std::size_t last = sample_at(span.end.value(), rate, samples.size());
    for (std::size_t i = sample_at(span.start.value(), rate, samples.size()); i < last; ++i)
      samples[i] = 0.0;
  }
}

void convert(std::span<double> samples, double low, double high, int bits) {
  const double most = std::ldexp(1.0, bits) - 1.0;
  const double quantum = (high - low) / most;
  for (double& sample : samples)
    sample = low + std::clamp(std::round((sample - low) / quantum), 0.0, most) * quantum;
}

} // namespace chronodrome::simulation
