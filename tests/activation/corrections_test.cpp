// Chronodrome, GPL-3.0-or-later.
#include "activation/corrections.h"

#include <algorithm>
#include <catch2/catch.hpp>

#include "activation/compute.h"
#include "support/channel_of_samples.h"
#include "support/electrogram_waves.h"

using namespace chronodrome;
using activation::ChannelActivations;
using activation::Origin;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;
using document::Correction;
using document::CorrectionKind;
using recording::Lead;
using recording::Role;

namespace {

recording::Channel beats_channel() {
  test_support::Trace trace(20.0, 1000.0);
  for (double t = 0.5; t < 19.6; t += 0.5)
    trace.add_front(t, 1.0, 2e-3);
  trace.add_noise(0.01, 1);
  return test_support::channel_of_samples(trace.samples, 1000.0, Role::atrial, Lead::unipolar, {}, "RA");
}

Correction correction(int seq, CorrectionKind what, double time, std::optional<double> to = std::nullopt,
                      const std::string& channel = "RA") {
  Correction c;
  c.seq = seq;
  c.what = what;
  c.channel = channel;
  c.time = Seconds(time);
  if (to) c.to_time = Seconds(*to);
  return c;
}

ChannelActivations corrected(const std::vector<Correction>& corrections) {
  const auto channel = beats_channel();
  auto found = *activation::compute(channel, {});
  REQUIRE(found.marks.size() == 39);
  found.warnings.clear();
  activation::apply_corrections(found, corrections, channel, {});
  for (std::size_t i = 1; i < found.marks.size(); ++i)
    CHECK(found.marks[i - 1].time < found.marks[i].time);
  return found;
}

} // namespace

TEST_CASE("a mark is added at the user's time, with its peak to peak", "[corrections]") {
  const auto found = corrected({correction(1, CorrectionKind::add, 1.2503)});
  REQUIRE(found.marks.size() == 40);
  const auto& mark = found.marks[2];
  CHECK_THAT(mark.time.value(), WithinAbs(1.2503, 1e-12));
  CHECK_THAT(mark.sample, WithinAbs(1250.3, 1e-9));
  CHECK(mark.origin == Origin::added);
  CHECK(mark.confidence == 1.0);
  CHECK(mark.amplitude < 0.1); // nothing but noise there
  CHECK(found.warnings.empty());
}

TEST_CASE("a mark is deleted, and an added one there carries the beat's peak to peak", "[corrections]") {
  const auto found =
      corrected({correction(1, CorrectionKind::remove, 1.003), correction(2, CorrectionKind::add, 1.001)});
  REQUIRE(found.marks.size() == 39);
  CHECK(found.marks[1].origin == Origin::added);
  CHECK_THAT(found.marks[1].time.value(), WithinAbs(1.001, 1e-12));
  CHECK_THAT(found.marks[1].amplitude, WithinRel(2.0, 0.05));
  CHECK(corrected({correction(1, CorrectionKind::remove, 1.0)}).marks.size() == 38);
}

TEST_CASE("a mark is moved and says so", "[corrections]") {
  const auto found = corrected({correction(1, CorrectionKind::move, 1.0, 1.007)});
  REQUIRE(found.marks.size() == 39);
  CHECK(found.marks[1].origin == Origin::moved);
  CHECK_THAT(found.marks[1].time.value(), WithinAbs(1.007, 1e-12));
  // Across other beats too.
  const auto far = corrected({correction(1, CorrectionKind::move, 1.0, 2.25)});
  CHECK(far.marks[1].origin == Origin::detected);
  CHECK(far.marks[3].origin == Origin::moved);
}

TEST_CASE("a correction that finds no mark is never applied to another beat", "[corrections]") {
  for (const auto what : {CorrectionKind::remove, CorrectionKind::move}) {
    const auto found = corrected({correction(7, what, 1.02, 1.3)});
    CHECK(found.marks.size() == 39);
    REQUIRE(found.warnings.size() == 1);
    CHECK(found.warnings[0].what.find("correction 7") == 0);
    CHECK(found.warnings[0].what.find("no mark within 5 ms") != std::string::npos);
    CHECK(std::all_of(found.marks.begin(), found.marks.end(),
                      [](const auto& m) { return m.origin == Origin::detected; }));
  }
}

