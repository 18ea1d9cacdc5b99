// Chronodrome, GPL-3.0-or-later.
#include "conditioning/stretch.h"

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

/// What condition() calls timing, sample by sample; NaN where no block came.
std::vector<double> timing_of(const recording::Channel& channel, const ConditioningSettings& settings) {
  std::vector<double> timing(channel.time_base().size(), std::nan(""));
  const auto report = conditioning::condition(channel, settings, [&](const ConditionedBlock& block) {
    for (std::size_t i = block.core_first; i < block.core_end; ++i)
      timing[i] = block.timing[i - block.first];
  });
  REQUIRE(report.ok());
  return timing;
}

void check_equal(const recording::Channel& stretch, const recording::Channel& channel,
                 const std::vector<double>& timing) {
  std::vector<double> values(stretch.time_base().size());
  stretch.read(0, values);
  for (std::size_t i = 0; i < values.size(); ++i) {
    const Seconds time = stretch.time_at(static_cast<double>(i));
    const auto position = channel.time_base().position_at(time - channel.skew);
    REQUIRE(position);
    const auto sample = static_cast<std::size_t>(std::llround(*position));
    REQUIRE_THAT(*position, WithinAbs(static_cast<double>(sample), 1e-3));
    REQUIRE_THAT(values[i], WithinAbs(timing[sample], 1e-9));
  }
}

Trace electrogram(double seconds, double rate) {
  Trace trace(seconds, rate);
  for (double t = 0.3; t < seconds - 0.3; t += 0.251)
    trace.add_front(t, 1.0, 2e-3);
  trace.add_noise(0.02, 77);
  trace.add_sine(0.2, 50.03);
  trace.add_sine(1.0, 0.3);
  return trace;
}

} // namespace

TEST_CASE("a filtered stretch is what the whole signal gives there", "[conditioning]") {
  const Trace trace = electrogram(300.0, 2000.0);
  for (const Role role : {Role::atrial, Role::pressure, Role::flow}) {
    auto channel = channel_of_samples(trace.samples, 2000.0, role, Lead::none);
    channel.gain = -2.0;
    channel.skew = Seconds(0.0125);
    const auto timing = timing_of(channel, {});
    for (const auto& [from, to] : {std::pair{0.0, 4.0}, {121.3331, 121.9}, {150.0, 210.0}, {299.0, 305.0}}) {
      INFO(recording::name_of(role) << " from " << from);
      const auto stretch = conditioning::condition_stretch(channel, {}, Seconds(from), Seconds(to));
      REQUIRE(stretch.ok());
      CHECK(stretch->label == "X");
      CHECK(stretch->skew == channel.skew);
      const double expected = (std::min(to, 300.0125) - std::max(from, 0.0125)) * 2000.0;
      CHECK_THAT(static_cast<double>(stretch->time_base().size()), WithinAbs(expected, 1.0));
      check_equal(*stretch, channel, timing);
    }
  }
}

TEST_CASE("a filtered stretch keeps its gaps and leaves out what is too short", "[conditioning]") {
  const Trace trace = electrogram(60.0, 1000.0);
  const auto channel = channel_of_samples(
      trace.samples, 1000.0, Role::atrial, Lead::bipolar,
      {{0, 30000, Seconds(0.0)}, {30000, 100, Seconds(40.0)}, {30100, 29900, Seconds(50.0)}});
  const auto stretch = conditioning::condition_stretch(channel, {}, Seconds(20.0), Seconds(60.0));
  REQUIRE(stretch.ok());
  REQUIRE(stretch->time_base().runs().size() == 2);
  CHECK_THAT(stretch->time_base().gaps()[0].start.value(), WithinAbs(30.0, 1e-9));
  CHECK_THAT(stretch->time_base().gaps()[0].end.value(), WithinAbs(50.0, 1e-9));
  check_equal(*stretch, channel, timing_of(channel, {}));
}

TEST_CASE("blanked pulses are bridged in a filtered stretch too", "[conditioning]") {
  Trace trace = electrogram(60.0, 1000.0);
  for (std::size_t i = 30000; i < 30004; ++i)
    trace.samples[i] += 40.0;
  const auto channel = channel_of_samples(trace.samples, 1000.0, Role::atrial, Lead::bipolar);
  ConditioningSettings settings;
  settings.blanked = {{Seconds(29.999), Seconds(30.006)}};
  const auto stretch = conditioning::condition_stretch(channel, settings, Seconds(29.0), Seconds(31.0));
  REQUIRE(stretch.ok());
  std::vector<double> values(stretch->time_base().size());
  stretch->read(0, values);
  CHECK(*std::max_element(values.begin(), values.end()) < 5.0);
  check_equal(*stretch, channel, timing_of(channel, settings));
}

TEST_CASE("a stretch that cannot be filtered says why", "[conditioning]") {
  const auto channel =
      channel_of_samples(std::vector<double>(5000, 1.0), 1000.0, Role::atrial, Lead::bipolar);
  using conditioning::condition_stretch;
  CHECK(condition_stretch(channel, {}, Seconds(2.0), Seconds(2.0)).error().code == ErrorCode::bad_usage);
  CHECK(condition_stretch(channel, {}, Seconds(0.0), Seconds(60.1)).error().code == ErrorCode::bad_usage);
  CHECK(condition_stretch(channel, {}, Seconds(6.0), Seconds(7.0)).error().code ==
        ErrorCode::not_enough_data);
  ConditioningSettings wrong;
  wrong.context = Seconds(1.0);
  CHECK(condition_stretch(channel, wrong, Seconds(1.0), Seconds(2.0)).error().code == ErrorCode::bad_usage);
}
