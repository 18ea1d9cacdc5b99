// Chronodrome, GPL-3.0-or-later.
// Trains with known times. Se and +P as in ANSI/AAMI EC57, with a match window of 10 ms, for 150 ms would
// match anything at the rates of small hearts.
#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>

#include "activation/compute.h"
#include "activation/finish.h"
#include "numerics/robust.h"
#include "support/beat_matching.h"
#include "support/channel_of_samples.h"
#include "support/electrogram_waves.h"

using namespace chronodrome;
using activation::ActivationSettings;
using activation::ChannelActivations;
using Catch::Matchers::WithinAbs;
using recording::Lead;
using recording::Role;
using test_support::channel_of_samples;
using test_support::match;
using test_support::Matching;
using test_support::NormalNoise;
using test_support::Trace;

namespace {

ChannelActivations found_on(const Trace& trace, Role role = Role::ventricular, Lead lead = Lead::unipolar,
                            const ActivationSettings& settings = {}) {
  const auto result =
      activation::compute(channel_of_samples(trace.samples, trace.rate, role, lead), settings);
  REQUIRE(result.ok());
  return *result;
}

/// A train at 240/min with an atrial far field, wander and hum: near field 2 units peak to peak.
Matching trial(double ratio, std::uint64_t seed, double seconds) {
  Trace trace(seconds, 1000.0);
  std::vector<double> truth;
  NormalNoise jitter(900 + seed);
  for (double t = 0.4; t < seconds - 0.3; t += 0.25)
    truth.push_back(t + 0.002 * (jitter.uniform() - 0.5));
  for (const double t : truth) {
    trace.add_front(t, 1.0, 2e-3);
    trace.add_front(t - 0.055, 0.15, 6e-3);
  }
  trace.add_sine(1.0, 0.3);
  trace.add_sine(0.3, 50.02, static_cast<double>(seed));
  trace.add_sine(0.1, 150.06, 1.0);
  trace.add_noise(2.0 / ratio, seed + 1);
  return match(found_on(trace).marks, truth, 0.010);
}

Matching pooled(double ratio, int trials, double seconds) {
  Matching all;
  for (int seed = 0; seed < trials; ++seed) {
    const Matching one = trial(ratio, static_cast<std::uint64_t>(seed), seconds);
    all.hits += one.hits;
    all.missed += one.missed;
    all.false_beats += one.false_beats;
    all.errors_s.insert(all.errors_s.end(), one.errors_s.begin(), one.errors_s.end());
  }
  return all;
}

} // namespace

TEST_CASE("clean and moderately noisy trains are found beat by beat", "[detection]") {
  // Reference figures of this rule on this train (simulated with NumPy): timing SD 0.025, 0.055 and 0.107 ms
  // at peak to peak over noise SD of 100, 40 and 20, bias below 0.005 ms, Se = +P = 1.
  struct Row {
    double ratio, sd_ms;
  };
  const auto row = GENERATE(Row{100, 0.025}, Row{40, 0.055}, Row{20, 0.107});
  const Matching found = pooled(row.ratio, 1, 60.0);
  INFO("ratio " << row.ratio);
  CHECK(found.missed == 0);
  CHECK(found.false_beats == 0);
  // SD of an SD from 239 beats is 4.6 %: 15 % is three of them.
  CHECK(numerics::sd(found.errors_s) * 1e3 < 1.15 * row.sd_ms);
  CHECK(std::abs(numerics::mean(found.errors_s)) * 1e3 < 0.02);
}

TEST_CASE("at ten times the noise 999 of 1000 beats are found", "[detection][.long]") {
  // Reference: Se 1.0000, +P 0.9992, timing SD 0.221 ms at a ratio of 10; Se 0.9589, +P 0.9991 at 6.7.
  const Matching ten = pooled(10.0, 10, 60.0);
  CHECK(ten.sensitivity() >= 0.999);
  CHECK(ten.predictivity() >= 0.995);
  CHECK(numerics::sd(ten.errors_s) * 1e3 < 0.25);
  const Matching seven = pooled(6.7, 10, 60.0);
  CHECK(seven.sensitivity() >= 0.94); // one SD of a share of 0.96 in 2380 beats is 0.004
  CHECK(seven.predictivity() >= 0.99);
}

