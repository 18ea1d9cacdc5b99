// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>
#include <cmath>
#include <fstream>
#include <map>
#include <sstream>

#include "base/number_text.h"
#include "protocol/bath_timeline.h"

using namespace chronodrome;
using Catch::Matchers::WithinRel;
using protocol::BathConditions;
using protocol::Event;
using protocol::EventKind;
using protocol::Protocol;

namespace {

Event event_at(double time, EventKind kind, const std::string& agent = "") {
  Event event;
  event.time = Seconds(time);
  event.kind = kind;
  event.agent = agent;
  return event;
}

Event pipetted(double time, const std::string& agent, double stock, double volume_ml) {
  Event event = event_at(time, EventKind::addition, agent);
  event.stock = Molar(stock);
  event.volume_ml = volume_ml;
  return event;
}

Event stated(double time, EventKind kind, const std::string& agent, double molar) {
  Event event = event_at(time, kind, agent);
  event.concentration = Molar(molar);
  return event;
}

BathConditions bath_of(double volume_ml, double delay_s = 0.0) {
  return {volume_ml, Seconds(delay_s)};
}

/// Columns of a reference table by name.
std::vector<std::map<std::string, double>> reference_rows(const std::string& name) {
  std::ifstream file(std::string(CHRONODROME_SOURCE_DIR) + "/tests/reference/data/" + name);
  REQUIRE(file.good());
  std::vector<std::string> names;
  std::vector<std::map<std::string, double>> rows;
  for (std::string line; std::getline(file, line);) {
    std::istringstream cells(line);
    std::size_t i = 0;
    if (!names.empty()) rows.emplace_back();
    for (std::string cell; std::getline(cells, cell, ','); ++i) {
      if (rows.empty() && (names.size() == i)) {
        names.push_back(cell);
      } else {
        rows.back()[names.at(i)] = parse_number(cell).value();
      }
    }
  }
  return rows;
}

} // namespace

TEST_CASE("pipetted volumes of a cumulative series give the concentrations they were computed for",
          "[protocol]") {
  // Reference: dosing_cumulative.csv, 20 mL bath, growing; v = V (c2 - c1)/(S - c2). Printed to 12 digits:
  // relative 1e-10 leaves room for the sum of nine such roundings.
  const auto rows = reference_rows("dosing_cumulative.csv");
  REQUIRE(rows.size() == 9);
  Protocol log;
  double time = 0.0;
  for (const auto& row : rows) {
    time += 60.0;
    log.events.push_back(
        pipetted(time, "acetylcholine", row.at("stock_M"), row.at("add_uL_growing_bath") * 1e-3));
  }
  const auto bath = protocol::follow_bath(log, bath_of(20.0));
  REQUIRE(bath.ok());
  for (std::size_t i = 0; i < rows.size(); ++i) {
    INFO(i);
    CHECK_THAT(bath->events()[i].concentration->value(), WithinRel(rows[i].at("target_M"), 1e-10));
  }
}

TEST_CASE("volumes computed without regard to the bath's growth reach less than was meant", "[protocol]") {
  // Reference: column actual_M_if_naive of the same table.
  const auto rows = reference_rows("dosing_cumulative.csv");
  Protocol log;
  double time = 0.0;
  for (const auto& row : rows) {
    time += 60.0;
    log.events.push_back(
        pipetted(time, "acetylcholine", row.at("stock_M"), row.at("add_uL_naive_V0_dc_over_S") * 1e-3));
  }
  const auto bath = protocol::follow_bath(log, bath_of(20.0));
  REQUIRE(bath.ok());
  for (std::size_t i = 0; i < rows.size(); ++i) {
    INFO(i);
    CHECK_THAT(bath->events()[i].concentration->value(), WithinRel(rows[i].at("actual_M_if_naive"), 1e-10));
  }
}

TEST_CASE("an antagonist present from the start is thinned by every addition", "[protocol]") {
  // Reference: closed form V0/V_end with the table's last bath volume; 1e-7 M ends at 9.88251206e-8 M.
  const auto rows = reference_rows("dosing_cumulative.csv");
  Protocol log;
  log.events.push_back(stated(10, EventKind::antagonist, "atropine", 1e-7));
  double time = 0.0;
  for (const auto& row : rows) {
    time += 60.0;
    log.events.push_back(
        pipetted(time, "acetylcholine", row.at("stock_M"), row.at("add_uL_growing_bath") * 1e-3));
  }
  const auto bath = protocol::follow_bath(log, bath_of(20.0));
  REQUIRE(bath.ok());
  const Molar end = bath->concentration_at("atropine", Seconds(time));
  CHECK_THAT(end.value(), WithinRel(9.88251206e-8, 1e-8)); // the reference has nine digits
  CHECK_THAT(std::log10(end.value() / 1e-7), WithinRel(-0.00513, 1e-3));
  CHECK(bath->concentration_at("Atropine ", Seconds(59)).value() == 1e-7);
  const auto present = bath->present_at(Seconds(time));
  REQUIRE(present.size() == 2);
  CHECK(present[0].agent == "atropine");
  CHECK_THAT(present[1].concentration.value(), WithinRel(1e-5, 1e-10));
}

