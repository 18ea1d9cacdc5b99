// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include "protocol/concentration.h"
#include "protocol/ladder.h"
#include "protocol/protocol.h"

using namespace chronodrome;
using protocol::Event;
using protocol::EventKind;
using protocol::LadderPart;

namespace {

Event addition(double time, const std::string& agent, double molar, std::size_t line) {
  Event event;
  event.time = Seconds(time);
  event.kind = EventKind::addition;
  event.agent = agent;
  event.concentration = Molar(molar);
  event.line = line;
  return event;
}

} // namespace

TEST_CASE("every event reads back from its word, and the words stand in the format's order", "[protocol]") {
  CHECK(protocol::event_names() == "addition, vehicle, antagonist, washout, pacing_start, pacing_stop, "
                                   "exclude_start, exclude_stop, note");
  for (const auto kind : {EventKind::addition, EventKind::vehicle, EventKind::antagonist, EventKind::washout,
                          EventKind::pacing_start, EventKind::pacing_stop, EventKind::exclude_start,
                          EventKind::exclude_stop, EventKind::note}) {
    CHECK(protocol::event_named(protocol::name_of(kind)) == kind);
  }
  CHECK_FALSE(protocol::event_named("Addition").has_value());
}

TEST_CASE("spellings that differ in case and blanks are one agent", "[protocol]") {
  CHECK(protocol::agent_key("  Acetyl  Choline\t") == "acetyl choline");
  CHECK(protocol::agent_key("acetylcholine") == protocol::agent_key("ACETYLCHOLINE "));
  CHECK(protocol::agent_key("\xce\xb1-methyl") == "\xce\xb1-methyl"); // beyond ASCII as it stands
  CHECK(protocol::agent_key("").empty());
  CHECK(protocol::agent_key(" \t ").empty());
}

TEST_CASE("the same concentration in every unit is the same number", "[protocol]") {
  // Exact: each is one correctly rounded division of a whole number by a power of ten.
  CHECK(protocol::concentration_in(100, "nM")->value() == 1e-7);
  CHECK(protocol::concentration_in(3, "uM")->value() == 3e-6);
  CHECK(protocol::concentration_in(3, "\xc2\xb5M")->value() == 3e-6);
  CHECK(protocol::concentration_in(3, "\xce\xbcM")->value() == 3e-6);
  CHECK(protocol::concentration_in(500, "pM")->value() == 5e-10);
  CHECK(protocol::concentration_in(2, "mM")->value() == 2e-3);
  CHECK(protocol::concentration_in(1e-7, "M")->value() == 1e-7);
  for (const std::string bad : {"", "m", "um", "MM", "NM", "mol/L", "nM ", "g/L", "\xb5M"}) {
    INFO(bad);
    CHECK_FALSE(protocol::concentration_in(1, bad).has_value());
  }
}

TEST_CASE("a step of a thousand between neighbours is doubted at its line", "[protocol]") {
  const std::vector<Event> events = {addition(60, "carbachol", 1e-9, 2), addition(120, "carbachol", 1e-6, 3),
                                     addition(180, "carbachol", 3e-6, 4)};
  const auto doubts = protocol::ladder_warnings(events, events, LadderPart::stated, "log.csv");
  REQUIRE(doubts.size() == 1);
  CHECK(describe(doubts[0]) ==
        "log.csv:3: warning: carbachol goes from 1e-09 M to 1e-06 M, a factor of 1000; "
        "check the unit of both rows");
  const std::vector<Event> fine = {addition(60, "carbachol", 1e-9, 2), addition(120, "carbachol", 9.9e-7, 3)};
  CHECK(protocol::ladder_warnings(fine, fine, LadderPart::stated, "").empty());
}

TEST_CASE("a fall of concentration is doubted unless a washout stands between", "[protocol]") {
  std::vector<Event> events = {addition(60, "carbachol", 1e-6, 2), addition(180, "carbachol", 3e-7, 4)};
  CHECK(protocol::ladder_warnings(events, events, LadderPart::stated, "").size() == 1);
  Event washout;
  washout.time = Seconds(120);
  washout.kind = EventKind::washout;
  events.insert(events.begin() + 1, washout);
  CHECK(protocol::ladder_warnings(events, events, LadderPart::stated, "").empty());
  events[1].agent = "Carbachol"; // only that agent: the same
  CHECK(protocol::ladder_warnings(events, events, LadderPart::stated, "").empty());
  events[1].agent = "atropine"; // another agent: the series goes on
  CHECK(protocol::ladder_warnings(events, events, LadderPart::stated, "").size() == 1);
}

TEST_CASE("two agents and two curve numbers are two series", "[protocol]") {
  std::vector<Event> events = {addition(60, "carbachol", 1e-6, 2), addition(120, "noradrenaline", 1e-9, 3)};
  CHECK(protocol::ladder_warnings(events, events, LadderPart::stated, "").empty());
  events[1].agent = "carbachol";
  events[1].curve = 2;
  CHECK(protocol::ladder_warnings(events, events, LadderPart::stated, "").empty());
}

TEST_CASE("more than one mole per litre is doubted", "[protocol]") {
  const std::vector<Event> events = {addition(60, "carbachol", 7.0, 2)};
  const auto doubts = protocol::ladder_warnings(events, events, LadderPart::stated, "log.csv");
  REQUIRE(doubts.size() == 1);
  CHECK(doubts[0].what == "a bath concentration of 7 mol/L is hardly meant");
}