TEST_CASE("slow trains are found with the wide window", "[detection]") {
  const double rate = GENERATE(60.0, 20.0);
  const double ratio = GENERATE(100.0, 20.0);
  Trace trace(120.0, 1000.0);
  std::vector<double> truth;
  for (double t = 0.4; t < 119.5; t += 60.0 / rate)
    truth.push_back(t);
  for (const double t : truth) {
    trace.add_front(t, 1.0, 2e-3);
    trace.add_front(t - 0.055, 0.15, 6e-3);
  }
  trace.add_sine(1.0, 0.3);
  trace.add_noise(2.0 / ratio, 7);
  const Matching found = match(found_on(trace).marks, truth, 0.010);
  CHECK(found.missed == 0);
  CHECK(found.false_beats == 0);
}

TEST_CASE("noise alone has no beats", "[detection]") {
  const double rate = GENERATE(400.0, 1000.0, 4000.0);
  Trace trace(120.0, rate);
  trace.add_noise(1.0, GENERATE(1U, 2U));
  CHECK(found_on(trace).marks.empty());
  trace.add_sine(5.0, 50.02);
  CHECK(found_on(trace, Role::atrial, Lead::bipolar).marks.empty());
}

TEST_CASE("an hour of noise has no beats", "[detection][.long]") {
  Trace trace(3600.0, 1000.0);
  trace.add_noise(1.0, 99);
  CHECK(found_on(trace).marks.empty());
}

TEST_CASE("arrest is silence, not invented beats", "[detection]") {
  // Noisy, quantised and perfectly clean recordings; beats until 40 s and from 70 s on.
  const double noise = GENERATE(0.0, 0.002, 0.05);
  const double step = GENERATE(0.0, 0.005);
  Trace trace(110.0, 1000.0);
  std::vector<double> truth;
  for (double t = 0.4; t < 40.0; t += 0.25)
    truth.push_back(t);
  for (double t = 70.0; t < 109.6; t += 0.4)
    truth.push_back(t);
  for (const double t : truth)
    trace.add_front(t, 1.0, 2e-3);
  trace.add_sine(0.3, 0.2);
  trace.add_noise(noise, 12);
  if (step > 0.0) {
    for (double& s : trace.samples)
      s = step * std::round(s / step);
  }
  const auto lead = GENERATE(Lead::unipolar, Lead::bipolar);
  const auto found = found_on(trace, Role::ventricular, lead);
  const Matching matched = match(found.marks, truth, 0.010);
  INFO("noise " << noise << " step " << step);
  CHECK(matched.missed == 0);
  CHECK(matched.false_beats == 0);
  for (const auto& bad : found.unreadable) {
    INFO(bad.reason << " " << bad.span.start.value() << " to " << bad.span.end.value());
    CHECK(bad.reason == "");
  }
}

TEST_CASE("beats in a constant stretch between noise are not searched for", "[detection]") {
  Trace trace(60.0, 1000.0);
  std::vector<double> truth;
  for (double t = 0.4; t < 59.5; t += 0.25)
    truth.push_back(t);
  for (const double t : truth)
    trace.add_front(t, 1.0, 2e-3);
  trace.add_noise(0.05, 4);
  for (double& s : trace.samples)
    s = 0.001 * std::round((s + 1.5) / 0.001); // an offset, so that the lost contact makes two steps
  std::fill(trace.samples.begin() + 20050, trace.samples.begin() + 30050, 0.0);
  std::erase_if(truth, [](double t) { return t > 20.03 && t < 30.07; });
  const auto found = found_on(trace);
  // The flat line, and the jump to it and back.
  REQUIRE(found.unreadable.size() == 3);
  CHECK(found.unreadable[0].reason == "step");
  CHECK(found.unreadable[1].reason == "flat");
  CHECK(found.unreadable[2].reason == "step");
  CHECK_THAT(found.unreadable[0].span.start.value(), WithinAbs(19.95, 0.01));
  CHECK_THAT(found.unreadable[2].span.end.value(), WithinAbs(30.15, 0.01));
  const Matching matched = match(found.marks, truth, 0.010);
  CHECK(matched.missed <= 1); // a beat that the step cuts into
  CHECK(matched.false_beats == 0);
}

