// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>
#include <memory>

#include "session/bath_course.h"
#include "session/rhythm_blocks.h"

using namespace chronodrome;
using protocol::EventKind;

namespace {

protocol::Event event(double time_s, EventKind kind, const std::string& agent = {}, double molar = -1.0) {
  protocol::Event line;
  line.time = Seconds(time_s);
  line.kind = kind;
  line.agent = agent;
  if (molar >= 0.0) line.concentration = Molar(molar);
  return line;
}

session::SessionResult logged(std::vector<protocol::Event> events, double arrival_s = 0.0) {
  session::SessionResult result;
  auto recording = std::make_shared<recording::Recording>();
  recording->duration = Seconds(1000.0);
  result.recording = recording;
  result.session.preparation.arrival_delay = Seconds(arrival_s);
  result.protocol.events = std::move(events);
  return result;
}

rhythm::Rhythm of(std::vector<rhythm::Episode> episodes) {
  return {std::move(episodes)};
}

} // namespace

TEST_CASE("a step of the bath begins when the agent arrives, and remembers when it was added",
          "[session][bath]") {
  const auto course = session::bath_course(
      logged({event(100, EventKind::addition, "acetylcholine", 1e-8),
              event(200, EventKind::addition, "acetylcholine", 1e-7),
              event(300, EventKind::addition, "acetylcholine", 1e-6), event(400, EventKind::washout)},
             12.0));
  REQUIRE(course.lanes.size() == 1);
  const auto& steps = course.lanes[0].steps;
  REQUIRE(steps.size() == 3);
  CHECK(steps[0].start == Seconds(112.0));
  CHECK(steps[0].logged == std::optional(Seconds(100.0)));
  CHECK(steps[0].end == steps[1].start);
  CHECK(steps[2].end == Seconds(412.0));
  CHECK_THAT(steps[0].height, Catch::Matchers::WithinAbs(0.0, 1e-12));
  CHECK_THAT(steps[1].height, Catch::Matchers::WithinRel(0.5, 1e-9));
  CHECK_THAT(steps[2].height, Catch::Matchers::WithinRel(1.0, 1e-12));
  CHECK(course.additions.size() == 4);
  REQUIRE(course.marks.size() == 1);
  CHECK(course.marks[0].arrival == Seconds(412.0));
  CHECK(session::agents_at(course, Seconds(111.0)).empty());
  REQUIRE(session::agents_at(course, Seconds(250.0)).size() == 1);
  CHECK(session::agents_at(course, Seconds(250.0))[0].concentration == Molar(1e-7));
  CHECK(session::agents_at(course, Seconds(500.0)).empty());
}

TEST_CASE("an antagonist has a lane of its own, below the others", "[session][bath]") {
  const auto course = session::bath_course(logged({event(50, EventKind::antagonist, "atropine", 1e-7),
                                                   event(100, EventKind::addition, "carbachol", 1e-8),
                                                   event(300, EventKind::washout, "carbachol")}));
  REQUIRE(course.lanes.size() == 2);
  CHECK(course.lanes[0].agent == "carbachol");
  CHECK(course.lanes[1].is_antagonist);
  CHECK(course.lanes[0].steps[0].end == Seconds(300.0));
  CHECK(course.lanes[1].steps.back().end == Seconds(1000.0));
  CHECK(course.lanes[1].steps[0].height == 1.0);
}

TEST_CASE("no log, no lanes", "[session][bath]") {
  const auto course = session::bath_course(logged({}));
  CHECK(course.lanes.empty());
  CHECK(course.additions.empty());
  CHECK(session::bath_course(session::SessionResult{}).lanes.empty());
}

TEST_CASE("the strip shows the weightier of two episodes at one time", "[session][rhythm]") {
  const auto rhythm = of({{Seconds(0.0), Seconds(60.0), "regular", ""},
                          {Seconds(40.0), Seconds(100.0), "first_degree_av_block", ""},
                          {Seconds(60.0), Seconds(100.0), "wenckebach", "ratio=4:3;groups=9"}});
  const auto blocks = session::rhythm_blocks(rhythm, Seconds(0.0), Seconds(100.0), 100, 5);
  REQUIRE(blocks.size() == 3);
  CHECK(blocks[0].kind == "regular");
  CHECK(blocks[0].end == 40);
  CHECK(blocks[1].kind == "first_degree_av_block");
  CHECK(blocks[2].kind == "wenckebach");
  CHECK(blocks[2].first == 60);
  CHECK(blocks[2].end == 100);
  CHECK(blocks[2].ratio == "4:3");
  CHECK(session::episode_at(rhythm, Seconds(50.0)) == 1);
  CHECK(session::episode_at(rhythm, Seconds(70.0)) == 2);
  CHECK(session::episode_at(rhythm, Seconds(100.0)) == 3);
}

TEST_CASE("periods of changing ratio are one block that names the ratio of most of its time",
          "[session][rhythm]") {
  const auto rhythm = of({{Seconds(0.0), Seconds(10.0), "wenckebach", "ratio=4:3"},
                          {Seconds(10.0), Seconds(60.0), "wenckebach", "groups=3;ratio=3:2"},
                          {Seconds(60.0), Seconds(100.0), "two_to_one", "groups=20"}});
  const auto blocks = session::rhythm_blocks(rhythm, Seconds(0.0), Seconds(100.0), 50, 5);
  REQUIRE(blocks.size() == 2);
  CHECK(blocks[0].ratio == "3:2");
  CHECK_FALSE(blocks[0].is_one_ratio);
  CHECK(blocks[0].episodes == std::vector<std::size_t>{0, 1});
  CHECK(blocks[1].ratio == "2:1");
  CHECK(blocks[1].is_one_ratio);
}

TEST_CASE("a pause far shorter than a column is still there", "[session][rhythm]") {
  const auto rhythm = of({{Seconds(0.0), Seconds(5000.0), "regular", ""},
                          {Seconds(2500.0), Seconds(2501.0), "sinus_pause", ""}});
  const auto blocks = session::rhythm_blocks(rhythm, Seconds(0.0), Seconds(5000.0), 100, 5);
  REQUIRE(blocks.size() == 3);
  CHECK(blocks[1].kind == "sinus_pause");
  CHECK(blocks[1].end - blocks[1].first == 1);
}

TEST_CASE("narrow neighbours of different kinds become one mixed block", "[session][rhythm]") {
  const auto rhythm = of({{Seconds(0.0), Seconds(100.0), "regular", ""},
                          {Seconds(40.0), Seconds(42.0), "wenckebach", "ratio=3:2"},
                          {Seconds(42.0), Seconds(44.0), "two_to_one", ""},
                          {Seconds(44.0), Seconds(46.0), "undetermined", ""}});
  const auto blocks = session::rhythm_blocks(rhythm, Seconds(0.0), Seconds(100.0), 100, 5);
  REQUIRE(blocks.size() == 3);
  CHECK(blocks[1].kind == session::kMixedRhythm);
  CHECK(blocks[1].end - blocks[1].first == 6);
  CHECK(blocks[1].episodes.size() == 3);
  // Seen from nearer they stand alone.
  CHECK(session::rhythm_blocks(rhythm, Seconds(35.0), Seconds(50.0), 150, 5).size() == 5);
}
