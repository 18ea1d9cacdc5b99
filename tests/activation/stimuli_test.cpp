// Chronodrome, GPL-3.0-or-later.
#include "activation/stimuli.h"

#include <catch2/catch.hpp>
#include <cmath>

#include "activation/compute.h"
#include "support/beat_matching.h"
#include "support/channel_of_samples.h"
#include "support/electrogram_waves.h"

using namespace chronodrome;
using Catch::Matchers::WithinAbs;
using recording::Lead;
using recording::Role;
using test_support::channel_of_samples;
using test_support::match;
using test_support::Trace;

namespace {

void add_pulse(Trace& trace, double at, double height, double width) {
  const auto first = static_cast<std::size_t>(std::llround(at * trace.rate));
  const auto count = static_cast<std::size_t>(std::llround(width * trace.rate));
  for (std::size_t i = first; i < std::min(first + count, trace.samples.size()); ++i)
    trace.samples[i] += height;
}

} // namespace

TEST_CASE("pulses of either sign are stimuli with their width", "[stimuli]") {
  const double sign = GENERATE(1.0, -1.0);
  Trace trace(20.0, 2000.0);
  trace.add_noise(0.01, 1);
  std::size_t count = 0;
  for (double t = 5.0; t < 15.0; t += 0.25, ++count)
    add_pulse(trace, t, sign * 5.0, 2e-3);
  const auto found = activation::find_stimuli(channel_of_samples(trace.samples, 2000.0, Role::stimulus));
  REQUIRE(found.size() == count);
  for (std::size_t i = 0; i < count; ++i) {
    CHECK_THAT(found[i].time.value(), WithinAbs(5.0 + 0.25 * static_cast<double>(i), 1e-9));
    CHECK_THAT(found[i].width.value(), WithinAbs(2e-3, 1e-9));
  }
}

TEST_CASE("a biphasic pulse is one stimulus, noise and a level are none", "[stimuli]") {
  Trace trace(20.0, 2000.0);
  trace.add_noise(0.01, 1);
  for (double t = 5.0; t < 15.0; t += 0.5) {
    add_pulse(trace, t, 5.0, 1e-3);
    add_pulse(trace, t + 1e-3, -5.0, 1e-3);
  }
  CHECK(activation::find_stimuli(channel_of_samples(trace.samples, 2000.0, Role::stimulus)).size() == 20);
  Trace silent(20.0, 2000.0);
  silent.add_noise(0.01, 2);
  CHECK(activation::find_stimuli(channel_of_samples(silent.samples, 2000.0, Role::stimulus)).empty());
  add_pulse(silent, 5.0, 5.0, 3.0); // a switch, not a pulse
  CHECK(activation::find_stimuli(channel_of_samples(silent.samples, 2000.0, Role::stimulus)).empty());
  CHECK(activation::find_stimuli(channel_of_samples({}, 2000.0, Role::stimulus)).empty());
}

TEST_CASE("stimuli are no activations, and the response behind them keeps its time", "[stimuli]") {
  Trace stimulus(30.0, 2000.0);
  Trace electrogram(30.0, 2000.0);
  std::vector<double> truth;
  stimulus.add_noise(0.005, 1);
  for (double t = 0.5; t < 29.5; t += 0.2) {
    add_pulse(stimulus, t, 5.0, 1e-3);
    add_pulse(electrogram, t, 8.0, 1e-3); // eight times the response
    if (t > 10.0 && t < 15.0) continue;   // no capture
    truth.push_back(t + 0.012);
    electrogram.add_front(t + 0.012, 1.0, 1.5e-3);
  }
  electrogram.add_noise(0.02, 2);
  const std::vector<recording::Channel> channels = {
      channel_of_samples(stimulus.samples, 2000.0, Role::stimulus, Lead::none, {}, "S"),
      channel_of_samples(electrogram.samples, 2000.0, Role::atrial, Lead::unipolar, {}, "RA")};
  const auto found = activation::compute_all(channels, {}, 1);
  CHECK(found[0]->marks.empty());
  const auto matched = match(found[1]->marks, truth, 1e-3);
  CHECK(matched.missed == 0);
  CHECK(matched.false_beats == 0);
}

TEST_CASE("what a stimulus covers is bounded", "[stimuli]") {
  const auto spans =
      activation::blanked_by({{Seconds(1.0), milliseconds(1.0)}, {Seconds(2.0), milliseconds(50.0)}});
  REQUIRE(spans.size() == 2);
  CHECK_THAT(spans[0].start.value(), WithinAbs(0.999, 1e-12));
  CHECK_THAT(spans[0].end.value(), WithinAbs(1.003, 1e-12));
  CHECK_THAT(spans[1].end.value(), WithinAbs(2.008, 1e-12));
}
