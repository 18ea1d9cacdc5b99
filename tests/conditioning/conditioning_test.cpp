// Chronodrome, GPL-3.0-or-later.
#include "conditioning/conditioning.h"

#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>

#include "support/channel_of_samples.h"
#include "support/electrogram_waves.h"

using namespace chronodrome;
using Catch::Matchers::WithinAbs;
using conditioning::ConditionedBlock;
using conditioning::ConditioningSettings;
using recording::Lead;
using recording::Role;
using test_support::channel_of_samples;
using test_support::Trace;

namespace {

struct Conditioned {
  std::vector<double> timing, detection;
  conditioning::ConditioningReport report;
  std::size_t blocks = 0;
};

Conditioned run(const recording::Channel& channel, const ConditioningSettings& settings = {}) {
  Conditioned out;
  const auto report = conditioning::condition(channel, settings, [&](const ConditionedBlock& block) {
    ++out.blocks;
    const auto low = static_cast<std::ptrdiff_t>(block.core_first - block.first);
    const auto high = static_cast<std::ptrdiff_t>(block.core_end - block.first);
    out.timing.insert(out.timing.end(), block.timing.begin() + low, block.timing.begin() + high);
    if (!block.detection.empty())
      out.detection.insert(out.detection.end(), block.detection.begin() + low,
                           block.detection.begin() + high);
  });
  REQUIRE(report.ok());
  out.report = *report;
  return out;
}

Trace electrogram(double seconds, double rate) {
  Trace trace(seconds, rate);
  for (double t = 0.3; t < seconds - 0.3; t += 0.251)
    trace.add_front(t, 1.0, 2e-3);
  trace.add_noise(0.02, 77);
  return trace;
}

} // namespace

TEST_CASE("blocks join without a seam, whatever their length", "[conditioning]") {
  Trace trace = electrogram(400.0, 500.0);
  trace.add_sine(0.2, 50.03);
  trace.add_sine(1.0, 0.3);
  const auto channel = channel_of_samples(trace.samples, 500.0, Role::atrial, Lead::bipolar);
  ConditioningSettings small;
  small.block_samples = 1; // the shortest block, 90 s
  const Conditioned pieces = run(channel, small);
  const Conditioned whole = run(channel);
  CHECK(pieces.blocks == 5);
  CHECK(whole.blocks == 1);
  REQUIRE(pieces.timing.size() == trace.samples.size());
  REQUIRE(pieces.detection.size() == trace.samples.size());
  for (std::size_t i = 0; i < trace.samples.size(); ++i) {
    // Transients of the filters over 15 s are far below the rounding.
    REQUIRE_THAT(pieces.timing[i], WithinAbs(whole.timing[i], 1e-9));
    REQUIRE_THAT(pieces.detection[i], WithinAbs(whole.detection[i], 1e-9));
  }
  CHECK_THAT(whole.report.mains_hz, WithinAbs(50.03, 0.01));
  CHECK(whole.report.hummed_share > 0.99);
}

TEST_CASE("timing keeps the baseline, detection does not", "[conditioning]") {
  Trace trace(30.0, 1000.0);
  for (double& s : trace.samples)
    s = 5.0;
  trace.add_noise(0.01, 1);
  const Conditioned out = run(channel_of_samples(trace.samples, 1000.0, Role::ventricular, Lead::unipolar));
  for (std::size_t i = 0; i < out.timing.size(); ++i) {
    REQUIRE_THAT(out.timing[i], WithinAbs(trace.samples[i], 1e-12)); // no hum, no low-pass at this rate
    REQUIRE_THAT(out.detection[i], WithinAbs(0.0, 0.06));            // six SD of the noise
  }
}

