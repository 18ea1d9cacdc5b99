// Chronodrome, GPL-3.0-or-later.
#include "activation/mechanics.h"

#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <numbers>

#include "activation/compute.h"
#include "support/beat_matching.h"
#include "support/channel_of_samples.h"
#include "support/electrogram_waves.h"

using namespace chronodrome;
using activation::ActivationSettings;
using activation::ChannelActivations;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;
using recording::Role;
using test_support::channel_of_samples;
using test_support::match;
using test_support::Trace;

namespace {

constexpr double kPi = std::numbers::pi;

/// P = 5 + 50 (1 - cos 2 pi 5 t): developed 100, 300 beats/min, feet at multiples of 0.2 s.
Trace raised_cosine(double seconds, double rate) {
  Trace trace(seconds, rate);
  for (std::size_t i = 0; i < trace.samples.size(); ++i)
    trace.samples[i] = 5.0 + 50.0 * (1.0 - std::cos(2.0 * kPi * 5.0 * static_cast<double>(i) / rate));
  return trace;
}

ChannelActivations found_on(const Trace& trace, Role role, const ActivationSettings& settings = {}) {
  const auto result = activation::compute(channel_of_samples(trace.samples, trace.rate, role), settings);
  REQUIRE(result.ok());
  return *result;
}

/// A twitch: rises as 1 - cos over `rise` seconds, falls back exponentially.
void add_twitch(Trace& trace, double foot, double height, double rise, double tau) {
  trace.add(foot + 1.0, 1.0, [&](double t) {
    const double u = t - foot;
    if (u < 0.0) return 0.0;
    if (u < rise) return height * 0.5 * (1.0 - std::cos(kPi * u / rise));
    return height * std::exp(-(u - rise) / tau);
  });
}

} // namespace

TEST_CASE("a raised cosine rises steepest a quarter period behind its foot", "[mechanics]") {
  // In closed form: dP/dt max 50 ms after the foot, peak 100 ms after it, 300/min.
  const auto found = found_on(raised_cosine(20.0, 1000.0), Role::tension);
  REQUIRE(found.marks.size() == found.beats.size());
  REQUIRE(found.marks.size() >= 98);
  for (std::size_t i = 2; i + 2 < found.beats.size(); ++i) {
    const auto& beat = found.beats[i];
    CHECK_THAT((beat.time - beat.foot).value(), WithinAbs(0.05, 1e-3)); // the foot is a sample
    CHECK_THAT(beat.time_to_peak.value(), WithinAbs(0.1, 1e-3));
    // A hundredth of a sample: what interpolation leaves where neighbours are laid over each other.
    CHECK_THAT((found.marks[i + 1].time - found.marks[i].time).value(), WithinAbs(0.2, 1e-5));
    // From the peak to half of the height: a quarter period.
    CHECK_THAT(beat.half_relaxation.value(), WithinAbs(0.05, 1e-3));
    CHECK(found.marks[i].time == beat.time);
  }
}

TEST_CASE("dP/dt max of a raised cosine is that of the central difference", "[mechanics]") {
  // pi f LVDP = 1570.796 mmHg/s; by central differences at the rates below (in closed form
  // sin(2 pi f / rate) / (2 pi f / rate)).
  struct Row {
    double rate, dpdt;
  };
  const auto row = GENERATE(Row{200, 1564.34}, Row{500, 1569.76}, Row{1000, 1570.54}, Row{2000, 1570.73});
  const auto found = found_on(raised_cosine(20.0, row.rate), Role::pressure);
  REQUIRE(found.beats.size() > 90);
  // Two passes of the 100 Hz low-pass keep all but 0.4 (5/100)^4 = 3e-6 of 5 Hz. A sample lies up to half a
  // step beside the steepest point; the parabola makes that good to 1e-5 at 200 Hz.
  for (std::size_t i = 3; i + 3 < found.beats.size(); ++i) {
    const auto& beat = found.beats[i];
    CHECK_THAT(beat.rate_of_rise, WithinAbs(row.dpdt, 0.02));
    CHECK_THAT(beat.rate_of_fall, WithinAbs(-row.dpdt, 0.02));
    CHECK_THAT(beat.systolic, WithinAbs(105.0, 0.02));
    // Upstroke onset: derivative at 5 % of its maximum, sin(2 pi f t) = 0.05: 1.6 ms behind the minimum,
    // where the pressure has risen by 0.06 mmHg; at 200 Hz the sample before.
    CHECK_THAT(beat.diastolic, WithinAbs(5.0, 0.15));
    CHECK_THAT(beat.developed, WithinAbs(beat.systolic - beat.diastolic, 1e-12));
    CHECK_THAT(found.marks[i].amplitude, WithinAbs(beat.developed, 1e-12));
  }
}

TEST_CASE("the end-diastolic pressure is that of the upstroke, not the lowest", "[mechanics]") {
  // A dip of 4 behind relaxation, a slow filling to 8, then the upstroke at 0.3 s.
  Trace trace(20.0, 1000.0);
  for (int k = 0; k < 25; ++k) {
    const double t0 = 0.8 * k;
    trace.add(t0 + 0.4, 0.4, [&](double t) {
      const double u = t - t0;
      if (u < 0.3) return 4.0 + 4.0 * u / 0.3;
      if (u < 0.36) return 8.0 + 50.0 * (1.0 - std::cos(kPi * (u - 0.3) / 0.06));
      if (u < 0.5) return 108.0;
      return 4.0 + 104.0 * 0.5 * (1.0 + std::cos(kPi * std::min(1.0, (u - 0.5) / 0.1)));
    });
  }
  const auto found = found_on(trace, Role::pressure);
  REQUIRE(found.beats.size() == 25);
  for (std::size_t i = 1; i + 1 < found.beats.size(); ++i) {
    // The 100 Hz low-pass rounds the corner of the upstroke by a few tenths.
    CHECK_THAT(found.beats[i].diastolic, WithinAbs(8.0, 1.0));
    CHECK_THAT(found.beats[i].systolic, WithinRel(108.0, 0.02));
  }
}

