// Chronodrome, GPL-3.0-or-later.
#include "simulation/signals.h"

#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <complex>
#include <numbers>
#include <numeric>

#include "scenarios.h"
#include "simulation/disturb.h"
#include "simulation/simulate.h"
#include "simulation/waves.h"

using namespace chronodrome;
using namespace chronodrome::test_simulation;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;

namespace {

/// Index of the largest `score(i)` within `reach` seconds of `about`.
template <class Score>
double best_time(double about, double reach, double rate, std::size_t size, const Score& score) {
  const auto first = static_cast<std::size_t>(std::max(1.0, std::ceil((about - reach) * rate)));
  const auto last = std::min(size - 2, static_cast<std::size_t>((about + reach) * rate));
  std::size_t best = first;
  for (std::size_t i = first; i <= last; ++i) {
    if (score(i) > score(best)) best = i;
  }
  return static_cast<double>(best) / rate;
}

std::complex<double> component(const std::vector<double>& samples, double rate, double frequency) {
  std::complex<double> sum = 0;
  for (std::size_t i = 0; i < samples.size(); ++i)
    sum += samples[i] * std::polar(1.0, -2.0 * std::numbers::pi * frequency * static_cast<double>(i) / rate);
  return 2.0 * sum / static_cast<double>(samples.size());
}

double sd_of(const std::vector<double>& samples) {
  const double n = static_cast<double>(samples.size());
  const double mean = std::accumulate(samples.begin(), samples.end(), 0.0) / n;
  double sum = 0;
  for (const double sample : samples)
    sum += (sample - mean) * (sample - mean);
  return std::sqrt(sum / n);
}

std::vector<double> disturbed(const Disturbance& plan, double rate, double seconds) {
  std::vector<double> samples(static_cast<std::size_t>(rate * seconds), 0.0);
  disturb(samples, Hertz(rate), plan, {}, 7, "channel");
  return samples;
}

} // namespace

TEST_CASE("the truth lies where the definition of an activation finds it on noise-free samples",
          "[simulation][signals]") {
  // At 1 MHz the grid is 1 us; the extremum lies within one sample of the truth.
  constexpr double kRate = 1e6, kGrid = 1.001e-6;
  Scenario scenario = quiet_heart(250, 0.9);
  ChannelPlan tension = electrode("T", recording::Role::tension, recording::Lead::none);
  tension.baseline = 4.0;
  scenario.channels.push_back(tension);
  ChannelPlan upside_down = electrode("LA", recording::Role::atrial, recording::Lead::bipolar);
  upside_down.inverted = true;
  upside_down.offset = milliseconds(7.3);
  scenario.channels.push_back(upside_down);
  for (ChannelPlan& channel : scenario.channels)
    channel.rate = Hertz(kRate);
  const Simulated made = simulate(scenario).value();
  for (std::size_t c = 0; c < scenario.channels.size(); ++c) {
    const auto& samples = made.recording.signals[c].samples;
    const auto size = [&](std::size_t i) { return std::abs(samples[i]); };
    const auto fall = [&](std::size_t i) { return samples[i - 1] - samples[i + 1]; };
    const auto rise = [&](std::size_t i) { return samples[i + 1] - samples[i - 1]; };
    std::size_t checked = 0;
    for (const Seconds time : made.truth.activations[c].times) {
      const double t = time.value();
      if (t < 0.05 || t > 0.85) continue;
      const ChannelPlan& channel = scenario.channels[c];
      const double found =
          channel.lead == recording::Lead::bipolar    ? best_time(t, 0.02, kRate, samples.size(), size)
          : channel.lead == recording::Lead::unipolar ? best_time(t, 0.02, kRate, samples.size(), fall)
                                                      : best_time(t, 0.04, kRate, samples.size(), rise);
      CAPTURE(channel.label, t);
      CHECK_THAT(found, WithinAbs(t, kGrid));
      ++checked;
    }
    CHECK(checked >= 2);
  }
}

TEST_CASE("waves have the heights and slopes of their closed forms", "[simulation][signals]") {
  CHECK_THAT(unipolar_wave(-1.0), WithinRel(1.0, 1e-15));
  CHECK_THAT(unipolar_wave(1.0), WithinRel(-1.0, 1e-15));
  CHECK_THAT((unipolar_wave(1e-6) - unipolar_wave(-1e-6)) / 2e-6, WithinRel(-std::exp(0.5), 1e-9));
  CHECK(bipolar_wave(0.0) == 1.0);
  CHECK_THAT(bipolar_wave(std::sqrt(3.0)), WithinRel(-2.0 * std::exp(-1.5), 1e-14));
  // The bipole is the limit of two copies of the unipolar wave passing close poles.
  const double apart = 1e-4, u = 0.37;
  CHECK_THAT((unipolar_wave(u + apart / 2) - unipolar_wave(u - apart / 2)) / (-apart * std::exp(0.5)),
             WithinRel(bipolar_wave(u), 1e-7)); // second order in 1e-4
  const Contraction beat{milliseconds(50), milliseconds(20), milliseconds(80)};
  CHECK(beat.at(Seconds(0)) == 0.0);
  CHECK_THAT(beat.at(milliseconds(50)), WithinRel(1.0, 1e-12));
  CHECK_THAT(beat.at(milliseconds(110)), WithinRel(0.5, 1e-12));
  CHECK(beat.at(milliseconds(150)) == 0.0);
  // Steepest rise pi / (2 rise) at half the rise.
  CHECK_THAT((beat.at(milliseconds(25.001)) - beat.at(milliseconds(24.999))) / 2e-6,
             WithinRel(std::numbers::pi / (2 * 0.05), 1e-8));
}