TEST_CASE("a step of the baseline is no beat", "[detection]") {
  Trace trace(60.0, 1000.0);
  std::vector<double> truth;
  for (double t = 0.4; t < 59.5; t += 0.25)
    truth.push_back(t);
  for (const double t : truth) {
    trace.add_front(t, 1.0, 2e-3);
    trace.add_bump(t + 0.1, 0.8, 0.03); // a wave that follows each beat
  }
  for (std::size_t i = 30020; i < trace.samples.size(); ++i)
    trace.samples[i] += 4.0; // between the beats at 29.9 and 30.15 s
  trace.add_noise(0.03, 5);
  const auto found = found_on(trace);
  const Matching matched = match(found.marks, truth, 0.010);
  CHECK(matched.false_beats == 0);
  CHECK(matched.missed <= 1);
  REQUIRE(found.unreadable.size() == 1);
  CHECK(found.unreadable[0].reason == "step");
  CHECK_THAT(found.unreadable[0].span.start.value(), WithinAbs(29.92, 0.01));
}

TEST_CASE("no beat is looked for in a gap, and times behind it are true", "[detection]") {
  Trace trace(60.0, 1000.0);
  for (double t = 0.4; t < 59.5; t += 0.25)
    trace.add_front(t, 1.0, 2e-3);
  trace.add_noise(0.02, 6);
  const auto channel = channel_of_samples(trace.samples, 1000.0, Role::atrial, Lead::unipolar,
                                          {{0, 30000, Seconds(0.0)}, {30000, 30000, Seconds(100.0)}});
  const auto found = activation::compute(channel, {});
  REQUIRE(found.ok());
  REQUIRE(found->unreadable.size() == 1);
  CHECK(found->unreadable[0].reason == "gap");
  std::vector<double> truth;
  for (double t = 0.4; t < 59.5; t += 0.25)
    truth.push_back(t < 30.0 ? t : t + 70.0);
  const Matching matched = match(found->marks, truth, 0.010);
  CHECK(matched.missed == 0);
  CHECK(matched.false_beats == 0);
}

TEST_CASE("a premature beat down to the refractory time is found", "[detection]") {
  Trace trace(40.0, 2000.0);
  std::vector<double> truth;
  for (double t = 0.4; t < 39.5; t += 0.3)
    truth.push_back(t);
  truth.push_back(truth[60] + 0.085); // guinea-pig ventricle: 80 ms
  std::sort(truth.begin(), truth.end());
  for (const double t : truth)
    trace.add_front(t, 1.0, 2e-3);
  trace.add_noise(0.03, 1);
  const Matching matched = match(found_on(trace).marks, truth, 0.005);
  CHECK(matched.missed == 0);
  CHECK(matched.false_beats == 0);
}

TEST_CASE("the refractory time follows the species", "[detection]") {
  // A mouse atrium at 600/min with couplings of 30 ms: a guinea-pig atrium could not do that.
  Trace trace(20.0, 4000.0);
  std::vector<double> truth;
  for (double t = 0.2; t < 19.8; t += 0.1)
    truth.push_back(t), truth.push_back(t + 0.030);
  for (const double t : truth)
    trace.add_front(t, 1.0, 1e-3);
  trace.add_noise(0.02, 2);
  ActivationSettings mouse;
  mouse.conditioning.species = "mouse";
  const Matching found = match(found_on(trace, Role::atrial, Lead::unipolar, mouse).marks, truth, 0.004);
  CHECK(found.missed == 0);
  CHECK(found.false_beats == 0);
  CHECK(found_on(trace, Role::atrial, Lead::unipolar).marks.size() == truth.size() / 2);
  const auto unknown = found_on(trace, Role::atrial, Lead::unipolar);
  CHECK(std::any_of(unknown.warnings.begin(), unknown.warnings.end(),
                    [](const Warning& w) { return w.what.find("guinea-pig values") != std::string::npos; }));
}