TEST_CASE("without a bath volume, or without pipetted volumes, nothing is thinned", "[protocol]") {
  Protocol log;
  log.events.push_back(stated(10, EventKind::antagonist, "atropine", 1e-7));
  Event addition = stated(20, EventKind::addition, "acetylcholine", 1e-6);
  log.events.push_back(addition);
  CHECK(protocol::follow_bath(log, bath_of(20.0))->concentration_at("atropine", Seconds(30)).value() == 1e-7);
  log.events[1].volume_ml = 1.0;
  CHECK(protocol::follow_bath(log, {})->concentration_at("atropine", Seconds(30)).value() == 1e-7);
  CHECK_THAT(protocol::follow_bath(log, bath_of(20.0))->concentration_at("atropine", Seconds(30)).value(),
             WithinRel(1e-7 * 20.0 / 21.0, 1e-14));
}

TEST_CASE("a vehicle's volume thins what is in the bath", "[protocol]") {
  Protocol log;
  log.events.push_back(stated(10, EventKind::addition, "acetylcholine", 1e-6));
  log.events.push_back(event_at(20, EventKind::vehicle));
  log.events[1].volume_ml = 5.0;
  const auto bath = protocol::follow_bath(log, bath_of(20.0));
  REQUIRE(bath.ok());
  CHECK_THAT(bath->concentration_at("acetylcholine", Seconds(20)).value(), WithinRel(0.8e-6, 1e-14));
  CHECK(bath->changes().back().by_dilution);
}

TEST_CASE("the vehicle of an agent, named after it, is no agent", "[protocol]") {
  Protocol log;
  log.events.push_back(stated(10, EventKind::addition, "acetylcholine", 1e-6));
  log.events.push_back(event_at(20, EventKind::vehicle, "acetylcholine"));
  log.events[1].volume_ml = 20.0;
  const auto bath = protocol::follow_bath(log, bath_of(20.0));
  REQUIRE(bath.ok());
  CHECK(bath->concentration_at("acetylcholine", Seconds(20)).value() == 0.5e-6);
}

TEST_CASE("changes stand in order of arrival, whatever the order of the log", "[protocol]") {
  Protocol log;
  log.events.push_back(stated(10, EventKind::antagonist, "atropine", 1e-7));
  log.events.push_back(stated(20, EventKind::addition, "acetylcholine", 1e-6));
  log.events[0].arrival = Seconds(100);
  const auto bath = protocol::follow_bath(log, {});
  REQUIRE(bath->changes().size() == 2);
  CHECK(bath->changes()[0].agent == "acetylcholine");
  CHECK(bath->changes()[1].time == Seconds(110));
  CHECK(bath->concentration_at("acetylcholine", Seconds(50)).value() == 1e-6);
  CHECK(bath->present_at(Seconds(50)).size() == 1);
}

TEST_CASE("agents reach the tissue after the arrival delay, or when the row says", "[protocol]") {
  Protocol log;
  log.events.push_back(stated(100, EventKind::addition, "acetylcholine", 1e-7));
  log.events.push_back(stated(200, EventKind::addition, "acetylcholine", 1e-6));
  log.events[1].arrival = Seconds(5);
  const auto bath = protocol::follow_bath(log, bath_of(20.0, 45.0));
  REQUIRE(bath.ok());
  const auto at = [&](double time) { return bath->concentration_at("acetylcholine", Seconds(time)).value(); };
  CHECK(at(144.9) == 0.0);
  CHECK(at(145.0) == 1e-7);
  CHECK(at(204.9) == 1e-7);
  CHECK(at(205.0) == 1e-6);
}

