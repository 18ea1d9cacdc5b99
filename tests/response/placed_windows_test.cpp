// Chronodrome, GPL-3.0-or-later.
// Windows placed by hand: which step they meet, and what is read from them.
#include <algorithm>
#include <catch2/catch.hpp>

#include "response/hearts.h"
#include "response/placed_windows.h"

using namespace chronodrome;
using namespace chronodrome::tests;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;
using document::WindowChoice;
using response::Status;

namespace {

WindowChoice choice(double concentration, double start, double end, const std::string& measure = "") {
  WindowChoice window;
  window.curve = 1;
  window.concentration = Molar(concentration);
  window.measure = measure;
  window.start = Seconds(start);
  window.end = Seconds(end);
  return window;
}

/// A heart of two channels whose cycle falls in steps of 100 s: 0.5 s, then 0.4 s, then 0.25 s.
struct Heart {
  activation::ChannelActivations atrium = channel_of("RA", stepwise());
  activation::ChannelActivations ventricle = channel_of("RV", stepwise());
  protocol::CurvePlan plan = plan_of({0.0, 1e-7, 1e-6}, 100.0);

  static std::vector<double> stepwise() {
    auto times = regular(0.0, 100.0, 0.5);
    add_times(times, regular(100.0, 200.0, 0.4));
    add_times(times, regular(200.0, 300.0, 0.25));
    return times;
  }

  [[nodiscard]] response::Responses read(const std::vector<WindowChoice>& placed) const {
    response::Inputs inputs;
    inputs.plan = &plan;
    inputs.channels = {{&atrium, recording::Role::atrial, "mV"},
                       {&ventricle, recording::Role::ventricular, "mV"}};
    inputs.measures = {"rate:RA", "rate:RV"};
    inputs.placed = placed;
    inputs.end = Seconds(300.0);
    auto responses = response::compute(inputs, {});
    REQUIRE(responses.ok());
    return *responses;
  }
};

bool says(const response::Response& row, const std::string& words) {
  return std::any_of(row.flags.begin(), row.flags.end(),
                     [&](const std::string& flag) { return flag.find(words) != std::string::npos; });
}

} // namespace

TEST_CASE("a placed window stands in place of the rule's, for its step and measure only", "[response]") {
  const Heart heart;
  const auto ruled = heart.read({});
  const auto read = heart.read({choice(1e-7, 120.0, 150.0, "rate:RA")});
  CHECK(read.warnings.empty());
  REQUIRE(read.rows.size() == 6);
  for (std::size_t i = 0; i < 6; ++i) {
    CAPTURE(i);
    CHECK(read.rows[i].is_placed == (i == 1));
    if (i == 1) continue;
    CHECK(read.rows[i].window_start == ruled.rows[i].window_start);
    CHECK(read.rows[i].flags == ruled.rows[i].flags);
  }
  const auto& row = read.rows[1];
  CHECK(row.window_start == Seconds(120.0));
  CHECK(row.window_end == Seconds(150.0));
  CHECK(row.status == Status::ok);
  CHECK_THAT(row.value.value(), WithinRel(150.0, 1e-9));
  CHECK(row.n_beats == 75); // 120.0, 120.4 ... 149.6
  CHECK(row.flags == std::vector<std::string>{"window placed by hand"});
}

TEST_CASE("without a measure a placed window counts for all; a later choice of the same step wins",
          "[response]") {
  const Heart heart;
  const auto all = heart.read({choice(0.0, 10.0, 40.0)});
  CHECK(all.rows[0].window_start == Seconds(10.0));
  CHECK(all.rows[3].window_start == Seconds(10.0));
  CHECK_FALSE(all.rows[1].is_placed);

  const auto later = heart.read({choice(0.0, 10.0, 40.0), choice(0.0, 20.0, 50.0, "rate:RV")});
  CHECK(later.rows[0].window_start == Seconds(10.0));
  CHECK(later.rows[3].window_start == Seconds(20.0));
  const auto reverse = heart.read({choice(0.0, 20.0, 50.0, "rate:RV"), choice(0.0, 10.0, 40.0)});
  CHECK(reverse.rows[3].window_start == Seconds(10.0));
  // One without effect does not take away the one before it.
  const auto beside = heart.read({choice(0.0, 10.0, 40.0), choice(0.0, 150.0, 180.0)});
  CHECK(beside.rows[0].window_start == Seconds(10.0));
  CHECK(beside.warnings.size() == 1);
}

TEST_CASE("a window that leaves the recording is cut, one that leaves its step is read and said",
          "[response]") {
  const Heart heart;
  const auto cut = heart.read({choice(1e-6, 280.0, 320.0, "rate:RA")}).rows[2];
  CHECK(cut.window_end == Seconds(300.0));
  CHECK(says(cut, "reached beyond the recording"));
  CHECK_FALSE(says(cut, "beyond its step"));
  const auto wide = heart.read({choice(1e-7, 190.0, 210.0, "rate:RA")}).rows[1];
  CHECK(wide.window_end == Seconds(210.0));
  CHECK(says(wide, "beyond its step, which runs from 100 s to 200 s"));
  // 26 beats 0.4 s apart up to 200 s, then 0.25 s: 190 to 209.75 s in 25 + 39 intervals.
  CHECK_THAT(wide.value.value(), WithinRel(60.0 * 64.0 / 19.75, 1e-9));
}