TEST_CASE("a contraction fits between its neighbours at high rates", "[simulation][signals]") {
  Scenario scenario = quiet_heart(180, 5);
  ChannelPlan tension = electrode("T", recording::Role::tension, recording::Lead::none);
  tension.rise = milliseconds(60);
  tension.plateau = milliseconds(40);
  tension.fall = milliseconds(150);
  tension.amplitude = 2.5;
  tension.baseline = 4.0;
  scenario.channels = {tension};
  scenario.pathways.clear();
  const Simulated made = simulate(scenario).value();
  const auto& samples = made.recording.signals[0].samples;
  const auto [low, high] = std::minmax_element(samples.begin() + 1000, samples.end() - 1000);
  // Full relaxation and full height, up to the sampling of the top (a plateau of at least one sample).
  CHECK_THAT(*low, WithinAbs(4.0, 1e-9));
  CHECK_THAT(*high, WithinAbs(6.5, 1e-3));
}

TEST_CASE("companions follow their deflection at their distance and height", "[simulation][signals]") {
  Scenario scenario = quiet_heart(400, 4);
  scenario.channels[0].far_fields = {{Chamber::ventricular, {0.4, milliseconds(8), milliseconds(3)}}};
  scenario.channels[0].amplitude = 2.0;
  scenario.channels[1].repolarisation = Companion{0.2, milliseconds(25), milliseconds(150)};
  scenario.channels[1].amplitude = 3.0;
  const Simulated made = simulate(scenario).value();
  const double v = made.truth.activations[1].times[4].value();
  const auto at = [&](std::size_t c, double t) {
    return made.recording.signals[c].samples[static_cast<std::size_t>(std::llround(t * 1000))];
  };
  // Sampled up to 0.5 ms beside the top: (0.5 / 8)^2 * 1.5 and (0.5 / 25)^2 / 2 lower at most.
  CHECK_THAT(at(0, v + 0.003), WithinRel(0.8, 0.006));
  CHECK_THAT(at(1, v + 0.150), WithinRel(0.6, 0.0003));
}