TEST_CASE("a washout empties and refills the bath; one agent's washout leaves the others as they were set",
          "[protocol]") {
  Protocol log;
  log.events.push_back(stated(10, EventKind::antagonist, "atropine", 1e-7));
  log.events.push_back(pipetted(20, "acetylcholine", 1e-3, 2.0));
  log.events.push_back(event_at(30, EventKind::washout, "acetylcholine"));
  log.events.push_back(pipetted(40, "acetylcholine", 1e-3, 2.0));
  log.events.push_back(event_at(50, EventKind::washout));
  log.events.push_back(pipetted(60, "acetylcholine", 1e-3, 2.0));
  const auto bath = protocol::follow_bath(log, bath_of(20.0));
  REQUIRE(bath.ok());
  const double each = 1e-3 * 2.0 / 22.0; // of a bath that starts at its first volume each time
  const auto level = [&](const std::string& agent, double time) {
    return bath->concentration_at(agent, Seconds(time)).value();
  };
  CHECK_THAT(level("acetylcholine", 20), WithinRel(each, 1e-14));
  CHECK_THAT(level("atropine", 20), WithinRel(1e-7 * 20.0 / 22.0, 1e-14));
  CHECK(level("acetylcholine", 30) == 0.0);
  CHECK(level("atropine", 30) == 1e-7);
  CHECK_THAT(level("acetylcholine", 40), WithinRel(each, 1e-14));
  CHECK(level("atropine", 50) == 0.0);
  CHECK_THAT(level("acetylcholine", 60), WithinRel(each, 1e-14));
}

TEST_CASE("a concentration that cannot be computed is an error at its line", "[protocol]") {
  Protocol log;
  log.file = "log.csv";
  log.events.push_back(pipetted(20, "acetylcholine", 1e-3, 2.0));
  log.events[0].line = 7;
  const auto bath = protocol::follow_bath(log, {});
  REQUIRE_FALSE(bath.ok());
  CHECK(
      describe(bath.error()) ==
      "log.csv:7: error: the concentration of acetylcholine is to be computed from stock and volume, but the "
      "bath's volume is not known; set preparation.bath_volume_ml in the session, or state the "
      "concentration");
}

TEST_CASE("more added than the bath holds is an error", "[protocol]") {
  Protocol log;
  log.file = "log.csv";
  log.events.push_back(pipetted(20, "acetylcholine", 1e-3, 20.1));
  const auto bath = protocol::follow_bath(log, bath_of(20.0));
  REQUIRE_FALSE(bath.ok());
  CHECK(bath.error().what == "20.1 mL are added to a bath that holds 20 mL");
  log.events[0].volume_ml = 20.0;
  CHECK(protocol::follow_bath(log, bath_of(20.0)).ok());
}

TEST_CASE("a stated concentration stands, and one that pipetting contradicts is doubted", "[protocol]") {
  Protocol log;
  log.events.push_back(pipetted(20, "acetylcholine", 1e-3, 0.02));
  log.events[0].concentration = Molar(1e-6); // pipetted: 0.999e-6
  auto bath = protocol::follow_bath(log, bath_of(20.0));
  REQUIRE(bath.ok());
  CHECK(bath->warnings().empty());
  CHECK(bath->concentration_at("acetylcholine", Seconds(20)).value() == 1e-6);
  log.events[0].concentration = Molar(1e-5);
  bath = protocol::follow_bath(log, bath_of(20.0));
  REQUIRE(bath->warnings().size() == 1);
  CHECK(bath->warnings()[0].what ==
        "stated is 1e-05 M of acetylcholine, but what was pipetted makes 9.99e-07 M");
  CHECK(bath->concentration_at("acetylcholine", Seconds(20)).value() == 1e-5);
}

TEST_CASE("spellings of an agent are merged with notice, once", "[protocol]") {
  Protocol log;
  for (const char* name : {"Acetylcholine", "acetylcholine", "acetylcholine", "ACETYLCHOLINE"})
    log.events.push_back(stated(10, EventKind::addition, name, 1e-6));
  const auto bath = protocol::follow_bath(log, {});
  CHECK(bath->agents() == std::vector<std::string>{"Acetylcholine"});
  CHECK(bath->warnings().size() == 2);
}

TEST_CASE("a washout of an agent that is not there is doubted", "[protocol]") {
  Protocol log;
  log.events.push_back(stated(10, EventKind::addition, "acetylcholine", 1e-6));
  log.events.push_back(event_at(20, EventKind::washout, "atropine"));
  const auto bath = protocol::follow_bath(log, {});
  REQUIRE(bath->warnings().size() == 1);
  CHECK(bath->warnings()[0].what == "washout of atropine, which is not in the bath");
  CHECK(bath->concentration_at("acetylcholine", Seconds(20)).value() == 1e-6);
}
