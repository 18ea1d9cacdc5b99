// Chronodrome, GPL-3.0-or-later.
// Golden cases: each log's curves and steps were written down by hand from the rules of the format page.
#include <catch2/catch.hpp>

#include "base/number_text.h"
#include "protocol/curve_plan.h"

using namespace chronodrome;
using protocol::BathConditions;
using protocol::CurvePlan;
using protocol::Event;
using protocol::EventKind;
using protocol::Protocol;

namespace {

Event event(double time, EventKind kind, const std::string& agent = "", double molar = -1.0,
            std::optional<int> curve = std::nullopt) {
  static std::size_t line = 1;
  Event made;
  made.time = Seconds(time);
  made.kind = kind;
  made.agent = agent;
  if (molar >= 0.0) made.concentration = Molar(molar);
  made.curve = curve;
  made.line = ++line;
  return made;
}

Protocol log_of(std::vector<Event> events) {
  Protocol log;
  log.file = "log.csv";
  log.events = std::move(events);
  std::size_t line = 1;
  for (auto& one : log.events)
    one.line = ++line;
  return log;
}

CurvePlan planned(const Protocol& log, double end, double delay = 0.0) {
  auto plan = protocol::plan_curves(log, BathConditions{20.0, Seconds(delay)}, Seconds(end));
  REQUIRE(plan.ok());
  return *plan;
}

/// One line a curve: `1 acetylcholine [atropine 1e-07 M] 0:0-120 1e-08:120-240`.
std::vector<std::string> lines_of(const CurvePlan& plan) {
  std::vector<std::string> lines;
  for (const auto& curve : plan.curves) {
    std::string line = std::to_string(curve.number) + " " + curve.agent + " [" + curve.background + "]";
    for (const auto& step : curve.steps) {
      line += " " + number_text(step.concentration.value()) + ":" + number_text(step.start.value()) + "-" +
              number_text(step.end.value());
    }
    lines.push_back(line);
  }
  return lines;
}

using Lines = std::vector<std::string>;

} // namespace

TEST_CASE("a cumulative series is one curve with its control before it", "[protocol]") {
  const auto plan = planned(log_of({event(120, EventKind::addition, "acetylcholine", 1e-8),
                                    event(300, EventKind::addition, "acetylcholine", 1e-7),
                                    event(480, EventKind::addition, "acetylcholine", 1e-6)}),
                            660);
  CHECK(lines_of(plan) == Lines{"1 acetylcholine [] 0:0-120 1e-08:120-300 1e-07:300-480 1e-06:480-660"});
  CHECK(plan.warnings.empty());
  CHECK(plan.curves[0].steps[1].line == 2);
}

TEST_CASE("a second agent opens a second curve in the background of the first", "[protocol]") {
  const auto plan = planned(log_of({event(100, EventKind::addition, "carbachol", 1e-7),
                                    event(200, EventKind::addition, "noradrenaline", 1e-8),
                                    event(300, EventKind::addition, "noradrenaline", 1e-7)}),
                            400);
  CHECK(lines_of(plan) == Lines{"1 carbachol [] 0:0-100 1e-07:100-200",
                                "2 noradrenaline [carbachol 1e-07 M] 0:100-200 1e-08:200-300 1e-07:300-400"});
  REQUIRE(plan.curves[1].background_agents.size() == 1);
  CHECK(plan.curves[1].background_agents[0].agent == "carbachol");
  CHECK(plan.curves[1].background_agents[0].concentration.value() == 1e-7);
}

TEST_CASE("after a washout an antagonist comes first, and the curve is repeated in its presence",
          "[protocol]") {
  const auto plan =
      planned(log_of({event(100, EventKind::addition, "acetylcholine", 1e-7),
                      event(200, EventKind::addition, "acetylcholine", 1e-6), event(300, EventKind::washout),
                      event(400, EventKind::antagonist, "atropine", 1e-7),
                      event(700, EventKind::addition, "acetylcholine", 1e-6),
                      event(800, EventKind::addition, "acetylcholine", 1e-5)}),
              900);
  CHECK(lines_of(plan) == Lines{"1 acetylcholine [] 0:0-100 1e-07:100-200 1e-06:200-300",
                                "2 acetylcholine [atropine 1e-07 M] 0:400-700 1e-06:700-800 1e-05:800-900"});
  CHECK(plan.warnings.empty());
}

