// Chronodrome, GPL-3.0-or-later.
// Where on the deflection the mark stands.
#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>

#include "activation/compute.h"
#include "numerics/robust.h"
#include "support/beat_matching.h"
#include "support/channel_of_samples.h"
#include "support/electrogram_waves.h"

using namespace chronodrome;
using activation::ActivationSettings;
using activation::ChannelActivations;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;
using recording::Lead;
using recording::Role;
using test_support::channel_of_samples;
using test_support::match;
using test_support::Trace;

namespace {

ChannelActivations found_on(const Trace& trace, Lead lead, Role role = Role::ventricular) {
  const auto result = activation::compute(channel_of_samples(trace.samples, trace.rate, role, lead), {});
  REQUIRE(result.ok());
  return *result;
}

std::vector<double> beat_times(double seconds, double cycle) {
  std::vector<double> times;
  for (double t = 0.3; t < seconds - 0.3; t += cycle)
    times.push_back(t);
  return times;
}

double worst_error(const ChannelActivations& found, const std::vector<double>& truth, double window) {
  const auto matched = match(found.marks, truth, window);
  CHECK(matched.missed == 0);
  CHECK(matched.false_beats == 0);
  double worst = 0.0;
  for (const double e : matched.errors_s)
    worst = std::max(worst, std::abs(e));
  return worst;
}

} // namespace

TEST_CASE("a unipolar mark stands on the steepest fall, between the samples", "[fiducial]") {
  // Fronts -tanh((t - t0)/w) that come back slowly. Errors as for the parabola alone (see slope_test).
  Trace trace(30.0, 1000.0);
  const auto truth = beat_times(30.0, 0.2503);
  for (const double t0 : truth) {
    trace.add(t0, 0.12, [&](double t) {
      return -std::tanh((t - t0) / 2e-3) * std::exp(-0.5 * std::pow((t - t0) / 0.02, 2));
    });
  }
  CHECK(worst_error(found_on(trace, Lead::unipolar), truth, 0.005) < 0.03e-3);
}

TEST_CASE("a bipolar mark stands on the peak between two identical fronts", "[fiducial]") {
  // -tanh fronts 4 ms apart (2 mm at 0.5 m/s), w = 2 ms: |V| peaks half-way, 2 tanh(tau / 2w) = 1.52319 high.
  Trace trace(30.0, 2000.0);
  const auto truth = beat_times(30.0, 0.2503);
  for (const double t0 : truth) {
    trace.add(t0, 0.1, [&](double t) {
      return std::tanh((t - t0 + 2e-3) / 2e-3) - std::tanh((t - t0 - 2e-3) / 2e-3);
    });
  }
  const double sign = GENERATE(1.0, -1.0);
  for (double& s : trace.samples)
    s *= sign;
  const auto found = found_on(trace, Lead::bipolar);
  CHECK(worst_error(found, truth, 0.005) < 0.02e-3);
  // The timing low-pass of 400 Hz takes about a hundredth from a peak 4 ms wide.
  CHECK_THAT(found.marks[10].amplitude, WithinRel(1.52319, 0.02));
}

TEST_CASE("monophasic action potentials are marked on the upstroke", "[fiducial]") {
  Trace trace(30.0, 1000.0);
  const auto truth = beat_times(30.0, 0.3);
  for (const double t0 : truth) {
    trace.add(t0, 0.25, [&](double t) {
      const double rise = 0.5 * (1.0 + std::tanh((t - t0) / 2e-3));
      const double fall = 0.5 * (1.0 - std::tanh((t - t0 - 0.12) / 0.02));
      return rise * fall;
    });
  }
  trace.add_noise(0.005, 2);
  CHECK(worst_error(found_on(trace, Lead::none, Role::map), truth, 0.005) < 0.2e-3);
}

TEST_CASE("a bipolar mark keeps its lobe though the two are nearly equal", "[fiducial]") {
  // Lobes 6 ms apart whose heights differ by less than the noise from beat to beat: the largest |V| of each
  // beat alone would jump by 6 ms.
  Trace trace(60.0, 2000.0);
  const auto truth = beat_times(60.0, 0.251);
  test_support::NormalNoise noise(3);
  std::size_t largest_is_late = 0;
  for (const double t : truth) {
    const double early = 1.0 + 0.04 * noise.next();
    const double late = 0.97 + 0.04 * noise.next();
    if (late > early) ++largest_is_late;
    trace.add_bump(t - 3e-3, early, 1.5e-3);
    trace.add_bump(t + 3e-3, -late, 1.5e-3);
  }
  REQUIRE(largest_is_late > 40); // the test would mean nothing otherwise
  trace.add_noise(0.01, 4);
  const auto found = found_on(trace, Lead::bipolar);
  REQUIRE(found.marks.size() == truth.size());
  for (std::size_t i = 0; i < truth.size(); ++i)
    CHECK_THAT(found.marks[i].time.value(), WithinAbs(truth[i] - 3e-3, 0.5e-3));
}

TEST_CASE("inverting a bipolar lead changes no mark", "[fiducial]") {
  Trace trace(60.0, 1000.0);
  for (const double t : beat_times(60.0, 0.251)) {
    trace.add_bump(t, 1.0, 2e-3);
    trace.add_bump(t + 5e-3, -0.6, 3e-3);
  }
  trace.add_noise(0.03, 5);
  const auto plain = found_on(trace, Lead::bipolar);
  for (double& s : trace.samples)
    s = -s;
  const auto inverted = found_on(trace, Lead::bipolar);
  REQUIRE(plain.marks.size() == inverted.marks.size());
  for (std::size_t i = 0; i < plain.marks.size(); ++i)
    CHECK_THAT(inverted.marks[i].sample, WithinAbs(plain.marks[i].sample, 1e-9));
}