TEST_CASE("five milliseconds away is found, more is not", "[corrections]") {
  const double at = corrected({}).marks[1].time.value();
  CHECK(corrected({correction(1, CorrectionKind::remove, at + 0.005)}).marks.size() == 38);
  CHECK(corrected({correction(1, CorrectionKind::remove, at - 0.005)}).marks.size() == 38);
  CHECK(corrected({correction(1, CorrectionKind::remove, at + 0.0051)}).marks.size() == 39);
}

TEST_CASE("corrections run in order of their numbers, whatever order they come in", "[corrections]") {
  const auto found =
      corrected({correction(2, CorrectionKind::remove, 1.25), correction(1, CorrectionKind::add, 1.25)});
  CHECK(found.marks.size() == 39);
  CHECK(found.warnings.empty());
}

TEST_CASE("what cannot be done is left out with a warning", "[corrections]") {
  // On another mark, outside the signal, without a time, with the new place taken.
  CHECK(corrected({correction(1, CorrectionKind::add, 1.001)}).warnings.size() == 1);
  CHECK(corrected({correction(1, CorrectionKind::add, 25.0)}).warnings.size() == 1);
  CHECK(corrected({correction(1, CorrectionKind::add, -1.0)}).warnings.size() == 1);
  Correction timeless = correction(1, CorrectionKind::add, 0.0);
  timeless.time.reset();
  CHECK(corrected({timeless}).warnings.size() == 1);
  const auto taken = corrected({correction(1, CorrectionKind::move, 1.0, 1.5)});
  CHECK(taken.warnings.size() == 1);
  CHECK(taken.marks.size() == 39);
  CHECK(taken.marks[1].origin == Origin::detected);
}

TEST_CASE("other channels and other kinds are left alone", "[corrections]") {
  const auto found = corrected({correction(1, CorrectionKind::remove, 1.0, std::nullopt, "RV"),
                                correction(2, CorrectionKind::exclude, 1.0, 2.0),
                                correction(3, CorrectionKind::retype, 1.0)});
  CHECK(found.marks.size() == 39);
  CHECK(found.warnings.empty());
}

TEST_CASE("on force each mark keeps its beat", "[corrections]") {
  test_support::Trace trace(20.0, 500.0);
  for (double t = 0.5; t < 19.3; t += 0.5)
    trace.add_bump(t, 10.0, 0.05);
  trace.add_noise(0.02, 1);
  const auto channel =
      test_support::channel_of_samples(trace.samples, 500.0, Role::tension, Lead::none, {}, "T");
  auto found = *activation::compute(channel, {});
  const std::size_t n = found.marks.size();
  REQUIRE(n > 30);
  const auto removed = found.beats[5];
  activation::apply_corrections(
      found,
      std::vector<Correction>{
          correction(1, CorrectionKind::remove, removed.time.value(), std::nullopt, "T"),
          correction(2, CorrectionKind::add, removed.time.value() + 0.003, std::nullopt, "T"),
          correction(3, CorrectionKind::add, 30.0, std::nullopt, "T")},
      channel, {});
  REQUIRE(found.marks.size() == n);
  REQUIRE(found.beats.size() == n);
  for (std::size_t i = 0; i < n; ++i)
    CHECK(found.beats[i].time == found.marks[i].time);
  // The beat measured about the new mark is the one that was there.
  CHECK_THAT(found.beats[5].developed, WithinRel(removed.developed, 1e-6));
  CHECK_THAT(found.beats[5].peak.value(), WithinAbs(removed.peak.value(), 1e-6));
  CHECK_THAT(found.beats[5].half_relaxation.value(), WithinAbs(removed.half_relaxation.value(), 1e-6));
  CHECK(found.marks[5].origin == Origin::added);
}
