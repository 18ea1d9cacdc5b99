// Chronodrome, GPL-3.0-or-later.
#include "activation/slope.h"

#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <numbers>

#include "activation/sliding_median.h"
#include "numerics/robust.h"
#include "support/electrogram_waves.h"

using namespace chronodrome;
using activation::parabola_summit;
using activation::SlopeFilter;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;

TEST_CASE("the summit of a parabola through three points", "[slope]") {
  // (0.8, 1.0, 0.9): offset (0.8 - 0.9) / (2 (0.8 - 2 + 0.9)) = 1/6, height 1 + 0.1/24.
  const auto summit = parabola_summit(0.8, 1.0, 0.9);
  CHECK_THAT(summit.offset, WithinAbs(1.0 / 6.0, 1e-12));
  CHECK_THAT(summit.height, WithinAbs(1.0041666667, 1e-10));
  CHECK(parabola_summit(1.0, 1.0, 1.0).offset == 0.0);
  CHECK(parabola_summit(2.0, 1.0, 2.0).offset == 0.0); // no summit
}

TEST_CASE("the gain of each derivative is that of its weights", "[slope]") {
  // Against the ideal derivative at 1 kHz, in closed form (and computed with NumPy): three points
  // 0.984/0.935/0.757 and five points 0.945/0.793/0.338 at 50/100/200 Hz; seven points 0.889/0.607/0.021.
  // The filter picks its length by rate: the same ratios f/rate are asked at rates that pick each one.
  const auto gain = [](double rate, double f_at_1khz) {
    return SlopeFilter(Hertz(rate)).gain_at(Hertz(f_at_1khz * rate / 1000.0));
  };
  CHECK_THAT(gain(500.0, 50), WithinAbs(0.984, 5e-4));
  CHECK_THAT(gain(500.0, 100), WithinAbs(0.935, 5e-4));
  CHECK_THAT(gain(500.0, 200), WithinAbs(0.757, 5e-4));
  CHECK_THAT(gain(1000.0, 50), WithinAbs(0.945, 5e-4));
  CHECK_THAT(gain(1000.0, 100), WithinAbs(0.793, 5e-4));
  CHECK_THAT(gain(1000.0, 200), WithinAbs(0.338, 5e-4));
  CHECK_THAT(gain(2000.0, 50), WithinAbs(0.889, 5e-4));
  CHECK_THAT(gain(2000.0, 100), WithinAbs(0.607, 5e-4));
  CHECK_THAT(gain(2000.0, 200), WithinAbs(0.021, 5e-4));
}

TEST_CASE("a ramp has its slope and noise its gain", "[slope]") {
  const double rate = GENERATE(250.0, 1000.0, 5000.0);
  const SlopeFilter slope{Hertz(rate)};
  std::vector<double> ramp(20);
  for (std::size_t i = 0; i < ramp.size(); ++i)
    ramp[i] = 3.0 * static_cast<double>(i) / rate;
  CHECK_THAT(slope.at(ramp, 10), WithinRel(3.0, 1e-12));
  test_support::Trace noise(40000.0 / rate, rate);
  noise.add_noise(1.0, 3);
  std::vector<double> slopes;
  for (std::size_t i = 10; i + 10 < noise.samples.size(); ++i)
    slopes.push_back(slope.at(noise.samples, i));
  CHECK_THAT(numerics::sd(slopes), WithinRel(slope.noise_gain(), 0.03)); // 40000 correlated values
}

TEST_CASE("a tanh front is timed within the published error of the parabola", "[slope]") {
  // V = -tanh((t - t0)/w), all phases between samples; the largest errors were computed with NumPy.
  struct Row {
    double rate, width_ms, error_ms;
  };
  const auto row =
      GENERATE(Row{1000, 1, 0.036}, Row{1000, 2, 0.022}, Row{1000, 5, 0.005}, Row{2000, 1, 0.011});
  double worst = 0.0;
  for (int phase = 0; phase < 50; ++phase) {
    const double t0 = 0.05 + phase / 50.0 / row.rate;
    std::vector<double> x(static_cast<std::size_t>(0.1 * row.rate));
    for (std::size_t i = 0; i < x.size(); ++i)
      x[i] = -std::tanh((static_cast<double>(i) / row.rate - t0) / (row.width_ms * 1e-3));
    const SlopeFilter slope{Hertz(row.rate)};
    std::size_t best = 10;
    for (std::size_t i = 10; i + 10 < x.size(); ++i)
      if (-slope.at(x, i) > -slope.at(x, best)) best = i;
    const auto summit = parabola_summit(-slope.at(x, best - 1), -slope.at(x, best), -slope.at(x, best + 1));
    worst = std::max(worst, std::abs((static_cast<double>(best) + summit.offset) / row.rate - t0));
  }
  INFO("rate " << row.rate << " width " << row.width_ms);
  // The figures were found with other lengths of the derivative at some rates; a longer one is smoother and
  // no worse. Half a digit of the last figure on top.
  CHECK(worst * 1e3 <= row.error_ms + 5e-4);
}

