// Chronodrome, GPL-3.0-or-later.
// What decides about a beat lies within 30 s of it; how the work is divided changes nothing.
#include <sys/resource.h>

#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>

#include "activation/compute.h"
#include "support/channel_of_samples.h"
#include "support/electrogram_waves.h"

using namespace chronodrome;
using activation::ActivationSettings;
using activation::ChannelActivations;
using Catch::Matchers::WithinAbs;
using recording::Lead;
using recording::Role;
using test_support::channel_of_samples;
using test_support::NormalNoise;
using test_support::Trace;

namespace {

/// Two minutes with hum, wander, a slow rhythm, noise that grows, a pause.
Trace changing(double rate, double hum) {
  Trace trace(150.0, rate);
  NormalNoise jitter(31);
  for (double t = 0.3; t < 149.5; t += (t < 70.0 ? 0.25 : 0.6) + 0.01 * jitter.uniform()) {
    if (t > 100.0 && t < 104.0) continue;
    trace.add_front(t, t < 90.0 ? 1.0 : 0.5, 2e-3);
    trace.add_bump(t + 0.09, 0.2, 0.03);
  }
  trace.add_sine(0.5, 0.31);
  trace.add_sine(hum, 50.04, 0.3);
  NormalNoise noise(32);
  for (std::size_t i = 0; i < trace.samples.size(); ++i)
    trace.samples[i] +=
        (0.02 + 0.05 * static_cast<double>(i) / static_cast<double>(trace.samples.size())) * noise.next();
  return trace;
}

ChannelActivations marks_of(const std::vector<double>& samples, double rate, Lead lead,
                            const ActivationSettings& settings = {}) {
  return *activation::compute(channel_of_samples(samples, rate, Role::ventricular, lead), settings);
}

/// Marks of a cut-out, moved back to the whole's samples, against those of the whole between two times.
void check_cut(const Trace& trace, std::size_t first, std::size_t end, Lead lead) {
  const auto whole = marks_of(trace.samples, trace.rate, lead);
  const std::vector<double> cut(trace.samples.begin() + static_cast<std::ptrdiff_t>(first),
                                trace.samples.begin() + static_cast<std::ptrdiff_t>(end));
  const auto part = marks_of(cut, trace.rate, lead);
  const double margin = 30.0 * trace.rate;
  const double low = first == 0 ? 0.0 : static_cast<double>(first) + margin;
  const double high = end == trace.samples.size() ? 1e18 : static_cast<double>(end) - margin;
  std::vector<double> expected, found;
  for (const auto& mark : whole.marks)
    if (mark.sample >= low && mark.sample <= high) expected.push_back(mark.sample);
  for (const auto& mark : part.marks) {
    const double sample = mark.sample + static_cast<double>(first);
    if (sample >= low && sample <= high) found.push_back(sample);
  }
  REQUIRE(expected.size() > 50);
  REQUIRE(found.size() == expected.size());
  for (std::size_t i = 0; i < found.size(); ++i)
    CHECK_THAT(found[i], WithinAbs(expected[i], 1e-6));
}

} // namespace

TEST_CASE("a file that is cut gives the same marks 30 s away from the cut", "[locality]") {
  const auto lead = GENERATE(Lead::unipolar, Lead::bipolar);
  const double hum = GENERATE(0.0, 0.3);
  const Trace trace = changing(1000.0, hum);
  check_cut(trace, 0, 97331, lead);
  check_cut(trace, 21237, trace.samples.size(), lead);
  check_cut(trace, 3, 140001, lead);
}

TEST_CASE("a file that is cut gives the same marks at a high rate too", "[locality]") {
  const Trace trace = changing(5000.0, 0.3);
  check_cut(trace, 77713, trace.samples.size(), Lead::unipolar);
}

TEST_CASE("the length of the blocks changes no mark", "[locality]") {
  Trace trace(400.0, 500.0);
  NormalNoise jitter(3);
  for (double t = 0.3; t < 399.5; t += 0.25 + 0.02 * jitter.uniform())
    trace.add_front(t, 1.0, 3e-3);
  trace.add_noise(0.05, 4);
  trace.add_sine(0.3, 49.97);
  ActivationSettings small;
  small.conditioning.block_samples = 1;
  const auto lead = GENERATE(Lead::unipolar, Lead::bipolar);
  const auto whole = marks_of(trace.samples, 500.0, lead);
  const auto pieces = marks_of(trace.samples, 500.0, lead, small);
  REQUIRE(whole.marks.size() == pieces.marks.size());
  for (std::size_t i = 0; i < whole.marks.size(); ++i)
    CHECK_THAT(pieces.marks[i].sample, WithinAbs(whole.marks[i].sample, 1e-6));
}

