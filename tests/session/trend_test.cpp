// Chronodrome, GPL-3.0-or-later.
#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <memory>

#include "conduction/pairing.h"
#include "session/trend.h"
#include "support/channel_of_samples.h"
#include "support/paired_marks.h"

using namespace chronodrome;
using session::PointState;

namespace {

/// A session of one atrial and one ventricular electrode whose beats are given in ms.
session::SessionResult heart(const std::vector<double>& atrial_ms, const std::vector<double>& ventricular_ms,
                             std::vector<recording::Span> unreadable = {}) {
  session::SessionResult result;
  const std::vector<std::pair<std::string, recording::Role>> electrodes = {
      {"RA", recording::Role::atrial}, {"RV", recording::Role::ventricular}};
  for (const auto& [label, role] : electrodes) {
    recording::Channel channel;
    channel.label = label;
    channel.role = role;
    channel.unit = "mV";
    result.channels.push_back(channel);
    auto marks = test_support::marks_at(label == "RA" ? atrial_ms : ventricular_ms, label);
    if (label == "RA") {
      for (const auto& span : unreadable)
        marks.unreadable.push_back({span, "gap"});
    }
    result.intervals.push_back(rhythm::intervals_of(marks, {}, {}));
    result.activations.push_back(marks);
  }
  document::PathwayEntry pathway{"AV", "RA", "RV", 20.0};
  result.session.pathways.push_back(pathway);
  auto paired = conduction::pair("AV", {&result.activations[0], recording::Role::atrial},
                                 {&result.activations[1], recording::Role::ventricular}, {});
  REQUIRE(paired.ok());
  result.pathways.push_back(*paired);
  return result;
}

std::vector<double> every(double step_ms, std::size_t n, double from_ms = 0.0) {
  std::vector<double> times;
  for (std::size_t i = 0; i < n; ++i)
    times.push_back(from_ms + step_ms * static_cast<double>(i));
  return times;
}

session::Trend flat_with(const std::vector<double>& values) {
  session::Trend trend;
  for (std::size_t i = 0; i < values.size(); ++i)
    trend.points.push_back({Seconds(static_cast<double>(i)), values[i], PointState::normal, i > 0});
  return trend;
}

} // namespace

TEST_CASE("a rate trend is 60 over each interval, at its later beat", "[session][trend]") {
  const auto result = heart({0, 250, 550, 800}, {});
  const auto trend = session::trend_of(result, "rate:RA");
  CHECK(trend.unit == "bpm");
  CHECK(trend.role == recording::Role::atrial);
  REQUIRE(trend.points.size() == 3);
  CHECK(trend.points[0].time == Seconds(0.25));
  CHECK_THAT(trend.points[0].value, Catch::Matchers::WithinRel(240.0, 1e-12));
  CHECK_THAT(trend.points[1].value, Catch::Matchers::WithinRel(200.0, 1e-12));
  CHECK_FALSE(trend.points[0].follows);
  CHECK(trend.points[1].follows);
}

TEST_CASE("an interval that crosses a gap is no point, and breaks the line", "[session][trend]") {
  auto beats = every(250, 9);
  const auto late = every(250, 9, 10000);
  beats.insert(beats.end(), late.begin(), late.end());
  const auto result = heart(beats, {}, {{Seconds(3.0), Seconds(9.0)}});
  const auto trend = session::trend_of(result, "rate:RA");
  REQUIRE(trend.points.size() == 16);
  CHECK_FALSE(trend.points[8].follows);
  CHECK(std::count_if(trend.points.begin(), trend.points.end(), [](const auto& p) { return p.follows; }) ==
        14);
  REQUIRE(trend.lost.size() == 1);
  CHECK(trend.lost[0].reason == "gap");
  CHECK_FALSE(trend.lost[0].is_excluded);
}

TEST_CASE("a premature beat is flagged and an excluded stretch is marked with its reason",
          "[session][trend]") {
  auto beats = every(250, 20);
  beats[12] -= 80.0;
  auto result = heart(beats, {});
  document::Correction correction;
  correction.what = document::CorrectionKind::exclude;
  correction.time = Seconds(1.0);
  correction.to_time = Seconds(1.6);
  correction.why = "bubble";
  result.session.review.push_back(correction);
  const auto trend = session::trend_of(result, "rate:RA");
  CHECK(trend.points[11].state == PointState::flagged);
  CHECK(trend.points[5].state == PointState::excluded); // beat at 1.5 s
  CHECK(trend.points[6].state == PointState::normal);   // beat at 1.75 s
  REQUIRE(trend.lost.size() == 1);
  CHECK(trend.lost[0].is_excluded);
  CHECK(trend.lost[0].reason == "bubble");
}

