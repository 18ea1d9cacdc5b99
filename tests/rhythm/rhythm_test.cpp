// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include "rhythm/rhythm.h"

using namespace chronodrome;
using conduction::DelayRow;
using conduction::DelayState;
using conduction::PathwayDelays;

namespace {

/// Atrial beats every `cycle` ms with these delays in ms; a negative delay is a blocked beat.
PathwayDelays pathway(double cycle, const std::vector<double>& delays, double start = 0.0) {
  PathwayDelays av;
  double time = start;
  for (const double delay : delays) {
    DelayRow row;
    row.from_time = milliseconds(time);
    row.state = delay < 0 ? DelayState::blocked : DelayState::conducted;
    if (delay >= 0) {
      row.to_time = milliseconds(time + delay);
      row.delay = milliseconds(delay);
    }
    av.rows.push_back(row);
    time += cycle;
  }
  return av;
}

std::vector<rhythm::Episode> of_kind(const rhythm::Rhythm& all, const std::string& kind) {
  std::vector<rhythm::Episode> found;
  for (const auto& episode : all.episodes) {
    if (episode.kind == kind) found.push_back(episode);
  }
  return found;
}

activation::ChannelActivations chamber(const std::vector<double>& times_s) {
  activation::ChannelActivations channel;
  channel.channel = "RA";
  for (const double t : times_s) {
    activation::Activation mark;
    mark.time = Seconds(t);
    channel.marks.push_back(mark);
  }
  return channel;
}

rhythm::Rhythm read_block(const PathwayDelays& av, double end_s) {
  rhythm::RhythmInputs inputs;
  inputs.av = &av;
  inputs.end = Seconds(end_s);
  auto found = rhythm::compute(inputs, {});
  REQUIRE(found.ok());
  return *found;
}

std::vector<double> repeated(const std::vector<double>& group, int times) {
  std::vector<double> all;
  for (int i = 0; i < times; ++i)
    all.insert(all.end(), group.begin(), group.end());
  return all;
}

} // namespace

TEST_CASE("delay that rises to a dropped beat and falls after it is Wenckebach with its n:m", "[rhythm]") {
  // Hand-made classic: cycle 200 ms, delays 80, 120, 140, dropped; increments 40 and 20.
  auto delays = repeated({80, 120, 140, -1}, 5);
  delays.push_back(80);
  const auto found = of_kind(read_block(pathway(200, delays), 5.0), "wenckebach");
  REQUIRE(found.size() == 1);
  CHECK(found[0].start == Seconds(0.0));
  CHECK_THAT(found[0].end.value(), Catch::Matchers::WithinAbs(4.0, 1e-12));
  CHECK(found[0].detail ==
        "ratio=4:3;groups=5;atrial_beats=20;conducted=15;first_delay_ms=80.00;last_delay_ms=140.00;"
        "increments_ms=40.00 20.00;delay_after_block_ms=80.00");
}

TEST_CASE("fixed delay around a single dropped beat is second degree with fixed delay", "[rhythm]") {
  auto delays = repeated({60, 60, -1}, 4);
  delays.push_back(60);
  const auto result = read_block(pathway(200, delays), 3.0);
  const auto found = of_kind(result, "second_degree_fixed");
  REQUIRE(found.size() == 1);
  CHECK(found[0].detail.rfind("ratio=3:2;groups=4;", 0) == 0);
  CHECK(of_kind(result, "wenckebach").empty());
}

TEST_CASE("every second beat dropped is 2:1, whose type cannot be told", "[rhythm]") {
  const auto found = of_kind(read_block(pathway(200, repeated({80, -1}, 6)), 3.0), "two_to_one");
  REQUIRE(found.size() == 1);
  CHECK(found[0].detail.find("type=cannot be told") != std::string::npos);
}

TEST_CASE("one dropped beat after one conducted beat is undetermined", "[rhythm]") {
  const auto result = read_block(pathway(200, {-1, 80, -1, 80, 80, 80, 80}), 1.4);
  CHECK(of_kind(result, "two_to_one").empty());
  CHECK(of_kind(result, "undetermined").size() == 2);
}

