// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cmath>
#include <cstdint>
#include <numbers>
#include <random>
#include <vector>

namespace chronodrome::test_support {

/// White normal noise by the polar method of Marsaglia: the same numbers with every library.
class NormalNoise {
public:
  explicit NormalNoise(std::uint64_t seed) : engine_(seed) {}
  double next() {
    if (has_spare_) return has_spare_ = false, spare_;
    double u = 0.0, v = 0.0, s = 0.0;
    do {
      u = uniform() * 2.0 - 1.0;
      v = uniform() * 2.0 - 1.0;
      s = u * u + v * v;
    } while (s >= 1.0 || s == 0.0);
    const double factor = std::sqrt(-2.0 * std::log(s) / s);
    spare_ = v * factor;
    has_spare_ = true;
    return u * factor;
  }
  double uniform() { return static_cast<double>(engine_() >> 11) * 0x1.0p-53; }

private:
  std::mt19937_64 engine_;
  double spare_ = 0.0;
  bool has_spare_ = false;
};

/// Samples of `seconds` at `rate_hz`, to which waves are added.
class Trace {
public:
  Trace(double seconds, double rate_hz)
      : samples(static_cast<std::size_t>(std::llround(seconds * rate_hz)), 0.0), rate(rate_hz) {}

  /// A front that passes an electrode: -A u exp(1/2 - u^2/2), u = (t - t0) / w: peaks of +A and -A at t0 -+
  /// w, the steepest negative slope A exp(1/2) / w exactly at t0.
  void add_front(double t0, double amplitude, double width) {
    add(t0, 9.0 * width, [&](double t) {
      const double u = (t - t0) / width;
      return -amplitude * u * std::exp(0.5 - 0.5 * u * u);
    });
  }
  /// One lobe.
  void add_bump(double t0, double amplitude, double width) {
    add(t0, 9.0 * width, [&](double t) {
      const double u = (t - t0) / width;
      return amplitude * std::exp(-0.5 * u * u);
    });
  }
  void add_sine(double amplitude, double hz, double phase = 0.0) {
    for (std::size_t i = 0; i < samples.size(); ++i)
      samples[i] += amplitude * std::sin(2.0 * std::numbers::pi * hz * static_cast<double>(i) / rate + phase);
  }
  void add_noise(double sd, std::uint64_t seed) {
    NormalNoise noise(seed);
    for (double& sample : samples)
      sample += sd * noise.next();
  }
  template <class Wave>
  void add(double t0, double reach, Wave wave) {
    const double low = std::ceil((t0 - reach) * rate);
    const double high = std::floor((t0 + reach) * rate);
    for (double i = std::max(low, 0.0); i <= high && i < static_cast<double>(samples.size()); i += 1.0)
      samples[static_cast<std::size_t>(i)] += wave(i / rate);
  }

  std::vector<double> samples;
  double rate;
};

} // namespace chronodrome::test_support