TEST_CASE("delay and velocity come from conducted beats, block is listed beside them", "[session][trend]") {
  // 2:1: every second atrial beat reaches the ventricle after 80 ms.
  auto atrial = every(300, 8);
  auto ventricular = every(300, 8, 80);
  const auto more = every(250, 16, 2400);
  atrial.insert(atrial.end(), more.begin(), more.end());
  const auto half = every(500, 8, 2480);
  ventricular.insert(ventricular.end(), half.begin(), half.end());
  const auto result = heart(atrial, ventricular);
  const auto delay = session::trend_of(result, "delay:AV");
  CHECK(delay.unit == "ms");
  CHECK(delay.role == recording::Role::ventricular);
  REQUIRE(delay.points.size() == 16);
  for (const auto& point : delay.points)
    CHECK_THAT(point.value, Catch::Matchers::WithinAbs(80.0, 1e-9));
  CHECK(delay.blocked.size() == 8);
  const auto velocity = session::trend_of(result, "velocity:AV");
  CHECK(velocity.unit == "m/s");
  REQUIRE(velocity.points.size() == 16);
  CHECK_THAT(velocity.points[3].value, Catch::Matchers::WithinRel(0.02 / 0.08, 1e-9));
}

TEST_CASE("the running share conducted is 1 under 1:1 and a half under steady 2:1", "[session][trend]") {
  auto atrial = every(300, 20);
  auto ventricular = every(300, 20, 80);
  const auto more = every(250, 40, 6000);
  atrial.insert(atrial.end(), more.begin(), more.end());
  const auto half = every(500, 20, 6080);
  ventricular.insert(ventricular.end(), half.begin(), half.end());
  const auto trend = session::trend_of(heart(atrial, ventricular), "conducted:AV");
  REQUIRE(trend.points.size() > 40);
  CHECK(trend.points.front().value == 1.0);
  CHECK_THAT(trend.points.front().time.value(),
             Catch::Matchers::WithinAbs(0.3 * static_cast<double>(session::kShareAttempts - 1), 1e-9));
  CHECK(trend.points[trend.points.size() - 2].value == 0.5);
  CHECK(trend.low < 0.0);
  CHECK(trend.high > 1.0);
}

TEST_CASE("force and rate of rise come from mechanical beats", "[session][trend]") {
  auto result = heart({}, {});
  recording::Channel channel;
  channel.label = "T";
  channel.role = recording::Role::tension;
  channel.unit = "mN";
  result.channels.push_back(channel);
  auto marks = test_support::marks_at(every(400, 5), "T");
  for (const auto& mark : marks.marks) {
    activation::MechanicalBeat beat;
    beat.time = mark.time;
    beat.developed = 3.0;
    beat.rate_of_rise = 90.0;
    marks.beats.push_back(beat);
  }
  marks.marks[2].origin = activation::Origin::moved;
  result.activations.push_back(marks);
  result.intervals.push_back({});
  const auto force = session::trend_of(result, "force:T");
  CHECK(force.unit == "mN");
  REQUIRE(force.points.size() == 5);
  CHECK(force.points[1].value == 3.0);
  CHECK(force.points[2].state == PointState::flagged);
  REQUIRE(force.edited.size() == 1);
  CHECK(force.edited[0] == marks.marks[2].time);
  const auto rise = session::trend_of(result, "dpdt_max:T");
  CHECK(rise.unit == "mN/s");
  CHECK(rise.points[0].value == 90.0);
}

TEST_CASE("flow is one mean a second, broken where samples are missing", "[session][trend]") {
  session::SessionResult result;
  std::vector<double> samples(100, 8.0);
  std::fill(samples.begin() + 50, samples.end(), 6.0);
  auto channel = test_support::channel_of_samples(samples, 10.0, recording::Role::flow, recording::Lead::none,
                                                  {{0, 50, Seconds(0.0)}, {50, 50, Seconds(20.0)}}, "F");
  channel.unit = "mL/min";
  result.channels.push_back(channel);
  activation::ChannelActivations none;
  none.channel = "F";
  result.activations.push_back(none);
  result.intervals.push_back({});
  const auto trend = session::trend_of(result, "flow:F");
  CHECK(trend.unit == "mL/min");
  REQUIRE(trend.points.size() == 10);
  CHECK(trend.points[4].value == 8.0);
  CHECK(trend.points[4].follows);
  CHECK(trend.points[5].value == 6.0);
  CHECK_FALSE(trend.points[5].follows);
}