TEST_CASE("the timing low-pass works from four times its rate on", "[conditioning]") {
  const double rate = GENERATE(1000.0, 2000.0);
  Trace trace(20.0, rate);
  trace.add_sine(1.0, 480.0);
  const Conditioned out = run(channel_of_samples(trace.samples, rate, Role::ventricular, Lead::unipolar));
  double largest = 0.0;
  for (std::size_t i = 2000; i + 2000 < out.timing.size(); ++i)
    largest = std::max(largest, std::abs(out.timing[i]));
  if (rate == 1000.0) {
    CHECK(largest > 0.99);
  } else {
    // 1 / (1 + (tan(pi 0.24) / K)^4), K = tan(pi 0.2) / 0.802243, by the formula of the two-pass filter.
    const double k = std::tan(3.14159265358979 * 0.2) / 0.802243;
    const double expected = 1.0 / (1.0 + std::pow(std::tan(3.14159265358979 * 0.24) / k, 4));
    CHECK_THAT(largest, WithinAbs(expected, 1e-3));
  }
}

TEST_CASE("force and pressure keep their level and lose nothing but what is fast", "[conditioning]") {
  Trace trace(20.0, 1000.0);
  for (double& s : trace.samples)
    s = 12.0;
  trace.add_sine(1.0, 50.0); // mains on a force channel is not regressed, only low-passed
  const Conditioned out = run(channel_of_samples(trace.samples, 1000.0, Role::tension));
  // Two passes of second order, half power at 30 Hz: at 50 Hz about 1 / (1 + 0.4142 (50/30)^4) = 0.24.
  for (std::size_t i = 500; i + 500 < out.timing.size(); ++i)
    REQUIRE_THAT(out.timing[i], WithinAbs(12.0, 0.25));
  CHECK(out.report.mains_hz == 0.0);
  CHECK(out.report.method == "zero-phase low-pass 30 Hz");
  ConditioningSettings mouse;
  mouse.species = "mouse";
  CHECK(run(channel_of_samples(trace.samples, 1000.0, Role::tension), mouse).report.method ==
        "zero-phase low-pass 60 Hz");
  CHECK(run(channel_of_samples(trace.samples, 1000.0, Role::pressure)).report.method ==
        "zero-phase low-pass 100 Hz");
}

TEST_CASE("gaps, flat lines, saturation and short runs are listed in order", "[conditioning]") {
  Trace trace(40.0, 1000.0);
  trace.add_noise(0.05, 9);
  for (double& s : trace.samples)
    s = 0.001 * std::round(s / 0.001);
  std::fill(trace.samples.begin() + 5000, trace.samples.begin() + 5500, 0.1);
  std::fill(trace.samples.begin() + 15000, trace.samples.begin() + 15300, 2.0);
  auto channel = channel_of_samples(
      trace.samples, 1000.0, Role::ventricular, Lead::bipolar,
      {{0, 30000, Seconds(0.0)}, {30000, 100, Seconds(40.0)}, {30100, 9900, Seconds(50.0)}});
  auto recording = std::make_shared<recording::Recording>(*channel.recording);
  recording->signals[0].rails = std::array<double, 2>{-2.0, 2.0};
  channel.recording = recording;
  const auto& bad = run(channel).report.unreadable;
  std::vector<std::string> reasons;
  for (std::size_t i = 0; i < bad.size(); ++i) {
    reasons.push_back(bad[i].reason);
    if (i > 0) CHECK(bad[i - 1].span.end <= bad[i].span.start);
  }
  CHECK(reasons == std::vector<std::string>{"flat", "saturation", "gap", "short", "gap"});
  CHECK_THAT(bad[0].span.start.value(), WithinAbs(5.0, 0.002));
  CHECK_THAT(bad[0].span.end.value(), WithinAbs(5.5, 0.002));
  CHECK_THAT(bad[1].span.start.value(), WithinAbs(15.0, 0.002));
  CHECK_THAT(bad[1].span.end.value(), WithinAbs(15.35, 0.002)); // with 50 ms of recovery
  CHECK_THAT(bad[2].span.end.value(), WithinAbs(40.0, 1e-9));
  CHECK_THAT(bad[3].span.end.value(), WithinAbs(40.1, 1e-9));
  CHECK_THAT(bad[4].span.end.value(), WithinAbs(50.0, 1e-9));
}

