// Chronodrome, GPL-3.0-or-later.
#include "conditioning/mains.h"

#include <algorithm>
#include <array>
#include <catch2/catch.hpp>
#include <cmath>
#include <numbers>

#include "conditioning/harmonics.h"
#include "support/electrogram_waves.h"

using namespace chronodrome;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;
using conditioning::FitSamples;
using test_support::Trace;

namespace {

double rms(std::span<const double> values) {
  double sum = 0.0;
  for (const double v : values)
    sum += v * v;
  return std::sqrt(sum / static_cast<double>(values.size()));
}

/// What is left when a fit at `assumed` Hz is taken from one block of hum at `true_hz`, over the original
/// rms.
double residual_share(double true_hz, double assumed, double seconds) {
  Trace trace(seconds, 1000.0);
  trace.add_sine(1.0, true_hz, 0.4);
  const std::vector<std::uint8_t> none(trace.samples.size(), 0);
  const std::array<FitSamples, 1> parts = {FitSamples{trace.samples, none, 0.0}};
  const std::array<int, 1> once = {1};
  const auto fit = conditioning::fit_harmonics(parts, assumed / 1000.0, once, 1, 500.0 * seconds);
  REQUIRE(fit.solved);
  std::vector<double> hum(trace.samples.size(), 0.0);
  conditioning::add_hum(fit, 0.0, 1.0, 1.0, hum);
  const double before = rms(trace.samples);
  for (std::size_t i = 0; i < hum.size(); ++i)
    hum[i] = trace.samples[i] - hum[i];
  return rms(hum) / before;
}

std::vector<conditioning::HumStretch> remove(std::vector<double>& samples, double rate,
                                             const conditioning::MainsSettings& settings = {}) {
  const std::vector<std::uint8_t> none(samples.size(), 0);
  return conditioning::remove_hum(samples, none, Hertz(rate), 0, settings);
}

} // namespace

TEST_CASE("stationary hum with harmonics on a curved baseline leaves nothing behind", "[mains]") {
  const std::size_t grouping = GENERATE(std::size_t{1}, std::size_t{3});
  const double rate = grouping == 1 ? 1000.0 : 3000.0;
  Trace trace(1.0, rate);
  std::vector<double> baseline(trace.samples.size());
  for (std::size_t i = 0; i < baseline.size(); ++i) {
    const double t = static_cast<double>(i) / rate;
    baseline[i] = 3.0 - 2.0 * t + 5.0 * t * t;
  }
  trace.add_sine(0.3, 50.02, 0.7);
  trace.add_sine(0.1, 150.06, 0.2);
  std::vector<std::uint8_t> masked(trace.samples.size(), 0);
  std::fill(masked.begin() + 200, masked.begin() + 260, std::uint8_t{1});
  std::vector<double> samples = trace.samples;
  for (std::size_t i = 0; i < samples.size(); ++i)
    samples[i] += baseline[i] + (masked[i] != 0 ? 40.0 : 0.0); // what is masked may be anything
  const std::array<FitSamples, 1> parts = {FitSamples{samples, masked, 0.0}};
  const std::array<int, 3> numbers = {1, 2, 3};
  const auto fit = conditioning::fit_harmonics(parts, 50.02 / rate, numbers, grouping, 500.0);
  REQUIRE(fit.solved);
  std::vector<double> hum(samples.size(), 0.0);
  conditioning::add_hum(fit, 0.0, 1.0, 1.0, hum);
  // Rounding in a normal matrix of nine unknowns. The average of three samples of a parabola is a parabola
  // again, shifted by a constant: still inside the model.
  for (std::size_t i = 0; i < hum.size(); ++i)
    REQUIRE_THAT(hum[i], WithinAbs(trace.samples[i], 1e-9));
}