TEST_CASE("a measure that the session does not hold has no points", "[session][trend]") {
  const auto result = heart(every(250, 5), {});
  for (const char* measure : {"rate:LA", "delay:VA", "nonsense", "force:", "flow:Q"}) {
    const auto trend = session::trend_of(result, measure);
    CHECK(trend.points.empty());
    CHECK(trend.low < trend.high);
  }
}

TEST_CASE("one wild beat does not flatten the axis, a sustained level is inside it", "[session][trend]") {
  auto beats = every(300, 400);
  const auto faster = every(280, 12, beats.back() + 280);
  beats.insert(beats.end(), faster.begin(), faster.end());
  beats.insert(beats.begin() + 200, beats[199] + 30.0); // 2000 beats/min, then one at 222
  const auto trend = session::trend_of(heart(beats, {}), "rate:RA");
  const auto highest = std::max_element(trend.points.begin(), trend.points.end(),
                                        [](const auto& a, const auto& b) { return a.value < b.value; });
  CHECK_THAT(highest->value, Catch::Matchers::WithinRel(2000.0, 1e-6));
  CHECK(trend.high < 260.0);
  CHECK(trend.high > 60.0 / 0.28);
  CHECK(trend.low < 200.0);
  CHECK(trend.low > 150.0);
}

TEST_CASE("the axis shows every response, and never has no height", "[session][trend]") {
  auto result = heart(every(300, 50), {});
  auto trend = session::trend_of(result, "rate:RA");
  CHECK(trend.high - trend.low >= 0.1 * 200.0);
  response::Response row;
  row.measure = "rate:RA";
  row.value = 320.0;
  result.responses.rows.push_back(row);
  trend = session::trend_of(result, "rate:RA");
  CHECK(trend.high > 320.0);
}

TEST_CASE("columns keep the true extremes of every beat", "[session][trend]") {
  std::vector<double> values(10000, 100.0);
  values[7777] = 400.0;
  values[1234] = -50.0;
  const auto trend = flat_with(values);
  const auto columns = session::columns_of(trend, Seconds(0.0), Seconds(10000.0), 300);
  REQUIRE(columns.size() == 300);
  std::size_t sum = 0;
  double high = -1e9, low = 1e9;
  for (const auto& column : columns) {
    sum += column.count;
    high = std::max(high, column.high);
    low = std::min(low, column.low);
  }
  CHECK(sum == values.size());
  CHECK(high == 400.0);
  CHECK(low == -50.0);
  CHECK(columns[233].high == 400.0);
  CHECK(columns[234].high == 100.0);
}

TEST_CASE("columns end the line where something is lost and keep excluded points apart", "[session][trend]") {
  auto trend = flat_with({1, 2, 3, 4, 5, 6, 7, 8});
  trend.points[3].follows = false;
  trend.points[5].state = PointState::excluded;
  trend.points[7].state = PointState::flagged;
  const auto columns = session::columns_of(trend, Seconds(0.0), Seconds(8.0), 8);
  CHECK_FALSE(columns[0].follows);
  CHECK(columns[1].follows);
  CHECK_FALSE(columns[3].follows);
  CHECK(columns[5].count == 0);
  CHECK(columns[5].excluded == 1);
  CHECK(columns[5].excluded_low == 6.0);
  CHECK_FALSE(columns[6].follows); // the point before is left out
  CHECK(columns[7].flagged == std::optional(8.0));
  CHECK_FALSE(columns[6].flagged.has_value());
  const auto part = session::columns_of(trend, Seconds(2.0), Seconds(3.0), 4);
  CHECK(part[0].count == 1);
  CHECK(part[0].first == 3.0);
  CHECK(part[1].count + part[2].count + part[3].count == 0);
}

TEST_CASE("the nearest point is found on either side, or none", "[session][trend]") {
  const auto trend = flat_with({1, 2, 3});
  CHECK(session::point_near(trend, Seconds(0.9), Seconds(0.5))->value == 2.0);
  CHECK(session::point_near(trend, Seconds(1.4), Seconds(0.5))->value == 2.0);
  CHECK(session::point_near(trend, Seconds(2.3), Seconds(0.5))->value == 3.0);
  CHECK_FALSE(session::point_near(trend, Seconds(3.0), Seconds(0.5)).has_value());
  CHECK_FALSE(session::point_near(session::Trend{}, Seconds(3.0), Seconds(0.5)).has_value());
}