TEST_CASE("a blanked stimulus is a straight line and moves nothing around it", "[conditioning]") {
  // A pulse of 5 units and 1 ms each 200 ms; the response 12 ms later keeps its shape.
  Trace clean(10.0, 1000.0);
  for (double t = 0.212; t < 9.9; t += 0.2)
    clean.add_front(t, 0.5, 2e-3);
  Trace paced = clean;
  ConditioningSettings settings;
  for (int k = 1; k < 49; ++k) {
    paced.samples[static_cast<std::size_t>(200 * k)] += 5.0;
    settings.blanked.push_back({Seconds(0.2 * k - 0.001), Seconds(0.2 * k + 0.003)});
  }
  const Conditioned out =
      run(channel_of_samples(paced.samples, 1000.0, Role::ventricular, Lead::unipolar), settings);
  for (std::size_t k = 1; k < 49; ++k) {
    const std::size_t s = 200 * k;
    const double left = out.timing[s - 2];
    const double right = out.timing[s + 4];
    for (std::size_t i = s - 1; i <= s + 3; ++i) {
      const double share = (static_cast<double>(i) - static_cast<double>(s - 2)) / 6.0;
      REQUIRE_THAT(out.timing[i], WithinAbs(left + share * (right - left), 1e-9));
    }
    for (std::size_t i = s + 4; i < s + 150; ++i)
      REQUIRE_THAT(out.timing[i], WithinAbs(clean.samples[i], 1e-12));
  }
}

TEST_CASE("species traits are found however they are written", "[conditioning]") {
  CHECK(conditioning::traits_of("Guinea-Pig").known);
  CHECK(conditioning::traits_of(" guinea pig ").name == "guinea pig");
  CHECK(conditioning::traits_of("guineapig").name == "guinea pig");
  CHECK(conditioning::traits_of("RAT").name == "rat");
  const auto unknown = conditioning::traits_of("axolotl");
  CHECK_FALSE(unknown.known);
  CHECK(unknown.refractory_atrial == conditioning::traits_of("guinea pig").refractory_atrial);
  CHECK(conditioning::traits_of("mouse").refractory_atrial < milliseconds(27.0)); // published atrial ERP
  CHECK(conditioning::traits_of("rabbit").refractory_ventricular < milliseconds(101.0)); // AV-node ERP
}

TEST_CASE("slow sampling is warned of, wrong settings and empty channels are refused", "[conditioning]") {
  Trace trace(5.0, 450.0);
  trace.add_noise(1.0, 1);
  CHECK(run(channel_of_samples(trace.samples, 450.0, Role::atrial, Lead::unipolar)).report.warnings.size() ==
        1);
  CHECK(run(channel_of_samples(trace.samples, 450.0, Role::atrial, Lead::bipolar)).report.warnings.empty());
  const auto nothing = [](const ConditionedBlock&) {};
  const auto empty = conditioning::condition(channel_of_samples({}, 1000.0, Role::atrial), {}, nothing);
  REQUIRE_FALSE(empty.ok());
  CHECK(empty.error().code == ErrorCode::not_enough_data);
  ConditioningSettings settings;
  settings.detection_high_pass = Hertz(-1.0);
  CHECK(settings.check());
  settings = {};
  settings.context = Seconds(3.0);
  CHECK(settings.check());
  settings = {};
  settings.longest_clip = Seconds(0.0);
  CHECK(settings.check());
  settings = {};
  settings.mains.harmonics.clear();
  CHECK_FALSE(
      conditioning::condition(channel_of_samples({1.0}, 1000.0, Role::atrial), settings, nothing).ok());
}

TEST_CASE("other roles pass through untouched", "[conditioning]") {
  Trace trace(5.0, 100.0);
  trace.add_sine(1.0, 20.0);
  const Conditioned out = run(channel_of_samples(trace.samples, 100.0, Role::temperature));
  CHECK(out.timing == trace.samples);
  CHECK(out.detection.empty());
}