TEST_CASE("two dropped beats in a row are high degree, five are complete block", "[rhythm]") {
  auto high = read_block(pathway(200, repeated({80, -1, -1}, 4)), 2.4);
  CHECK(of_kind(high, "high_degree_av_block").size() == 1);
  const auto complete =
      of_kind(read_block(pathway(200, {80, 80, -1, -1, -1, -1, -1, 80, 80}), 1.8), "complete_av_block");
  REQUIRE(complete.size() == 1);
  CHECK_THAT(complete[0].start.value(), Catch::Matchers::WithinAbs(0.4, 1e-12));
  CHECK_THAT(complete[0].end.value(), Catch::Matchers::WithinAbs(1.4, 1e-12));
  // Three beats at a slow rate are more than two seconds.
  CHECK(of_kind(read_block(pathway(900, {80, 80, -1, -1, -1, 80, 80}), 6.3), "complete_av_block").size() ==
        1);
}

TEST_CASE("a dropped beat after a long 1:1 run takes only the beats over which the delay rose", "[rhythm]") {
  std::vector<double> delays(200, 60.0);
  for (const double d : {70.0, 85.0, 95.0, -1.0, 62.0, 63.0, 62.5})
    delays.push_back(d);
  const auto found = of_kind(read_block(pathway(200, delays), 42.0), "wenckebach");
  REQUIRE(found.size() == 1);
  CHECK(found[0].detail.rfind("ratio=5:4;", 0) == 0);
  CHECK_THAT(found[0].start.value(), Catch::Matchers::WithinAbs(199 * 0.2, 1e-9));
}

TEST_CASE("delay above 1.5 times that of the first minute is first degree", "[rhythm]") {
  std::vector<double> delays(400, 50.0);
  delays.insert(delays.end(), 20, 80.0);
  delays.insert(delays.end(), 20, 74.0);
  const auto found = of_kind(read_block(pathway(200, delays), 90.0), "first_degree_av_block");
  REQUIRE(found.size() == 1);
  CHECK(found[0].detail == "beats=20;median_delay_ms=80.00;reference_delay_ms=50.00;limit_ms=75.00");
}

TEST_CASE("an interval above 1.7 cycles is a pause, silence above 5 s and 6 cycles is arrest", "[rhythm]") {
  std::vector<double> times;
  for (int i = 0; i < 40; ++i)
    times.push_back(0.2 * i);
  times.push_back(times.back() + 0.35); // 1.75 cycles
  for (int i = 0; i < 20; ++i)
    times.push_back(times.back() + 0.2);
  times.push_back(times.back() + 6.0);
  for (int i = 0; i < 20; ++i)
    times.push_back(times.back() + 0.2);
  const auto atria = chamber(times);
  rhythm::RhythmInputs inputs;
  inputs.atrial = &atria;
  inputs.end = Seconds(times.back() + 30.0);
  const auto result = rhythm::compute(inputs, {});
  REQUIRE(result.ok());
  REQUIRE(of_kind(*result, "sinus_pause").size() == 1);
  CHECK(of_kind(*result, "sinus_pause")[0].detail.find("ratio=1.75") != std::string::npos);
  const auto arrests = of_kind(*result, "arrest");
  REQUIRE(arrests.size() == 2); // the silence of 6 s, and that after the last beat
  CHECK(arrests[1].end == inputs.end);
  CHECK(of_kind(*result, "regular").size() == 3);
}

TEST_CASE("a gap is no pause", "[rhythm]") {
  auto atria = chamber({0.0, 0.2, 0.4, 0.6, 0.8, 20.0, 20.2, 20.4, 20.6});
  atria.unreadable.push_back({{Seconds(0.9), Seconds(19.9)}, "gap"});
  rhythm::RhythmInputs inputs;
  inputs.atrial = &atria;
  inputs.end = Seconds(20.8);
  const auto result = rhythm::compute(inputs, {});
  REQUIRE(result.ok());
  CHECK(of_kind(*result, "arrest").empty());
  CHECK(of_kind(*result, "sinus_pause").empty());
  REQUIRE(of_kind(*result, "unreadable").size() == 1);
  CHECK(of_kind(*result, "regular").size() == 2);
}

TEST_CASE("no beat at all in a readable recording is arrest", "[rhythm]") {
  const auto atria = chamber({});
  rhythm::RhythmInputs inputs;
  inputs.atrial = &atria;
  inputs.end = Seconds(60.0);
  const auto result = rhythm::compute(inputs, {});
  REQUIRE(result.ok());
  REQUIRE(result->episodes.size() == 1);
  CHECK(result->episodes[0].kind == "arrest");
}