TEST_CASE("washing out the agonist alone keeps the antagonist for the next curve", "[protocol]") {
  const auto plan = planned(log_of({event(50, EventKind::antagonist, "atropine", 1e-8),
                                    event(100, EventKind::addition, "acetylcholine", 1e-6),
                                    event(200, EventKind::washout, "acetylcholine"),
                                    event(300, EventKind::addition, "acetylcholine", 1e-6)}),
                            400);
  CHECK(lines_of(plan) == Lines{"1 acetylcholine [atropine 1e-08 M] 0:50-100 1e-06:100-200",
                                "2 acetylcholine [atropine 1e-08 M] 0:200-300 1e-06:300-400"});
}

TEST_CASE("washing out the antagonist alone changes the background and so opens a curve", "[protocol]") {
  const auto plan = planned(log_of({event(50, EventKind::antagonist, "atropine", 1e-8),
                                    event(100, EventKind::addition, "acetylcholine", 1e-7),
                                    event(200, EventKind::washout, "atropine"),
                                    event(300, EventKind::addition, "acetylcholine", 1e-6)}),
                            400);
  CHECK(lines_of(plan) == Lines{"1 acetylcholine [atropine 1e-08 M] 0:50-100 1e-07:100-200",
                                "2 acetylcholine [] 0:300-300 1e-06:300-400"});
  // The bath still held the agonist: the control of the second curve has no length.
  REQUIRE(plan.warnings.size() == 1);
  CHECK(plan.warnings[0].what == "curve 2 of acetylcholine has no control: the bath already held 1e-07 M");
  CHECK(plan.warnings[0].place.line == 5U);
}

TEST_CASE("a new value of the antagonist changes the background; the same value again does not",
          "[protocol]") {
  const auto log_with = [](double second) {
    return log_of({event(50, EventKind::antagonist, "atropine", 1e-8),
                   event(100, EventKind::addition, "acetylcholine", 1e-7),
                   event(200, EventKind::antagonist, "atropine", second),
                   event(300, EventKind::addition, "acetylcholine", 1e-6)});
  };
  CHECK(lines_of(planned(log_with(1e-8), 400)) ==
        Lines{"1 acetylcholine [atropine 1e-08 M] 0:50-100 1e-07:100-200 1e-06:300-400"});
  CHECK(planned(log_with(1e-7), 400).curves.size() == 2);
  CHECK(planned(log_with(1e-7), 400).curves[1].background == "atropine 1e-07 M");
  CHECK(planned(log_with(0.0), 400).curves[1].background.empty());
}

TEST_CASE("several agents of a background stand by name", "[protocol]") {
  const auto plan = planned(log_of({event(10, EventKind::antagonist, "propranolol", 3e-7),
                                    event(20, EventKind::antagonist, "Atropine", 1e-7),
                                    event(100, EventKind::addition, "noradrenaline", 1e-7)}),
                            200);
  CHECK(lines_of(plan) ==
        Lines{"1 noradrenaline [Atropine 1e-07 M + propranolol 3e-07 M] 0:20-100 1e-07:100-200"});
}

TEST_CASE("being thinned by additions is no change of the background", "[protocol]") {
  auto log = log_of({event(50, EventKind::antagonist, "atropine", 1e-7),
                     event(100, EventKind::addition, "acetylcholine"),
                     event(200, EventKind::addition, "acetylcholine")});
  for (const std::size_t i : {1U, 2U}) {
    log.events[i].stock = Molar(1e-3);
    log.events[i].volume_ml = 0.2;
  }
  const auto plan = planned(log, 300);
  REQUIRE(plan.curves.size() == 1);
  CHECK(plan.curves[0].background == "atropine 1e-07 M");
  // (0 V + S v)/(V + v), twice, by hand: 2e-4/20.2 and 4e-4/20.4.
  using Catch::Matchers::WithinRel;
  CHECK_THAT(plan.curves[0].steps[1].concentration.value(), WithinRel(2e-4 / 20.2, 1e-14));
  CHECK_THAT(plan.curves[0].steps[2].concentration.value(), WithinRel(4e-4 / 20.4, 1e-14));
}

TEST_CASE("single doses with washouts between share a curve by the column curve", "[protocol]") {
  const auto plan = planned(
      log_of({event(100, EventKind::addition, "acetylcholine", 1e-6, 1), event(160, EventKind::washout),
              event(300, EventKind::addition, "acetylcholine", 1e-7, 1), event(360, EventKind::washout),
              event(500, EventKind::addition, "noradrenaline", 1e-7)}),
      600);
  CHECK(lines_of(plan) == Lines{"1 acetylcholine [] 0:0-100 1e-06:100-160 1e-07:300-360",
                                "2 noradrenaline [] 0:360-500 1e-07:500-600"});
  CHECK(plan.warnings.empty());
}