TEST_CASE("the plateau test looks back from the placed window's end", "[response]") {
  // The rate rises from 200 to 240 /min within 100 s of the step's begin and then stays.
  const auto cycle = [](double t) { return t < 100.0 ? 0.30 - 0.05 * t / 100.0 : 0.25; };
  Heart heart;
  heart.atrium = channel_of("RA", beating(0.0, 300.0, cycle));
  heart.plan = plan_of({0.0}, 300.0);
  CHECK(heart.read({}).rows[0].status == Status::ok);
  const auto rising = heart.read({choice(0.0, 60.0, 90.0, "rate:RA")}).rows[0];
  CHECK(rising.status == Status::not_steady);
  REQUIRE(rising.value.has_value());
  CHECK_THAT(*rising.value, WithinAbs(60.0 / cycle(75.0), 0.2));
  CHECK(heart.read({choice(0.0, 250.0, 280.0, "rate:RA")}).rows[0].status == Status::ok);
}

TEST_CASE("status rules are those of any window: arrest, lost signal, no beat", "[response]") {
  Heart heart;
  heart.atrium = channel_of("RA", regular(0.0, 150.0, 0.5)); // then silence
  heart.atrium.unreadable.push_back({{Seconds(20.0), Seconds(40.0)}, "gap"});
  const auto silent = heart.read({choice(1e-7, 160.0, 190.0, "rate:RA")}).rows[1];
  CHECK(silent.status == Status::arrested);
  CHECK(silent.is_placed);
  CHECK_FALSE(silent.value.has_value());
  CHECK_THAT(silent.limit.value(), WithinRel(2.0, 1e-9)); // one beat in 30 s
  const auto lost = heart.read({choice(0.0, 15.0, 45.0, "rate:RA")}).rows[0];
  CHECK(lost.status == Status::unreadable);
  CHECK(heart.read({choice(1e-7, 110.0, 140.0, "rate:RA")}).rows[1].status == Status::ok);
}

TEST_CASE("of two steps at one concentration the window takes the one it overlaps most", "[response]") {
  Heart heart;
  heart.plan = plan_of({0.0, 1e-7, 1e-7}, 100.0);
  const auto late = heart.read({choice(1e-7, 190.0, 230.0)});
  CHECK_FALSE(late.rows[1].is_placed);
  CHECK(late.rows[2].is_placed);
  const auto early = heart.read({choice(1e-7, 170.0, 210.0)});
  CHECK(early.rows[1].is_placed);
  CHECK_FALSE(early.rows[2].is_placed);
  const auto equal = heart.read({choice(1e-7, 190.0, 210.0)});
  CHECK(equal.rows[1].is_placed);
  CHECK_FALSE(equal.rows[2].is_placed);
}

TEST_CASE("a computed concentration is met by what a person writes of it", "[response]") {
  Heart heart;
  heart.plan.curves[0].steps[1].concentration = Molar(1.0 / 30.0 * 1e-5);
  CHECK(heart.read({choice(3.3333333e-7, 120.0, 150.0)}).rows[1].is_placed);
  CHECK(heart.read({choice(3.33e-7, 120.0, 150.0)}).warnings.size() == 1);
  CHECK_FALSE(heart.read({choice(3.33e-7, 120.0, 150.0)}).rows[1].is_placed);
}

TEST_CASE("a window without effect is one warning that says why", "[response]") {
  const Heart heart;
  const auto ruled = heart.read({});
  auto other_curve = choice(1e-7, 120.0, 150.0);
  other_curve.curve = 2;
  struct Case {
    WindowChoice choice;
    std::string words;
  };
  const std::vector<Case> cases = {
      {choice(1e-7, 20.0, 50.0), "lies beside its step, which runs from 100 to 200 s"},
      {choice(1e-7, 200.0, 230.0, "rate:RA"), "lies beside its step"}, // touches, does not overlap
      {choice(1e-5, 120.0, 150.0), "meets no step of that concentration"},
      {other_curve, "meets no curve of that number"},
      {choice(1e-6, 300.0, 330.0), "lies outside the recording"},
      {choice(1e-7, 120.0, 150.0, "delay:AV"), "is of a measure that the session does not list"}};
  for (const auto& one : cases) {
    CAPTURE(one.words);
    const auto read = heart.read({one.choice});
    REQUIRE(read.warnings.size() == 1);
    CHECK(read.warnings[0].what.find(one.words) != std::string::npos);
    CHECK(read.warnings[0].what.find("for curve " + std::to_string(one.choice.curve)) != std::string::npos);
    CHECK_FALSE(read.warnings[0].remedy.empty());
    for (std::size_t i = 0; i < read.rows.size(); ++i) {
      CHECK_FALSE(read.rows[i].is_placed);
      CHECK(read.rows[i].value == ruled.rows[i].value);
      CHECK(read.rows[i].window_start == ruled.rows[i].window_start);
    }
  }
}

TEST_CASE("a step without length takes no window", "[response]") {
  Heart heart;
  heart.plan.curves[0].steps[0].end = heart.plan.curves[0].steps[0].start;
  const auto read = heart.read({choice(0.0, 0.0, 20.0)});
  CHECK(read.rows[0].status == Status::unreadable);
  CHECK_FALSE(read.rows[0].is_placed);
  CHECK(read.warnings.size() == 1);
}

TEST_CASE("the rule's own window, placed by hand, reads the same", "[response]") {
  const Heart heart;
  const auto ruled = heart.read({});
  std::vector<WindowChoice> same;
  for (const auto& row : ruled.rows)
    same.push_back(
        choice(row.concentration.value(), row.window_start.value(), row.window_end.value(), row.measure));
  const auto placed = heart.read(same);
  for (std::size_t i = 0; i < ruled.rows.size(); ++i) {
    CHECK(placed.rows[i].is_placed);
    CHECK(placed.rows[i].value == ruled.rows[i].value);
    CHECK(placed.rows[i].sem == ruled.rows[i].sem);
    CHECK(placed.rows[i].status == ruled.rows[i].status);
  }
}
