// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>
#include <cmath>
#include <filesystem>
#include <fstream>
#include <random>
#include <sstream>

#include "intake/protocol_reader.h"
#include "results/protocol_writer.h"

using namespace chronodrome;
using protocol::Event;
using protocol::EventKind;
using protocol::Protocol;
using results::protocol_text;
namespace fs = std::filesystem;

namespace {

const std::string kHeader = "time_s,event,agent,concentration,unit,note\n";

Event addition(double time, const std::string& agent, double molar, const std::string& unit = "") {
  Event event;
  event.time = Seconds(time);
  event.kind = EventKind::addition;
  event.agent = agent;
  event.concentration = Molar(molar);
  event.unit = unit;
  return event;
}

/// The row of one event, without the header.
std::string row_of(const Event& event) {
  const std::string text = protocol_text({"", {event}, {}});
  REQUIRE(text.substr(0, kHeader.size()) == kHeader);
  return text.substr(kHeader.size());
}

Protocol read_back(const Protocol& log) {
  auto back = intake::parse_protocol(protocol_text(log), "p.csv");
  if (!back) FAIL(describe(back.error()));
  return *back;
}

void check_same(const Protocol& log, const Protocol& back) {
  REQUIRE(back.events.size() == log.events.size());
  for (std::size_t i = 0; i < log.events.size(); ++i) {
    CAPTURE(i);
    const Event& a = log.events[i];
    const Event& b = back.events[i];
    CHECK(a.time == b.time);
    CHECK(a.kind == b.kind);
    CHECK(a.agent == b.agent);
    CHECK(a.concentration == b.concentration);
    CHECK(a.note == b.note);
    CHECK(a.stock == b.stock);
    CHECK(a.volume_ml == b.volume_ml);
    CHECK(a.arrival == b.arrival);
    CHECK(a.curve == b.curve);
  }
}

std::string content_of(const fs::path& path) {
  std::ifstream file(path);
  std::stringstream text;
  text << file.rdbuf();
  return text.str();
}

} // namespace