TEST_CASE("settings out of range are refused", "[detection]") {
  const auto refused = [](auto change) {
    ActivationSettings settings;
    change(settings);
    return settings.check().has_value();
  };
  CHECK_FALSE(ActivationSettings{}.check());
  CHECK(refused([](auto& s) { s.threshold_share = 1.0; }));
  CHECK(refused([](auto& s) { s.noise_ratio = 0.5; }));
  CHECK(refused([](auto& s) { s.strong_ratio = 2.0; }));
  CHECK(refused([](auto& s) { s.far_field_share = 0.8; }));
  CHECK(refused([](auto& s) { s.refractory_atrial = Seconds(-1.0); }));
  CHECK(refused([](auto& s) { s.twitch_share = 0.0; }));
  CHECK(refused([](auto& s) { s.conditioning.block_samples = 0; }));
  ActivationSettings wrong;
  wrong.threshold_share = 2.0;
  const auto channel = channel_of_samples({0.0, 1.0}, 1000.0, Role::atrial);
  CHECK_FALSE(activation::compute(channel, wrong).ok());
  CHECK_FALSE(activation::compute(channel_of_samples({}, 1000.0, Role::atrial), {}).ok());
}

TEST_CASE("a burst of muscle is not counted, a small early beat of the same shape is", "[detection]") {
  Trace trace(60.0, 1000.0);
  std::vector<double> truth;
  for (double t = 0.4; t < 59.5; t += 0.4)
    truth.push_back(t);
  for (const double t : truth)
    trace.add_front(t, 1.0, 2e-3);
  trace.add_front(20.2, 0.45, 2e-3); // early, small, of the same shape
  truth.push_back(20.2);
  std::sort(truth.begin(), truth.end());
  // A shudder of 0.3 of the beats' amplitude between two beats.
  trace.add(40.19, 0.03,
            [](double t) { return 0.3 * std::cos(750.0 * (t - 40.19)) * std::cos(52.0 * (t - 40.19)); });
  trace.add_noise(0.01, 1);
  const Matching matched = match(found_on(trace).marks, truth, 0.010);
  CHECK(matched.missed == 0);
  CHECK(matched.false_beats == 0);
}

TEST_CASE("marks at a multiple of the mains period are doubted", "[detection]") {
  const auto doubts = [](double interval_s) {
    ChannelActivations channel;
    for (int k = 0; k < 100; ++k) {
      activation::Activation mark;
      mark.time = Seconds(interval_s * k);
      channel.marks.push_back(mark);
    }
    return activation::doubts_about(channel, 0).size();
  };
  CHECK(doubts(0.080) == 1); // 750/min: four periods of 50 Hz
  CHECK(doubts(5.0 / 60.0) == 1);
  CHECK(doubts(0.087) == 0);
  CHECK(doubts(0.200) == 0); // pacing at 300/min is common, whatever the mains
}

TEST_CASE("odd signals are answered, not stumbled over", "[detection]") {
  const double rate = GENERATE(20.0, 50.0, 100.0, 240.0, 1999.0, 20000.0);
  const std::size_t length = GENERATE(std::size_t{1}, std::size_t{2}, std::size_t{31}, std::size_t{40},
                                      std::size_t{333}, std::size_t{20001});
  for (const Role role : {Role::sinus, Role::his, Role::ventricular, Role::ecg, Role::map, Role::tension,
                          Role::pressure, Role::flow, Role::stimulus}) {
    for (int kind = 0; kind < 4; ++kind) {
      std::vector<double> x(length);
      NormalNoise noise(4);
      for (std::size_t i = 0; i < length; ++i) {
        x[i] = kind == 0   ? 7.0
               : kind == 1 ? 1e12 * noise.next()
               : kind == 2 ? static_cast<double>(i % 2)
                           : (i == length / 2 ? 1.0 : 0.0);
      }
      const auto result = activation::compute(channel_of_samples(x, rate, role, Lead::unipolar), {});
      INFO("role " << recording::name_of(role) << ", kind " << kind << ", rate " << rate << ", length "
                   << length);
      REQUIRE(result.ok());
      for (std::size_t i = 0; i < result->marks.size(); ++i) {
        CHECK(std::isfinite(result->marks[i].sample));
        CHECK((result->marks[i].confidence >= 0.0 && result->marks[i].confidence <= 1.0));
        if (i > 0) CHECK(result->marks[i - 1].time < result->marks[i].time);
      }
      for (const auto& window : result->quality)
        CHECK((window.index >= 0 && window.index <= 100));
      CHECK(std::isfinite(result->timing_sd.value()));
    }
  }
}