TEST_CASE("the detection function of silence is exactly zero and of a step spreads over 5 ms", "[slope]") {
  const Hertz rate(1000.0);
  std::vector<double> x(400, 0.0);
  std::fill(x.begin() + 200, x.end(), 1.0);
  std::vector<double> scratch, strength;
  activation::detection_function(x, SlopeFilter(rate), rate, milliseconds(5.0), scratch, strength);
  REQUIRE(strength.size() == x.size());
  // The slope is 1000 * (2, 3, 3, 2) / 10 about the step; the mean of five holds all four: 1000 / 5.
  CHECK_THAT(*std::max_element(strength.begin(), strength.end()), WithinRel(200.0, 1e-12));
  for (std::size_t i = 0; i < 190; ++i)
    REQUIRE(strength[i] == 0.0);
  for (std::size_t i = 210; i < 400; ++i)
    REQUIRE(strength[i] == 0.0);
}

TEST_CASE("the detection function is the plain mean of |slope|", "[slope]") {
  const double hz = GENERATE(500.0, 1000.0, 2000.0, 10000.0);
  const Hertz rate(hz);
  const SlopeFilter slope(rate);
  test_support::Trace trace(503.0 / hz, hz);
  trace.add_noise(1.0, 8);
  std::vector<double> scratch, strength;
  activation::detection_function(trace.samples, slope, rate, milliseconds(5.0), scratch, strength);
  const std::size_t half = activation::detection_width(rate, milliseconds(5.0)) / 2;
  for (std::size_t i = half + slope.reach(); i + half + slope.reach() < trace.samples.size(); ++i) {
    double sum = 0.0;
    for (std::size_t k = i - half; k <= i + half; ++k)
      sum += std::abs(slope.at(trace.samples, k));
    REQUIRE_THAT(strength[i], WithinRel(sum / static_cast<double>(2 * half + 1), 1e-12));
  }
}

TEST_CASE("the sliding median agrees with sorting within its cells", "[slope]") {
  test_support::NormalNoise noise(5);
  std::vector<double> values;
  for (int i = 0; i < 3000; ++i)
    values.push_back(std::abs(noise.next()) * std::exp(0.002 * i));
  activation::SlidingMedian window;
  const std::size_t length = 301;
  for (std::size_t i = 0; i < values.size(); ++i) {
    window.add(activation::SlidingMedian::cell_of(values[i]));
    if (i >= length) window.remove(activation::SlidingMedian::cell_of(values[i - length]));
    if (i < length) continue;
    const std::vector<double> last(values.begin() + static_cast<std::ptrdiff_t>(i + 1 - length),
                                   values.begin() + static_cast<std::ptrdiff_t>(i + 1));
    REQUIRE_THAT(window.median(), WithinRel(numerics::median(last), 0.008)); // the width of a cell
  }
}

TEST_CASE("the sliding median takes zeros, tiny and huge values", "[slope]") {
  activation::SlidingMedian window;
  CHECK(window.median() == 0.0);
  for (const double value : {0.0, 0.0, 0.0, 1e-300, 1e300})
    window.add(activation::SlidingMedian::cell_of(value));
  CHECK(window.median() < 1e-10);
  CHECK(window.size() == 5);
}

TEST_CASE("noise moves the steepest slope by what simulation and the bound say", "[slope]") {
  // -tanh, w = 2 ms, 1 kHz, noise SD 0.05 of the half amplitude: RMS error 0.146 ms with five points (2000
  // trials in NumPy); no estimator can do better than 0.061 ms (Cramer-Rao).
  const SlopeFilter slope{Hertz(1000.0)};
  test_support::NormalNoise noise(12);
  double sum = 0.0;
  constexpr int kTrials = 2000;
  for (int trial = 0; trial < kTrials; ++trial) {
    const double t0 = 0.05 + 1e-3 * noise.uniform();
    std::vector<double> x(100);
    for (std::size_t i = 0; i < x.size(); ++i)
      x[i] = -std::tanh((static_cast<double>(i) / 1000.0 - t0) / 2e-3) + 0.05 * noise.next();
    std::size_t best = 42;
    for (std::size_t i = 42; i <= 58; ++i)
      if (-slope.at(x, i) > -slope.at(x, best)) best = i;
    const auto summit = parabola_summit(-slope.at(x, best - 1), -slope.at(x, best), -slope.at(x, best + 1));
    const double error_ms = static_cast<double>(best) + summit.offset - 1000.0 * t0;
    sum += error_ms * error_ms;
  }
  // The RMS of 2000 trials is known to 1.6 %: three times that.
  CHECK_THAT(std::sqrt(sum / kTrials), WithinRel(0.146, 0.05));
}