TEST_CASE("concentrations get the unit that a person would write", "[protocol]") {
  CHECK(row_of(addition(120, "acetylcholine", 1e-7)) == "120,addition,acetylcholine,100,nM,\n");
  CHECK(row_of(addition(120, "acetylcholine", 1e-7, "M")) == "120,addition,acetylcholine,100,nM,\n");
  CHECK(row_of(addition(0.5, "A", 3e-8)) == "0.5,addition,A,30,nM,\n");
  CHECK(row_of(addition(1, "A", 1e-6)) == "1,addition,A,1,uM,\n");
  CHECK(row_of(addition(1, "A", 1e-3)) == "1,addition,A,1,mM,\n");
  CHECK(row_of(addition(1, "A", 0.03)) == "1,addition,A,30,mM,\n");
  CHECK(row_of(addition(1, "A", 2)) == "1,addition,A,2,M,\n");
  CHECK(row_of(addition(1, "A", 2.5e-13)) == "1,addition,A,0.25,pM,\n");
  CHECK(row_of(addition(1, "A", 0)) == "1,addition,A,0,M,\n");
  // A unit that was written stays where it reads well.
  CHECK(row_of(addition(1, "A", 0.1 / 1e6, "uM")) == "1,addition,A,0.1,uM,\n");
  CHECK(row_of(addition(1, "A", 0.1 / 1e6, "\xc2\xb5M")) == "1,addition,A,0.1,\xc2\xb5M,\n");
  // 1e-7 is not the double that 0.1 uM reads to, but that of 100 nM.
  CHECK(row_of(addition(1, "A", 1e-7, "uM")) == "1,addition,A,100,nM,\n");
  CHECK(row_of(addition(1, "A", 1e-15)) == "1,addition,A,0.001,pM,\n");
  CHECK(row_of(addition(1, "A", 20'000)) == "1,addition,A,20000,M,\n");
  CHECK(row_of(addition(1, "A", 3e-6, "nM")) == "1,addition,A,3000,nM,\n");
  CHECK(row_of(addition(1, "A", 1e-11, "uM")) == "1,addition,A,10,pM,\n");
  CHECK(row_of(addition(1, "A", 1e-7, "nonsense")) == "1,addition,A,100,nM,\n");
}

TEST_CASE("every usual concentration and any double reads back to itself", "[protocol]") {
  std::size_t usual = 0;
  std::size_t prefixed = 0;
  for (int power = -12; power < 0; ++power) {
    for (int digit = 1; digit < 100; ++digit) {
      const double molar = digit / std::pow(10.0, 1 - power);
      const Protocol log{"", {addition(1, "A", molar)}, {}};
      CHECK(read_back(log).events[0].concentration->value() == molar);
      // No tail of rounding: two digits in, at most two digits and their zeros out.
      const std::string row = row_of(log.events[0]);
      CAPTURE(row);
      CHECK(row.size() <= std::string("1,addition,A,9.9e-12,M,\n").size());
      ++usual;
      if (row.find(",M,") == std::string::npos) ++prefixed;
    }
  }
  CHECK(prefixed * 10 > usual * 8);
  std::mt19937_64 random(7);
  std::uniform_real_distribution<double> exponent(-15.0, 1.0);
  std::size_t in_molar = 0;
  for (int i = 0; i < 20'000; ++i) {
    const double molar = std::pow(10.0, exponent(random));
    const Protocol log{"", {addition(std::pow(10.0, 4.0 * exponent(random) / 15.0 + 4.0), "A", molar)}, {}};
    const auto back = read_back(log);
    REQUIRE(back.events[0].concentration->value() == molar);
    REQUIRE(back.events[0].time == log.events[0].time);
    if (row_of(log.events[0]).find(",M,") != std::string::npos && molar < 1.0) ++in_molar;
  }
  // Where no number in nM is the same double, the row stands in M; that must occur, or the fallback is dead.
  CHECK(in_molar > 0);
}

TEST_CASE("a log with everything in it reads back as it was", "[protocol]") {
  Protocol log;
  Event start;
  start.kind = EventKind::note;
  start.note = "dose \"A\", then\nB; ,\t=1+1";
  log.events.push_back(start);
  auto antagonist = addition(60.125, "atropine, (\xc2\xb1)", 1e-7);
  antagonist.kind = EventKind::antagonist;
  antagonist.note = "=SUM(A1)";
  log.events.push_back(antagonist);
  Event pipetted;
  pipetted.kind = EventKind::addition;
  pipetted.time = Seconds(100.0 / 3.0 + 100.0);
  pipetted.agent = "acetyl\"choline\"";
  pipetted.stock = Molar(1e-3 / 3.0);
  pipetted.volume_ml = 0.02;
  pipetted.arrival = Seconds(4.5);
  pipetted.curve = 2;
  log.events.push_back(pipetted);
  Event vehicle;
  vehicle.kind = EventKind::vehicle;
  vehicle.time = Seconds(200.0);
  vehicle.volume_ml = 0.1;
  log.events.push_back(vehicle);
  double time = 300.0;
  for (const auto kind : {EventKind::washout, EventKind::pacing_start, EventKind::pacing_stop,
                          EventKind::exclude_start, EventKind::exclude_stop}) {
    Event event;
    event.kind = kind;
    event.time = Seconds(time += 10.0);
    log.events.push_back(event);
  }
  const std::string text = protocol_text(log);
  CHECK(text.substr(0, text.find('\n')) ==
        "time_s,event,agent,concentration,unit,note,stock_mol_per_l,volume_ml,arrival_s,curve");
  const auto back = read_back(log);
  CHECK(back.warnings.empty());
  check_same(log, back);
  CHECK(protocol_text(back) == text);
}

TEST_CASE("an optional column stands only where an event uses it", "[protocol]") {
  auto event = addition(1, "A", 1e-7);
  event.curve = 3;
  CHECK(protocol_text({"", {event, addition(2, "A", 1e-6)}, {}}) ==
        "time_s,event,agent,concentration,unit,note,curve\n"
        "1,addition,A,100,nM,,3\n"
        "2,addition,A,1,uM,,\n");
  CHECK(protocol_text({}) == kHeader);
  CHECK(intake::parse_protocol(protocol_text({}), "p.csv")->events.empty());
}

TEST_CASE("a zero byte in a text is a blank, as no reader takes it", "[protocol]") {
  auto event = addition(1, "A", 1e-7);
  event.note = std::string("a\0b", 3);
  CHECK(read_back({"", {event}, {}}).events[0].note == "a b");
}

TEST_CASE("the sample logs survive being read and written", "[protocol]") {
  for (const std::string name : {"atrial-strip", "rabbit-heart"}) {
    const auto log = intake::read_protocol(std::string(CHRONODROME_SOURCE_DIR) + "/sample-sessions/" + name +
                                           "/protocol.csv");
    REQUIRE(log.ok());
    check_same(*log, read_back(*log));
  }
}

TEST_CASE("a log is written whole or not at all, and behind a link", "[protocol]") {
  const fs::path folder = fs::path(CHRONODROME_BUILD_DIR) / "test-protocol-writer";
  fs::remove_all(folder);
  fs::create_directories(folder / "inner");
  const Protocol log{"", {addition(1, "A", 1e-7)}, {}};
  REQUIRE(results::write_protocol(log, (folder / "inner" / "protocol.csv").string()).ok());
  CHECK(content_of(folder / "inner" / "protocol.csv") == protocol_text(log));
  fs::create_symlink(fs::path("inner") / "protocol.csv", folder / "link.csv");
  const Protocol other{"", {addition(2, "B", 1e-6)}, {}};
  REQUIRE(results::write_protocol(other, (folder / "link.csv").string()).ok());
  CHECK(fs::is_symlink(folder / "link.csv"));
  CHECK(content_of(folder / "inner" / "protocol.csv") == protocol_text(other));
  CHECK(std::distance(fs::directory_iterator(folder / "inner"), {}) == 1); // no temporary file is left
  const Done failed = results::write_protocol(log, (folder / "no" / "such" / "p.csv").string());
  REQUIRE_FALSE(failed.ok());
  CHECK(failed.error().code == ErrorCode::cannot_write);
  fs::remove_all(folder);
}
