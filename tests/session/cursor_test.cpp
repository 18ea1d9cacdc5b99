// Chronodrome, GPL-3.0-or-later.
#include "session/cursor.h"

#include <catch2/catch.hpp>

#include "session/hand_made_result.h"

using namespace chronodrome;
using Catch::Matchers::WithinAbs;

namespace {

session::CursorReading read(const session::SessionResult& result, double time,
                            std::span<const recording::Channel> filtered = {}) {
  return session::read_cursor(result, session::bath_of(result), filtered, Seconds(time));
}

} // namespace

TEST_CASE("a cursor reads the nearest sample of each channel", "[session]") {
  const auto result = test_support::hand_made_result();
  const auto reading = read(result, 12.3456);
  REQUIRE(reading.channels.size() == 2);
  CHECK(reading.channels[0].channel == "RA");
  CHECK(reading.channels[0].unit == "mV");
  CHECK(reading.channels[0].raw == 12346.0);
  CHECK(reading.channels[1].raw == -24692.0);
  CHECK_THAT(reading.channels[0].sample_time->value(), WithinAbs(12.346, 1e-9));
  CHECK_FALSE(reading.channels[0].filtered);
}

TEST_CASE("in a gap, and beyond the ends, a cursor reads no value", "[session]") {
  const auto result = test_support::hand_made_result();
  const auto gap = read(result, 32.0);
  CHECK(gap.channels[0].raw == 32000.0);
  CHECK_FALSE(gap.channels[1].raw);
  CHECK_FALSE(gap.channels[1].sample_time);
  CHECK_FALSE(read(result, 61.0).channels[0].raw);
  // The last sample before a gap is not read from behind it.
  CHECK(read(result, 29.9996).channels[1].raw == -2.0 * 29999.0);
}

TEST_CASE("filtered values come from the stretch of that label", "[session]") {
  const auto result = test_support::hand_made_result();
  recording::Channel filtered = result.channels[1];
  filtered.gain = 0.5;
  const std::vector<recording::Channel> stretches{filtered};
  const auto reading = read(result, 5.0, stretches);
  CHECK_FALSE(reading.channels[0].filtered);
  CHECK(reading.channels[1].raw == -10000.0);
  CHECK(reading.channels[1].filtered == -5000.0);
}

TEST_CASE("a cursor reads the nearest mark with the intervals beside it", "[session]") {
  const auto result = test_support::hand_made_result();
  const auto reading = read(result, 19.3);
  const auto& ventricle = *reading.channels[1].nearest;
  CHECK_THAT(ventricle.time.value(), WithinAbs(19.1, 1e-12));
  CHECK_THAT(ventricle.interval_before->value(), WithinAbs(1.0, 1e-9));
  CHECK_THAT(ventricle.interval_after->value(), WithinAbs(2.0, 1e-9));
  const auto first = read(result, 0.2);
  CHECK_FALSE(first.channels[0].nearest->interval_before);
  CHECK(first.channels[0].nearest->interval_after);
  // 29.1 s to 35.1 s goes across a gap: no interval.
  const auto before_gap = read(result, 29.0);
  CHECK_FALSE(before_gap.channels[1].nearest->interval_after);
  CHECK(before_gap.channels[1].nearest->interval_before);
}

TEST_CASE("a cursor reads the delay of the beat it stands at", "[session]") {
  const auto result = test_support::hand_made_result();
  const auto conducted = read(result, 7.08).pathways.at(0);
  CHECK(conducted.pathway == "AV");
  CHECK_THAT(conducted.delay->value(), WithinAbs(0.1, 1e-9));
  CHECK(conducted.from_time == Seconds(7.0));
  const auto blocked = read(result, 20.2).pathways.at(0);
  CHECK(blocked.state == conduction::DelayState::blocked);
  CHECK_FALSE(blocked.delay);
  CHECK(blocked.from_time == Seconds(20.0));
}

TEST_CASE("a cursor reads the bath as the tissue meets it and the log as it was written", "[session]") {
  const auto result = test_support::hand_made_result();
  const auto before = read(result, 9.0);
  CHECK(before.bath.empty());
  CHECK_FALSE(before.since_event);
  const auto logged = read(result, 11.0);
  CHECK(logged.bath.empty());
  CHECK(logged.since_event == Seconds(1.0));
  const auto later = read(result, 41.5);
  REQUIRE(later.bath.size() == 1);
  CHECK(later.bath[0].agent == "acetylcholine");
  CHECK(later.bath[0].concentration == Molar(1e-6));
  CHECK(later.since_event == Seconds(1.5));
  CHECK(later.last_event->concentration == Molar(3e-6));
  CHECK(read(result, 43.0).bath[0].concentration == Molar(3e-6));
}

TEST_CASE("the clock goes on past midnight, and is missing where the file tells none", "[session]") {
  auto result = test_support::hand_made_result();
  CHECK_THAT(read(result, 10.0).clock->value(), WithinAbs(86380.5, 1e-6));
  CHECK_THAT(read(result, 31.25).clock->value(), WithinAbs(1.75, 1e-6));
  auto silent = std::make_shared<recording::Recording>(*result.recording);
  silent->clock_start.reset();
  result.recording = silent;
  CHECK_FALSE(read(result, 10.0).clock);
}

TEST_CASE("two cursors give a difference, the rate of beats that far apart, and steps", "[session]") {
  const auto result = test_support::hand_made_result();
  const auto difference = session::difference_of(read(result, 10.25), read(result, 10.0));
  CHECK_THAT(difference.time.value(), WithinAbs(-0.25, 1e-12));
  CHECK_THAT(difference.rate->value(), WithinAbs(240.0, 1e-9));
  CHECK(difference.channels[0].raw == -250.0);
  CHECK(difference.channels[1].raw == 500.0);
  CHECK_FALSE(difference.channels[0].filtered);
  CHECK_FALSE(session::difference_of(read(result, 10.0), read(result, 10.0)).rate);
  CHECK_FALSE(session::difference_of(read(result, 10.0), read(result, 32.0)).channels[1].raw);
}

TEST_CASE("nearest marks and samples, at the edges too", "[session]") {
  const auto result = test_support::hand_made_result();
  const auto& marks = result.activations[0].marks;
  CHECK(session::nearest_mark(marks, Seconds(-5.0)) == 0U);
  CHECK(session::nearest_mark(marks, Seconds(3.4)) == 2U);
  CHECK(session::nearest_mark(marks, Seconds(3.6)) == 3U);
  CHECK(session::nearest_mark(marks, Seconds(99.0)) == marks.size() - 1);
  CHECK_FALSE(session::nearest_mark({}, Seconds(1.0)));
  const auto& ventricle = result.channels[1];
  CHECK_THAT(session::nearest_sample(ventricle, Seconds(31.0))->value(), WithinAbs(29.999, 1e-9));
  CHECK_THAT(session::nearest_sample(ventricle, Seconds(34.0))->value(), WithinAbs(35.0, 1e-9));
  CHECK_THAT(session::nearest_sample(ventricle, Seconds(-1.0))->value(), WithinAbs(0.0, 1e-9));
  CHECK_THAT(session::nearest_sample(ventricle, Seconds(99.0))->value(), WithinAbs(59.999, 1e-9));
  CHECK_THAT(session::nearest_sample(ventricle, Seconds(1.00049))->value(), WithinAbs(1.0, 1e-9));
}