TEST_CASE("curves count on from the largest number in use", "[protocol]") {
  const auto plan =
      planned(log_of({event(100, EventKind::addition, "a", 1e-6, 5), event(200, EventKind::washout),
                      event(300, EventKind::addition, "b", 1e-7, 2), event(400, EventKind::washout),
                      event(500, EventKind::addition, "c", 1e-7)}),
              600);
  CHECK(lines_of(plan) == Lines{"2 b [] 0:200-300 1e-07:300-400", "5 a [] 0:0-100 1e-06:100-200",
                                "6 c [] 0:400-500 1e-07:500-600"});
}

TEST_CASE("the column curve cannot give one number to two agents", "[protocol]") {
  const auto log = log_of({event(100, EventKind::addition, "acetylcholine", 1e-6, 3),
                           event(200, EventKind::addition, "noradrenaline", 1e-7, 3)});
  const auto plan = protocol::plan_curves(log, {}, Seconds(300));
  REQUIRE_FALSE(plan.ok());
  CHECK(describe(plan.error()) ==
        "log.csv:3: error: curve 3 holds acetylcholine and cannot take noradrenaline; "
        "give noradrenaline a curve number of its own");
}

TEST_CASE("a number kept over a change of background is obeyed and told", "[protocol]") {
  const auto plan = planned(log_of({event(100, EventKind::addition, "acetylcholine", 1e-7, 1),
                                    event(200, EventKind::antagonist, "atropine", 1e-8),
                                    event(300, EventKind::addition, "acetylcholine", 1e-6, 1)}),
                            400);
  CHECK(lines_of(plan) == Lines{"1 acetylcholine [] 0:0-100 1e-07:100-200 1e-06:300-400"});
  REQUIRE(plan.warnings.size() == 1);
  CHECK(plan.warnings[0].what == "curve 1 began in the background \"\" and goes on in \"atropine 1e-08 M\"");
}

TEST_CASE("vehicle and the start of pacing end a step and open none", "[protocol]") {
  const auto plan = planned(
      log_of({event(40, EventKind::vehicle), event(100, EventKind::addition, "acetylcholine", 1e-7),
              event(180, EventKind::pacing_start), event(200, EventKind::pacing_stop),
              event(250, EventKind::addition, "acetylcholine", 1e-6), event(320, EventKind::vehicle)}),
      400);
  CHECK(lines_of(plan) == Lines{"1 acetylcholine [] 0:40-100 1e-07:100-180 1e-06:250-320"});
  REQUIRE(plan.paced.size() == 1);
  CHECK(plan.paced[0].start == Seconds(180));
  CHECK(plan.paced[0].end == Seconds(200));
}

TEST_CASE("the control begins when pacing has stopped, or with the train that is still running",
          "[protocol]") {
  const auto add = event(200, EventKind::addition, "acetylcholine", 1e-7);
  const auto start = event(20, EventKind::pacing_start);
  const auto stop = event(80, EventKind::pacing_stop);
  CHECK(planned(log_of({start, stop, add}), 300).curves[0].steps[0].start == Seconds(80));
  CHECK(planned(log_of({start, add}), 300).curves[0].steps[0].start == Seconds(20));
}

TEST_CASE("a step begins when the agent arrives and ends when the next is added", "[protocol]") {
  auto log = log_of({event(50, EventKind::antagonist, "atropine", 1e-7),
                     event(300, EventKind::addition, "acetylcholine", 1e-7),
                     event(500, EventKind::addition, "acetylcholine", 1e-6)});
  log.events[2].arrival = Seconds(10);
  CHECK(lines_of(planned(log, 700, 45)) ==
        Lines{"1 acetylcholine [atropine 1e-07 M] 0:95-300 1e-07:345-500 1e-06:510-700"});
}

TEST_CASE("a step that is over before the agent arrives has no length and is told", "[protocol]") {
  const auto plan = planned(log_of({event(100, EventKind::addition, "acetylcholine", 1e-7),
                                    event(130, EventKind::addition, "acetylcholine", 1e-6)}),
                            400, 45);
  CHECK(lines_of(plan) == Lines{"1 acetylcholine [] 0:0-100 1e-07:130-130 1e-06:175-400"});
  REQUIRE(plan.warnings.size() == 1);
  CHECK(plan.warnings[0].place.line == 2U);
}

TEST_CASE("an addition at time zero has a control without length, and is told", "[protocol]") {
  const auto plan = planned(log_of({event(0, EventKind::addition, "acetylcholine", 1e-7)}), 100);
  CHECK(lines_of(plan) == Lines{"1 acetylcholine [] 0:0-0 1e-07:0-100"});
  CHECK(plan.warnings.size() == 1);
}