TEST_CASE("gain, offset and unit change nothing but the amplitude", "[fiducial]") {
  Trace trace(60.0, 1000.0);
  const auto truth = beat_times(60.0, 0.251);
  for (const double t : truth)
    trace.add_front(t, 1.0, 2e-3);
  trace.add_noise(0.05, 6);
  trace.add_sine(0.2, 50.03);
  const auto lead = GENERATE(Lead::unipolar, Lead::bipolar);
  auto channel = channel_of_samples(trace.samples, 1000.0, Role::ventricular, lead);
  const auto plain = activation::compute(channel, {});
  channel.gain = 1000.0; // millivolts in microvolts
  channel.offset = 250.0;
  const auto scaled = activation::compute(channel, {});
  REQUIRE(plain->marks.size() == truth.size());
  REQUIRE(scaled->marks.size() == truth.size());
  for (std::size_t i = 0; i < truth.size(); ++i) {
    CHECK_THAT(scaled->marks[i].sample, WithinAbs(plain->marks[i].sample, 1e-6));
    CHECK_THAT(scaled->marks[i].amplitude, WithinRel(1000.0 * plain->marks[i].amplitude, 1e-5)); // floats
    CHECK_THAT(scaled->marks[i].confidence,
               WithinAbs(plain->marks[i].confidence, 0.01)); // cells of the median
  }
}

TEST_CASE("skew moves every time and no sample", "[fiducial]") {
  Trace trace(20.0, 1000.0);
  for (const double t : beat_times(20.0, 0.3))
    trace.add_front(t, 1.0, 2e-3);
  trace.add_noise(0.02, 1);
  auto channel = channel_of_samples(trace.samples, 1000.0, Role::atrial, Lead::bipolar);
  const auto plain = activation::compute(channel, {});
  channel.skew = milliseconds(0.7);
  const auto skewed = activation::compute(channel, {});
  REQUIRE(plain->marks.size() == skewed->marks.size());
  for (std::size_t i = 0; i < plain->marks.size(); ++i) {
    CHECK(skewed->marks[i].sample == plain->marks[i].sample);
    CHECK_THAT((skewed->marks[i].time - plain->marks[i].time).value(), WithinAbs(0.7e-3, 1e-12));
  }
}

TEST_CASE("a clipped peak is timed by its flanks and says so", "[fiducial]") {
  Trace trace(30.0, 2000.0);
  const auto truth = beat_times(30.0, 0.251);
  for (const double t : truth)
    trace.add_bump(t, 5.0, 4e-3);
  trace.add_noise(0.01, 8);
  for (double& s : trace.samples)
    s = std::min(0.001 * std::round(s / 0.001), 3.0);
  const auto found = found_on(trace, Lead::bipolar);
  // The flanks pass the clip level with a slope of about 700/s: noise of 0.01 moves each by 0.014 ms, a
  // sample more or less at 2 kHz the middle by 0.25 ms.
  CHECK(worst_error(found, truth, 0.005) < 0.5e-3);
  for (const auto& mark : found.marks)
    CHECK(mark.confidence <= 0.7);
  CHECK(found.quality[1].clipped_share > 0.0);
  CHECK(found.unreadable.empty());
}

TEST_CASE("the stated timing SD is what repeated beats show", "[fiducial]") {
  struct Row {
    double noise;
    Lead lead;
  };
  const auto row = GENERATE(Row{0.05, Lead::unipolar}, Row{0.1, Lead::unipolar}, Row{0.02, Lead::unipolar});
  Trace trace(120.0, 1000.0);
  const auto truth = beat_times(120.0, 0.2503);
  for (const double t : truth)
    trace.add_front(t, 1.0, 2e-3);
  trace.add_noise(row.noise, 5);
  const auto found = found_on(trace, row.lead);
  const auto matched = match(found.marks, truth, 0.005);
  const double sd = numerics::sd(matched.errors_s);
  // The factor of 1.5 over the bound is a simulated mean loss: within a third either way.
  CHECK(found.timing_sd.value() > sd / 1.5);
  CHECK(found.timing_sd.value() < std::max(sd * 1.6, 0.051e-3)); // never below a twentieth of a sample
}

TEST_CASE("the method is named, and a lead of unknown kind is warned of", "[fiducial]") {
  Trace trace(5.0, 1000.0);
  trace.add_noise(1.0, 1);
  CHECK(found_on(trace, Lead::unipolar).method.rfind("steepest negative slope (unipolar)", 0) == 0);
  CHECK(found_on(trace, Lead::bipolar).method.rfind("largest |V| of the main deflection (bipolar)", 0) == 0);
  CHECK(found_on(trace, Lead::none, Role::ecg).warnings.empty() == false); // species not stated
  const auto unknown = found_on(trace, Lead::none);
  CHECK(std::any_of(unknown.warnings.begin(), unknown.warnings.end(), [](const Warning& w) {
    return w.what.find("neither unipolar nor bipolar") != std::string::npos;
  }));
  CHECK(activation::name_of(activation::Origin::moved) == "moved");
}