TEST_CASE("twitches are found and measured under noise", "[mechanics]") {
  Trace trace(60.0, 1000.0);
  std::vector<double> rises;
  for (int k = 0; k < 100; ++k) {
    const double foot = 0.3 + 0.59 * k;
    add_twitch(trace, foot, k % 2 == 0 ? 10.0 : 7.0, 0.08, 0.06); // alternans
    rises.push_back(foot + 0.04);
  }
  for (double& s : trace.samples)
    s += 20.0;
  trace.add_noise(0.1, 3);
  const auto found = found_on(trace, Role::tension);
  // Behind 30 Hz the noise of the slope is 3.4/s; a slope of 137/s over 80 ms falls by that much within
  // 80/pi sqrt(2 * 3.4 / 137) = 6 ms of its steepest point: so well is that point known.
  const auto matched = match(found.marks, rises, 0.015);
  CHECK(matched.missed == 0);
  CHECK(matched.false_beats == 0);
  for (std::size_t i = 0; i < found.beats.size(); ++i) {
    const double height = i % 2 == 0 ? 10.0 : 7.0;
    // Noise of 0.1 is about 0.03 behind 30 Hz; the foot is the least of some samples, the peak the largest.
    // The low-pass takes some 2 % off the pointed peak.
    CHECK_THAT(found.beats[i].developed, WithinRel(height, 0.05));
    // tau ln 2 = 41.6 ms; the low-pass rounds the pointed peak over 1 / (2 pi 30 Hz) = 5 ms, within which
    // noise then moves it.
    CHECK_THAT(found.beats[i].half_relaxation.value(), WithinAbs(0.0416, 0.010));
    // pi/2 height / rise; four SD of 3.4/s on 137/s are 10 %.
    CHECK_THAT(found.beats[i].rate_of_rise, WithinRel(0.5 * kPi * height / 0.08, 0.10));
  }
}

TEST_CASE("force that stops leaves no beats, noise alone has none", "[mechanics]") {
  Trace trace(90.0, 1000.0);
  std::vector<double> rises;
  for (double foot = 0.3; foot < 40.0; foot += 0.5) {
    add_twitch(trace, foot, 10.0, 0.08, 0.06);
    rises.push_back(foot + 0.04);
  }
  const double noise = GENERATE(0.0, 0.02, 0.3);
  trace.add_noise(noise, 3);
  // The steepest point is known to some 10 ms at the largest noise (see above).
  const auto matched = match(found_on(trace, Role::tension).marks, rises, 0.03);
  INFO("noise " << noise);
  CHECK(matched.missed == 0);
  CHECK(matched.false_beats == 0);
  Trace silent(60.0, 1000.0);
  silent.add_noise(1.0, 4);
  CHECK(found_on(silent, Role::tension).marks.empty());
  CHECK(found_on(silent, Role::pressure).marks.empty());
}

TEST_CASE("half relaxation that does not come before the next foot is not given", "[mechanics]") {
  Trace trace(30.0, 1000.0);
  for (std::size_t i = 0; i < trace.samples.size(); ++i) {
    // Falls slowly to 70 %, then the next beat.
    const double u = std::fmod(static_cast<double>(i) / 1000.0, 0.5);
    trace.samples[i] =
        u < 0.1 ? 7.0 + 3.0 * 0.5 * (1.0 - std::cos(kPi * u / 0.1)) : 10.0 - 3.0 * (u - 0.1) / 0.4;
  }
  const auto found = found_on(trace, Role::tension);
  REQUIRE(found.beats.size() > 50);
  for (std::size_t i = 1; i + 1 < found.beats.size(); ++i) {
    CHECK_THAT(found.beats[i].developed, WithinRel(3.0, 0.03));
    if (found.beats[i].half_relaxation > Seconds(0.0))
      CHECK(found.beats[i].peak + found.beats[i].half_relaxation <= found.beats[i + 1].foot);
  }
}

TEST_CASE("a cut file gives the same beats 30 s from the cut", "[mechanics]") {
  Trace trace(120.0, 500.0);
  for (double foot = 0.3; foot < 118.0; foot += 0.513)
    add_twitch(trace, foot, 10.0, 0.08, 0.06);
  trace.add_noise(0.1, 5);
  const auto whole = found_on(trace, Role::tension);
  Trace part(0.0, 500.0);
  const std::ptrdiff_t cut = 11003;
  part.samples.assign(trace.samples.begin() + cut, trace.samples.end());
  const auto rest = found_on(part, Role::tension);
  std::size_t compared = 0;
  std::size_t k = 0;
  for (const auto& mark : whole.marks) {
    const double sample = mark.sample - static_cast<double>(cut);
    if (sample < 15000.0) continue;
    while (k < rest.marks.size() && rest.marks[k].sample < sample - 1.0)
      ++k;
    REQUIRE(k < rest.marks.size());
    CHECK_THAT(rest.marks[k].sample, WithinAbs(sample, 1e-6));
    ++compared;
  }
  CHECK(compared > 100);
}