TEST_CASE("an addition of nothing is vehicle, so that each curve has one row at 0", "[protocol]") {
  const auto plan = planned(log_of({event(100, EventKind::addition, "acetylcholine", 0.0),
                                    event(200, EventKind::addition, "acetylcholine", 1e-7),
                                    event(300, EventKind::addition, "acetylcholine", 1e-6)}),
                            400);
  CHECK(lines_of(plan) == Lines{"1 acetylcholine [] 0:100-200 1e-07:200-300 1e-06:300-400"});
  REQUIRE(plan.warnings.size() == 1);
  CHECK(plan.warnings[0].what == "an addition of 0 M of acetylcholine is taken as vehicle");
  CHECK(plan.warnings[0].place.line == 2U);
}

TEST_CASE("an addition that leaves nothing of its agent ends the curve as a washout does", "[protocol]") {
  const auto plan = planned(log_of({event(100, EventKind::addition, "acetylcholine", 1e-7),
                                    event(200, EventKind::addition, "acetylcholine", 0.0),
                                    event(300, EventKind::addition, "acetylcholine", 1e-7)}),
                            400);
  CHECK(lines_of(plan) ==
        Lines{"1 acetylcholine [] 0:0-100 1e-07:100-200", "2 acetylcholine [] 0:200-300 1e-07:300-400"});
  REQUIRE(plan.warnings.size() >= 1);
  CHECK(plan.warnings.back().what == "an addition that leaves 0 M of acetylcholine is taken as its washout");
}

TEST_CASE("events after the end of the recording are left out and told", "[protocol]") {
  const auto plan = planned(log_of({event(100, EventKind::addition, "acetylcholine", 1e-7),
                                    event(612.5, EventKind::addition, "acetylcholine", 1e-6)}),
                            600);
  CHECK(lines_of(plan) == Lines{"1 acetylcholine [] 0:0-100 1e-07:100-600"});
  REQUIRE(plan.warnings.size() == 1);
  CHECK(plan.warnings[0].what == "addition at 612.5 s lies 12.5 s after the end of the recording");
}

TEST_CASE("an addition at the very end of the recording is left out, as is a stretch without length",
          "[protocol]") {
  const auto plan = planned(log_of({event(50, EventKind::exclude_start), event(50, EventKind::exclude_stop),
                                    event(600, EventKind::addition, "acetylcholine", 1e-7)}),
                            600);
  CHECK(plan.curves.empty());
  CHECK(plan.excluded.empty());
  CHECK(plan.warnings.size() == 1);
}

TEST_CASE("exclusions are paired, and what does not pair is told", "[protocol]") {
  const auto plan = planned(log_of({event(5, EventKind::exclude_stop), event(10, EventKind::exclude_start),
                                    event(20, EventKind::exclude_start), event(30, EventKind::exclude_stop),
                                    event(90, EventKind::exclude_start)}),
                            100);
  REQUIRE(plan.excluded.size() == 2);
  CHECK(plan.excluded[0].start == Seconds(10));
  CHECK(plan.excluded[0].end == Seconds(30));
  CHECK(plan.excluded[1].start == Seconds(90));
  CHECK(plan.excluded[1].end == Seconds(100));
  REQUIRE(plan.warnings.size() == 3);
  CHECK(plan.warnings[0].what == "exclude_stop with no exclude_start before it");
}

TEST_CASE("a log shifted in time gives the same curves shifted in time", "[protocol]") {
  // Whole numbers and a shift of a power of two: exact in binary.
  std::vector<Event> events = {event(60, EventKind::antagonist, "atropine", 1e-7),
                               event(130, EventKind::addition, "acetylcholine", 1e-7),
                               event(190, EventKind::addition, "acetylcholine", 1e-6),
                               event(260, EventKind::washout, "acetylcholine"),
                               event(300, EventKind::addition, "carbachol", 1e-6)};
  const auto plan = planned(log_of(events), 400, 8);
  for (auto& one : events)
    one.time += Seconds(4096);
  const auto later = planned(log_of(events), 4496, 8);
  REQUIRE(plan.curves.size() == 2);
  REQUIRE(later.curves.size() == 2);
  for (std::size_t c = 0; c < 2; ++c) {
    CHECK(later.curves[c].background == plan.curves[c].background);
    REQUIRE(later.curves[c].steps.size() == plan.curves[c].steps.size());
    for (std::size_t s = 0; s < plan.curves[c].steps.size(); ++s) {
      CHECK(later.curves[c].steps[s].start - plan.curves[c].steps[s].start == Seconds(4096));
      CHECK(later.curves[c].steps[s].end - plan.curves[c].steps[s].end == Seconds(4096));
    }
  }
}
