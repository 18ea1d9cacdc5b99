// Chronodrome, GPL-3.0-or-later.
#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <vector>

#include "activation/compute.h"
#include "support/channel_of_samples.h"
#include "support/electrogram_waves.h"

using namespace chronodrome;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;
using recording::Lead;
using recording::Role;
using test_support::channel_of_samples;
using test_support::Trace;

namespace {

Trace train(double noise, double hum) {
  Trace trace(65.0, 1000.0);
  for (double t = 0.3; t < 64.5; t += 0.2503)
    trace.add_front(t, 1.0, 2e-3);
  trace.add_noise(noise, 1);
  trace.add_sine(hum, 50.0);
  return trace;
}

} // namespace

TEST_CASE("a clean train that two electrodes show has an index of 100", "[quality]") {
  const Trace trace = train(0.0, 0.0);
  const std::vector<recording::Channel> channels = {
      channel_of_samples(trace.samples, 1000.0, Role::atrial, Lead::bipolar, {}, "A"),
      channel_of_samples(trace.samples, 1000.0, Role::atrial, Lead::bipolar, {}, "B")};
  for (const auto& result : activation::compute_all(channels, {}, 1)) {
    REQUIRE(result->quality.size() == 7); // six windows of 10 s and one of 5 s
    for (const auto& window : result->quality) {
      CHECK(window.index == 100);
      CHECK(window.unreadable_share == 0.0);
      CHECK(window.mains_rms == 0.0);
    }
    CHECK_THAT(result->quality.back().span.end.value(), WithinAbs(65.0, 1e-9));
  }
}

TEST_CASE("noise and hum are measured between the beats", "[quality]") {
  const Trace trace = train(0.05, 0.2);
  const auto found =
      activation::compute(channel_of_samples(trace.samples, 1000.0, Role::ventricular, Lead::bipolar), {});
  for (std::size_t w = 0; w + 1 < found->quality.size(); ++w) {
    // 1500 values: 3 %; the high-pass of 10 Hz takes 1 % of white noise; what beats leave adds a little.
    CHECK_THAT(found->quality[w].noise_sd, WithinRel(0.05, 0.1));
    CHECK_THAT(found->quality[w].mains_rms, WithinRel(0.2 / std::sqrt(2.0), 0.05));
    CHECK_THAT(found->quality[w].signal_to_noise, WithinRel(2.0 / 0.1, 0.15));
  }
}

TEST_CASE("noise alone is below 50, and no window without beats exceeds 40", "[quality]") {
  Trace trace(60.0, 1000.0);
  trace.add_noise(1.0, 3);
  const auto found =
      activation::compute(channel_of_samples(trace.samples, 1000.0, Role::ventricular, Lead::bipolar), {});
  for (const auto& window : found->quality) {
    CHECK(window.index <= 40);
    CHECK(window.signal_to_noise == 0.0);
  }
}

TEST_CASE("worse signals have lower indices", "[quality]") {
  int last = 101;
  for (const double noise : {0.01, 0.1, 0.2, 0.3}) {
    const Trace trace = train(noise, 0.0);
    const auto found =
        activation::compute(channel_of_samples(trace.samples, 1000.0, Role::ventricular, Lead::bipolar), {});
    CHECK(found->quality[2].index < last);
    last = found->quality[2].index;
  }
}

TEST_CASE("a gap and a dead stretch show as unreadable shares", "[quality]") {
  const Trace trace = train(0.05, 0.0);
  const auto channel = channel_of_samples(trace.samples, 1000.0, Role::ventricular, Lead::bipolar,
                                          {{0, 25000, Seconds(0.0)}, {25000, 40000, Seconds(30.0)}});
  const auto found = activation::compute(channel, {});
  CHECK_THAT(found->quality[2].unreadable_share, WithinAbs(0.5, 1e-9));
  CHECK(found->quality[1].unreadable_share == 0.0);
  CHECK(found->quality[2].index < found->quality[1].index);
}

TEST_CASE("an ectopic beat of another shape keeps the larger part of its confidence", "[quality]") {
  Trace trace(60.0, 1000.0);
  std::vector<double> truth;
  for (int k = 0; k < 150; ++k) {
    const double t = 0.3 + 0.39 * k;
    if (k == 70) {
      trace.add_bump(t, -2.0, 3e-3);
    } else {
      trace.add_front(t, 1.0, 2e-3);
    }
  }
  trace.add_noise(0.02, 3);
  const auto found =
      activation::compute(channel_of_samples(trace.samples, 1000.0, Role::ventricular, Lead::unipolar), {});
  REQUIRE(found->marks.size() == 150);
  CHECK(found->marks[70].confidence >= 0.5);
  CHECK(found->marks[70].confidence < 0.8);
  CHECK(found->marks[69].confidence > 0.95);
}

TEST_CASE("clean symmetric bipolar beats have a high confidence", "[quality]") {
  // Fall and rise are equally steep: noise decides which is the steeper, beat by beat.
  Trace trace(120.0, 1000.0);
  for (int k = 0; k < 400; ++k)
    trace.add_bump(0.3 + 0.2903 * k, 2.4, 2e-3);
  trace.add_noise(2.4 / (2.0 * 68.0), 12); // peak to peak over twice the noise: 68
  const auto found =
      activation::compute(channel_of_samples(trace.samples, 1000.0, Role::atrial, Lead::bipolar), {});
  REQUIRE(found->marks.size() == 400);
  std::vector<double> confidence;
  for (const auto& mark : found->marks)
    confidence.push_back(mark.confidence);
  std::sort(confidence.begin(), confidence.end());
  CHECK(confidence[20] >= 0.9); // the 5 % quantile
}

TEST_CASE("beats near the noise have a low confidence", "[quality]") {
  Trace trace = train(0.35, 0.0); // peak to peak over twice the noise: 3
  const auto found =
      activation::compute(channel_of_samples(trace.samples, 1000.0, Role::atrial, Lead::bipolar), {});
  std::vector<double> confidence;
  for (const auto& mark : found->marks)
    confidence.push_back(mark.confidence);
  REQUIRE(confidence.size() > 100);
  std::sort(confidence.begin(), confidence.end());
  CHECK(confidence[confidence.size() / 2] < 0.8);
}