TEST_CASE("mains has its amplitude, frequency, phase and harmonics", "[simulation][signals]") {
  Disturbance plan;
  plan.mains_amplitude = 0.25;
  plan.mains = Hertz(50.0);
  plan.mains_offset = Hertz(0.25);
  plan.mains_phase_rad = 0.7;
  plan.mains_harmonics = {0.0, 0.4};
  // 20 s hold whole periods of 50.25 Hz (1005) and 150.75 Hz (3015): the sums are exact up to rounding.
  const auto samples = disturbed(plan, 1000, 20);
  CHECK_THAT(std::abs(component(samples, 1000, 50.25)), WithinRel(0.25, 1e-9));
  CHECK_THAT(std::arg(component(samples, 1000, 50.25)), WithinAbs(0.7 - std::numbers::pi / 2, 1e-9));
  CHECK_THAT(std::abs(component(samples, 1000, 150.75)), WithinRel(0.1, 1e-9));
  CHECK_THAT(std::abs(component(samples, 1000, 100.5)), WithinAbs(0.0, 1e-9));
  // The rotating vector keeps to the sine after an hour.
  const auto hour = disturbed(plan, 250, 3600);
  const double t = 899'999 / 250.0;
  const double angle = 2 * std::numbers::pi * std::fmod(50.25 * t, 1.0) + 0.7;
  CHECK_THAT(hour[899'999], WithinAbs(0.25 * std::sin(angle), 1e-9)); // third harmonic above 125 Hz: left out
}

TEST_CASE("mains amplitude steps, baseline steps and dropouts come at their times", "[simulation][signals]") {
  Disturbance plan;
  plan.mains_amplitude = 1.0;
  plan.mains_steps = {{Seconds(2.0), 3.0}, {Seconds(4.0), 0.0}};
  plan.baseline_steps = {{Seconds(5.0), -2.0}};
  plan.dropouts = {{Seconds(5.5), Seconds(5.75)}};
  const auto samples = disturbed(plan, 1000, 7);
  const auto largest = [&](std::size_t first, std::size_t last) {
    return *std::max_element(samples.begin() + static_cast<std::ptrdiff_t>(first),
                             samples.begin() + static_cast<std::ptrdiff_t>(last));
  };
  CHECK_THAT(largest(0, 2000), WithinAbs(1.0, 1e-9)); // 50 Hz at 1 kHz hits its tops
  CHECK_THAT(largest(2000, 4000), WithinAbs(3.0, 1e-9));
  CHECK(largest(4000, 5000) == 0.0);
  CHECK(samples[4999] == 0.0);
  CHECK(samples[5000] == -2.0);
  CHECK(samples[5499] == -2.0);
  CHECK(samples[5500] == 0.0);
  CHECK(samples[5749] == 0.0);
  CHECK(samples[5750] == -2.0);
}

TEST_CASE("noise has its standard deviation, and 1/f noise falls by 3 dB an octave",
          "[simulation][signals]") {
  Disturbance white;
  white.white_sd = 0.03;
  CHECK_THAT(sd_of(disturbed(white, 1000, 300)), WithinRel(0.03, 0.007)); // five SE: 5 / sqrt(2 * 3e5)
  Disturbance pink;
  pink.pink_sd = 0.05;
  const auto samples = disturbed(pink, 1000, 1000);
  CHECK_THAT(sd_of(samples), WithinRel(0.05, 0.25)); // its slowest part has only some 50 s / 3 s periods
  // Mean power at 2 Hz and at 32 Hz over 200 stretches of 5 s (each known to 7 %): 1/f makes it 16 to 1; the
  // stages ripple by less than 1.4 times.
  const auto power_at = [&](double frequency) {
    double sum = 0;
    for (std::ptrdiff_t k = 0; k < 200; ++k) {
      const std::vector<double> part(samples.begin() + 5000 * k, samples.begin() + 5000 * (k + 1));
      sum += std::norm(component(part, 1000, frequency));
    }
    return sum;
  };
  const double ratio = power_at(2.0) / power_at(32.0);
  CHECK(ratio > 16.0 / 1.6);
  CHECK(ratio < 16.0 * 1.6);
}

TEST_CASE("the converter has its steps and clips at its rails", "[simulation][signals]") {
  std::vector<double> samples{-9.0, -5.0, 0.0, 0.1, 0.26, 4.9, 5.0, 7.0};
  convert(samples, -5.0, 5.0, 4);
  // 16 levels 10 / 15 apart.
  const double quantum = 10.0 / 15.0;
  for (const double sample : samples) {
    const double level = (sample + 5.0) / quantum;
    CHECK_THAT(level, WithinAbs(std::round(level), 1e-9));
  }
  CHECK(samples[0] == -5.0);
  CHECK(samples[1] == -5.0);
  CHECK_THAT(samples[7], WithinAbs(5.0, 1e-12));
  CHECK_THAT(samples[4], WithinAbs(quantum / 2, 1e-12));
  std::vector<double> fine(1000);
  for (std::size_t i = 0; i < fine.size(); ++i)
    fine[i] = -4.0 + 0.00801 * static_cast<double>(i);
  const auto before = fine;
  convert(fine, -5.0, 5.0, 12);
  for (std::size_t i = 0; i < fine.size(); ++i)
    CHECK(std::abs(fine[i] - before[i]) <= 0.5 * 10.0 / 4095.0 * (1 + 1e-9));
}

TEST_CASE("a channel that is too large saturates at its rails", "[simulation][signals]") {
  Scenario scenario = quiet_heart(300, 5);
  scenario.channels[1].amplitude = 12.0;
  scenario.channels[1].range = {-5.0, 5.0};
  const Simulated made = simulate(scenario).value();
  const auto& samples = made.recording.signals[1].samples;
  CHECK(*std::min_element(samples.begin(), samples.end()) == -5.0);
  CHECK_THAT(*std::max_element(samples.begin(), samples.end()), WithinAbs(5.0, 1e-12));
}

TEST_CASE("a stimulus leaves an artefact of its size and a tail of the other sign", "[simulation][signals]") {
  Scenario scenario = quiet_heart(300, 3);
  PacingTrain train;
  train.start = Seconds(1.0);
  train.beats = 1;
  train.latency = Seconds(0.15);
  scenario.pacing = {train};
  ChannelPlan marker;
  marker.label = "S";
  marker.role = recording::Role::stimulus;
  marker.unit = "V";
  marker.amplitude = 5.0;
  scenario.channels.push_back(marker);
  scenario.channels[0].amplitude = 0.0;
  scenario.channels[0].disturbance.artefact_amplitude = 8.0;
  const Simulated made = simulate(scenario).value();
  const auto& samples = made.recording.signals[0].samples;
  CHECK(samples[999] == 0.0);
  CHECK(samples[1000] == 8.0);
  CHECK_THAT(samples[1005], WithinRel(-0.3 * 8.0 * std::exp(-1.0), 1e-9)); // tau 4 ms, from 1 ms on
  CHECK(made.recording.signals[2].samples[1000] == 5.0);
  CHECK(made.recording.signals[2].samples[1003] == 0.0);
  CHECK(made.truth.activations.size() == 2); // stimuli are no activations
  REQUIRE(made.truth.stimuli.size() == 1);
}