TEST_CASE("one unmasked spike leaks no more than 2K/N of its height", "[mains]") {
  // A spike at the middle projects onto K cosines of norm N/2 each: 2K/N = 0.006 for N = 1000, K = 3.
  std::vector<double> samples(1000, 0.0);
  samples[500] = 1.0;
  const std::vector<std::uint8_t> none(1000, 0);
  const std::array<FitSamples, 1> parts = {FitSamples{samples, none, 0.0}};
  const std::array<int, 3> numbers = {1, 2, 3};
  const auto fit = conditioning::fit_harmonics(parts, 0.05, numbers, 1, 500.0);
  std::vector<double> hum(1000, 0.0);
  conditioning::add_hum(fit, 0.0, 1.0, 1.0, hum);
  const double peak = *std::max_element(hum.begin(), hum.end());
  // The baseline terms take a little of the spike, which changes the leak by less than 1 in 100.
  CHECK_THAT(peak, WithinRel(0.006, 0.01));
}

TEST_CASE("a wrong frequency leaves the share that the theory gives", "[mains]") {
  // About pi df T / sqrt(3); the values for larger products were computed with NumPy least squares.
  CHECK_THAT(residual_share(50.01, 50.0, 1.0), WithinAbs(0.018, 5e-4));
  CHECK_THAT(residual_share(50.01, 50.0, 2.0), WithinAbs(0.036, 5e-4));
  CHECK_THAT(residual_share(50.01, 50.0, 10.0), WithinAbs(0.18, 5e-3));
  CHECK_THAT(residual_share(50.05, 50.0, 1.0), WithinAbs(0.091, 5e-4));
  CHECK_THAT(residual_share(50.05, 50.0, 2.0), WithinAbs(0.180, 5e-4));
  CHECK_THAT(residual_share(50.05, 50.0, 10.0), WithinAbs(0.77, 5e-3));
}

TEST_CASE("hum off its nominal frequency is followed and removed", "[mains]") {
  const double frequency = GENERATE(49.8, 50.02, 50.3, 59.95, 60.2);
  const double rate = GENERATE(500.0, 1000.0, 4000.0);
  Trace trace(20.0, rate);
  trace.add_noise(0.02, 11);
  const std::vector<double> clean = trace.samples;
  trace.add_sine(0.3, frequency, 1.0);
  trace.add_sine(0.1, 3.0 * frequency, 0.3);
  auto samples = trace.samples;
  const auto stretches = remove(samples, rate);
  std::vector<double> residual(samples.size());
  for (std::size_t i = 0; i < samples.size(); ++i)
    residual[i] = samples[i] - clean[i];
  // Noise of 0.02 spreads over 8 coefficients from about 1000 (500) samples a block:
  // 0.02 * sqrt(8 / 500) = 0.0025; two and a half times that covers the frequency error and the edges.
  CHECK(rms(residual) < 0.0065);
  CHECK(stretches.front().first == 0);
  CHECK(stretches.back().end == samples.size());
  for (const auto& stretch : stretches) {
    // The phase of a stretch is known to about 0.02 / (0.3 * sqrt(500)) rad; over 6 s that is 1e-4 Hz; the
    // mask between noise crests adds a few times that.
    CHECK_THAT(stretch.frequency_hz, WithinAbs(frequency, 0.02));
    CHECK_THAT(stretch.rms, WithinRel(std::hypot(0.3, 0.1) / std::numbers::sqrt2, 0.1));
  }
}

TEST_CASE("without hum the samples stay as they are", "[mains]") {
  SECTION("white noise") {
    Trace trace(60.0, 1000.0);
    trace.add_noise(1.0, 5);
    auto samples = trace.samples;
    for (const auto& stretch : remove(samples, 1000.0))
      CHECK(stretch.frequency_hz == 0.0);
    CHECK(samples == trace.samples);
  }
  SECTION("beats at irregular times over noise") {
    Trace trace(60.0, 1000.0);
    trace.add_noise(0.02, 6);
    test_support::NormalNoise jitter(7);
    for (double t = 0.3; t < 59.0; t += 0.25 + 0.02 * jitter.uniform())
      trace.add_front(t, 1.0, 2e-3);
    auto samples = trace.samples;
    remove(samples, 1000.0);
    CHECK(samples == trace.samples);
  }
  SECTION("switched off") {
    Trace trace(5.0, 1000.0);
    trace.add_sine(1.0, 50.0);
    auto samples = trace.samples;
    conditioning::MainsSettings settings;
    settings.nominal = conditioning::MainsChoice::off;
    remove(samples, 1000.0, settings);
    CHECK(samples == trace.samples);
  }
}