TEST_CASE("the number of threads changes no bit, the order of channels no mark", "[locality]") {
  std::vector<recording::Channel> channels;
  const Trace a = changing(1000.0, 0.2);
  Trace v(150.0, 1000.0);
  for (double t = 0.37; t < 149.0; t += 0.31)
    v.add_front(t, 2.0, 2e-3);
  v.add_noise(0.05, 9);
  channels.push_back(channel_of_samples(a.samples, 1000.0, Role::atrial, Lead::bipolar, {}, "RA"));
  channels.push_back(channel_of_samples(v.samples, 1000.0, Role::ventricular, Lead::unipolar, {}, "RV"));
  channels.push_back(channel_of_samples(a.samples, 1000.0, Role::tension, Lead::none, {}, "T"));
  const auto one = activation::compute_all(channels, {}, 1);
  const auto many = activation::compute_all(channels, {}, 4);
  std::reverse(channels.begin(), channels.end());
  const auto reversed = activation::compute_all(channels, {}, 2);
  for (std::size_t c = 0; c < 3; ++c) {
    for (const auto* other : {&many[c], &reversed[2 - c]}) {
      REQUIRE((*other)->marks.size() == one[c]->marks.size());
      CHECK((*other)->channel == one[c]->channel);
      CHECK((*other)->timing_sd == one[c]->timing_sd);
      for (std::size_t i = 0; i < one[c]->marks.size(); ++i) {
        CHECK((*other)->marks[i].sample == one[c]->marks[i].sample);
        CHECK((*other)->marks[i].confidence == one[c]->marks[i].confidence);
      }
      REQUIRE((*other)->quality.size() == one[c]->quality.size());
      for (std::size_t w = 0; w < one[c]->quality.size(); ++w)
        CHECK((*other)->quality[w].index == one[c]->quality[w].index);
    }
  }
}

TEST_CASE("hum of 0.3 of the beats moves no mark by more than 0.1 ms", "[locality]") {
  Trace clean(60.0, 1000.0);
  for (double t = 0.3; t < 59.5; t += 0.2501)
    clean.add_front(t, 1.0, 2e-3);
  clean.add_noise(0.01, 3);
  Trace hummed = clean;
  const double frequency = GENERATE(50.03, 59.98);
  hummed.add_sine(0.3, frequency, 0.2);
  hummed.add_sine(0.1, 3.0 * frequency, 0.7);
  const auto lead = GENERATE(Lead::unipolar, Lead::bipolar);
  const auto before = marks_of(clean.samples, 1000.0, lead);
  const auto after = marks_of(hummed.samples, 1000.0, lead);
  CHECK_THAT(after.mains_hz, WithinAbs(frequency, 0.01));
  REQUIRE(before.marks.size() == after.marks.size());
  for (std::size_t i = 0; i < before.marks.size(); ++i)
    CHECK_THAT(after.marks[i].time.value(), WithinAbs(before.marks[i].time.value(), 1e-4));
}

namespace {

/// A day of beats at 240/min under noise, made as it is read.
class EndlessBeats final : public recording::SampleStore {
public:
  EndlessBeats(std::size_t size, double rate) : size_(size), rate_(rate) {}
  [[nodiscard]] std::size_t size() const override { return size_; }
  void read(std::size_t first, std::span<double> out) const override {
    for (std::size_t i = 0; i < out.size(); ++i) {
      std::uint64_t h = (first + i + 1) * 0x9E3779B97F4A7C15ULL;
      h = (h ^ (h >> 29U)) * 0xBF58476D1CE4E5B9ULL;
      const double u = (std::fmod(static_cast<double>(first + i) / rate_, 0.25) - 0.125) / 2e-3;
      out[i] = 0.05 * (static_cast<double>(h >> 11U) * 0x1.0p-53 - 0.5) - u * std::exp(0.5 - 0.5 * u * u);
    }
  }

private:
  std::size_t size_;
  double rate_;
};

} // namespace

TEST_CASE("a day at 1 kHz is read in bounded memory", "[locality][.long]") {
  auto channel = channel_of_samples({0.0}, 1000.0, Role::ventricular, Lead::unipolar);
  auto recording = std::make_shared<recording::Recording>(*channel.recording);
  const std::size_t size = 86400000;
  recording->signals[0].samples = std::make_shared<EndlessBeats>(size, 1000.0);
  recording->signals[0].time_base = recording::TimeBase(Hertz(1000.0), {{0, size, Seconds(0.0)}});
  channel.recording = recording;
  const auto found = activation::compute(channel, {});
  REQUIRE(found.ok());
  CHECK(found->marks.size() == 86400 * 4);
  rusage usage{};
  getrusage(RUSAGE_SELF, &usage);
  // 345600 beats of 168 bytes, twice, and a block of some 300000 samples: about 150 MB; the samples alone
  // would be 690 MB.
  CHECK(usage.ru_maxrss < 400 * 1024);
}