TEST_CASE("rhythm settings out of range are refused before any work", "[rhythm]") {
  rhythm::RhythmSettings settings;
  settings.pause_ratio = 1.0;
  const auto result = rhythm::compute({}, settings);
  REQUIRE_FALSE(result.ok());
  CHECK(result.error().code == ErrorCode::bad_usage);
}

TEST_CASE("a beat whose answer cannot be seen is no block", "[rhythm]") {
  auto av = pathway(200, repeated({60}, 40));
  for (std::size_t i = 10; i < 20; ++i) {
    av.rows[i].state = DelayState::blocked;
    av.rows[i].answer_unseen = true;
    av.rows[i].to_time.reset();
    av.rows[i].delay.reset();
  }
  av.rows.back().state = DelayState::blocked;
  av.rows.back().answer_unseen = true;
  av.rows.back().delay.reset();
  for (const auto& episode : read_block(av, 8.0).episodes)
    CHECK(episode.kind == "regular");
}

TEST_CASE("retrograde beats break a sequence, and are no dropped beats", "[rhythm]") {
  auto av = pathway(200, {60, 60, 60, -1, 60, 60, -1, 60, 60, 60});
  for (std::size_t i = 4; i < 6; ++i) {
    av.rows[i].state = DelayState::retrograde;
    av.rows[i].delay = milliseconds(-50);
  }
  for (const auto& episode : read_block(av, 2.0).episodes) {
    CHECK(episode.kind != "second_degree_fixed");
    CHECK(episode.kind != "complete_av_block");
    // No row bridges the retrograde stretch from 0.8 to 1.2 s.
    if (episode.kind != "regular") CHECK((episode.end <= Seconds(0.81) || episode.start >= Seconds(1.19)));
  }
}

TEST_CASE("one dropped beat before the atria fall silent is no complete block", "[rhythm]") {
  auto av = pathway(200, {60, 60, 60, -1});
  auto later = pathway(200, {60, 60, 60}, 30'000.0);
  av.rows.insert(av.rows.end(), later.rows.begin(), later.rows.end());
  const auto result = read_block(av, 31.0);
  CHECK(of_kind(result, "complete_av_block").empty());
  REQUIRE(of_kind(result, "second_degree_fixed").size() == 1);
  CHECK(of_kind(result, "second_degree_fixed")[0].end < Seconds(0.9));
}

TEST_CASE("a heart that has become slow is slow, not pausing for good", "[rhythm]") {
  std::vector<double> times;
  for (int i = 0; i < 40; ++i)
    times.push_back(0.15 * i);
  for (int i = 0; i < 100; ++i)
    times.push_back(times.back() + 0.3);
  const auto atria = chamber(times);
  rhythm::RhythmInputs inputs;
  inputs.atrial = &atria;
  inputs.end = Seconds(times.back() + 0.2);
  const auto result = rhythm::compute(inputs, {});
  REQUIRE(result.ok());
  // Of eight intervals the median turns to the new cycle with the fifth.
  CHECK(of_kind(*result, "sinus_pause").size() <= 4);
  CHECK_FALSE(of_kind(*result, "sinus_pause").empty());
}

TEST_CASE("silence about a short loss of signal is still arrest", "[rhythm]") {
  rhythm::RhythmInputs inputs;
  inputs.end = Seconds(60.0);
  for (const auto& times :
       {std::vector<double>{}, std::vector<double>{0.1}, std::vector<double>{0.1, 0.3, 0.5, 0.7}}) {
    CAPTURE(times.size());
    auto atria = chamber(times);
    atria.unreadable.push_back({{Seconds(20.0), Seconds(20.3)}, "lead"});
    inputs.atrial = &atria;
    const auto result = rhythm::compute(inputs, {});
    REQUIRE(result.ok());
    const auto arrests = of_kind(*result, "arrest");
    REQUIRE(arrests.size() == 2);
    CHECK(arrests[0].end == Seconds(20.0));
    CHECK(arrests[1].start == Seconds(20.3));
    CHECK(arrests[1].end == Seconds(60.0));
  }
}