TEST_CASE("hum that is switched on half-way is removed only where it is", "[mains]") {
  Trace hum(60.0, 1000.0);
  hum.add_sine(0.5, 50.03);
  Trace trace(60.0, 1000.0);
  trace.add_noise(0.05, 8);
  const auto clean = trace.samples;
  for (std::size_t i = 30000; i < 60000; ++i)
    trace.samples[i] += hum.samples[i];
  auto samples = trace.samples;
  remove(samples, 1000.0);
  for (std::size_t i = 0; i < 24000; ++i)
    REQUIRE(samples[i] == clean[i]);
  double worst = 0.0;
  for (std::size_t i = 32000; i < 60000; ++i)
    worst = std::max(worst, std::abs(samples[i] - clean[i]));
  // Eight coefficients of SD 0.05 * sqrt(2/1000) = 0.0022 can add up to 8 * 3 SD.
  CHECK(worst < 0.06);
}

TEST_CASE("hum of 0.3 of the beat moves no activation by more than 0.1 ms", "[mains]") {
  // Fronts of 2 ms, hum of 0.3 of their amplitude; the steepest slope is compared before and after.
  const double rate = 1000.0;
  Trace trace(40.0, rate);
  std::vector<double> times;
  for (double t = 0.2; t < 39.5; t += 0.2503)
    times.push_back(t);
  for (const double t : times)
    trace.add_front(t, 1.0, 2e-3);
  trace.add_noise(0.005, 3);
  const auto clean = trace.samples;
  trace.add_sine(0.3, 50.02, 0.5);
  trace.add_sine(0.1, 150.06);
  auto samples = trace.samples;
  remove(samples, rate);
  const auto steepest = [&](const std::vector<double>& x, double t) {
    const auto centre = static_cast<std::size_t>(std::llround(t * rate));
    const auto slope = [&](std::size_t n) {
      return (2 * x[n + 2] + x[n + 1] - x[n - 1] - 2 * x[n - 2]) / 10.0;
    };
    std::size_t best = centre - 4;
    for (std::size_t n = centre - 4; n <= centre + 4; ++n)
      if (slope(n) < slope(best)) best = n;
    const double a = slope(best - 1), b = slope(best), c = slope(best + 1);
    return (static_cast<double>(best) + (a - c) / (2.0 * (a - 2.0 * b + c))) / rate;
  };
  for (const double t : times)
    CHECK_THAT(steepest(samples, t), WithinAbs(steepest(clean, t), 1e-4));
}

TEST_CASE("the same signal is divided and cleaned alike wherever the file starts", "[mains]") {
  Trace trace(90.0, 1000.0);
  trace.add_noise(0.05, 21);
  trace.add_sine(0.3, 50.04);
  for (double t = 0.2; t < 89.0; t += 0.31)
    trace.add_front(t, 1.0, 2e-3);
  auto whole = trace.samples;
  remove(whole, 1000.0);
  const std::size_t cut = 17321;
  std::vector<double> part(trace.samples.begin() + cut, trace.samples.end());
  remove(part, 1000.0);
  for (std::size_t i = 15000; i < part.size(); ++i)
    REQUIRE_THAT(part[i], WithinAbs(whole[i + cut], 1e-9));
}

TEST_CASE("mains settings out of range are refused", "[mains]") {
  conditioning::MainsSettings settings;
  CHECK_FALSE(settings.check());
  settings.harmonics = {};
  CHECK(settings.check());
  settings = {};
  settings.harmonics = {1, 0};
  CHECK(settings.check());
  settings = {};
  settings.presence_ratio = 1.0;
  CHECK(settings.check());
  settings = {};
  settings.mask_quantile = 1.0;
  CHECK(settings.check());
}

TEST_CASE("a handful of samples is no place to look for hum", "[mains]") {
  std::vector<double> none;
  CHECK(remove(none, 1000.0).empty());
  std::vector<double> few = {1.0, 2.0, 3.0};
  remove(few, 1000.0);
  CHECK(few == std::vector<double>{1.0, 2.0, 3.0});
}
