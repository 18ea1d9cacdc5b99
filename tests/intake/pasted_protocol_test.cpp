// Chronodrome, GPL-3.0-or-later.
// A drug log as it comes out of a spreadsheet.
#include <catch2/catch.hpp>
#include <random>

#include "intake/protocol_reader.h"

using namespace chronodrome;
using intake::protocol_from_text;
using protocol::EventKind;

namespace {

std::string fault_of(const std::string& text) {
  const auto log = protocol_from_text(text, "pasted text");
  return log.ok() ? "accepted" : describe(log.error());
}

protocol::Protocol pasted(const std::string& text) {
  auto log = protocol_from_text(text, "pasted text");
  if (!log) FAIL(describe(log.error()));
  return *log;
}

} // namespace

TEST_CASE("rows without a header are time, event, agent, concentration, unit, note", "[protocol]") {
  for (const std::string end : {"\n", "\r\n"}) {
    const auto log = pasted("60\taddition\tacetylcholine\t10\tnM\tfirst; gentle, slow" + end +
                            "240.5\taddition\tacetylcholine\t0.1\tuM\t" + end + "400\twashout" + end);
    CHECK(log.file == "pasted text");
    CHECK(log.warnings.empty());
    REQUIRE(log.events.size() == 3);
    CHECK(log.events[0].time == Seconds(60.0));
    CHECK(log.events[0].kind == EventKind::addition);
    CHECK(log.events[0].agent == "acetylcholine");
    CHECK(log.events[0].concentration == Molar(1e-8));
    CHECK(log.events[0].note == "first; gentle, slow");
    CHECK(log.events[0].line == 1);
    CHECK(log.events[1].time == Seconds(240.5));
    CHECK(log.events[2].kind == EventKind::washout);
    CHECK(log.events[2].line == 3);
  }
}

TEST_CASE("a decimal comma is read between tabs and semicolons", "[protocol]") {
  for (const std::string d : {"\t", ";"}) {
    const auto log =
        pasted("60,5" + d + "addition" + d + "A" + d + "0,1" + d + "uM\n" + //
               "120,250" + d + "addition" + d + "A" + d + "1,5e-6" + d + "M\n" + "180" + d + "washout\n");
    REQUIRE(log.events.size() == 3);
    CHECK(log.events[0].time == Seconds(60.5));
    CHECK(log.events[0].concentration == Molar(0.1 / 1e6));
    CHECK(log.events[1].time == Seconds(120.25)); // the other commas say what this one is
    CHECK(log.events[1].concentration == Molar(1.5e-6));
    CHECK(log.events[2].time == Seconds(180.0));
  }
  // One delimiter against one decimal comma.
  CHECK(pasted("0,5;washout").events[0].time == Seconds(0.5));
  CHECK(pasted("0,5\twashout").events[0].time == Seconds(0.5));
}

TEST_CASE("a header is taken where there is one, with every column and in any order", "[protocol]") {
  const auto log = pasted("Event;Time_s;stock_mol_per_l;volume_ml;agent;arrival_s;curve\n"
                          "addition;60,5;0,001;0,02;A;4,5;2\n");
  REQUIRE(log.events.size() == 1);
  CHECK(log.events[0].time == Seconds(60.5));
  CHECK(log.events[0].stock == Molar(1e-3));
  CHECK(log.events[0].volume_ml == 0.02);
  CHECK(log.events[0].arrival == Seconds(4.5));
  CHECK(log.events[0].curve == 2);
  CHECK(fault_of("event\tagent\nwashout\tA\n") ==
        "pasted text:1:1: error: the first row names no column time_s; begin the file with the names time_s, "
        "event, "
        "agent, concentration, unit, note, stock_mol_per_l, volume_ml, arrival_s, curve");
}

TEST_CASE("between commas a log is pasted as it stands in its file", "[protocol]") {
  const std::string text = "time_s,event,agent,concentration,unit,note\n"
                           "60,addition,A,100,nM,\"one; \"\"two\"\"\"\n120,washout,,,,\n";
  const auto log = pasted(text);
  const auto file = intake::parse_protocol(text, "p.csv");
  REQUIRE(log.events.size() == file->events.size());
  CHECK(log.events[0].note == file->events[0].note);
  CHECK(log.events[0].concentration == file->events[0].concentration);
  CHECK(pasted("60,addition,A,100,nM,first; gentle\n").events[0].note == "first; gentle");
}

TEST_CASE("a comma that may mean two things is refused, not guessed", "[protocol]") {
  // 1,250 s is 1.25 s here and 1250 s there.
  CHECK(fault_of("1,250\taddition\tA\t10\tnM\n") == "pasted text:1:1: error: time_s is \"1,250\", whose "
                                                    "comma may stand before decimals or thousands; write the "
                                                    "number with a point, or without the comma");
  const auto log = protocol_from_text("1,250;washout", "x");
  REQUIRE_FALSE(log.ok());
  CHECK(log.error().code == ErrorCode::ambiguous);
  // Another number with a point says that commas are none.
  CHECK(fault_of("60.5\twashout\n1,250\twashout\n")
            .find("pasted text:2:1: error: time_s is \"1,250\", not a number") == 0);
  CHECK(fault_of("60.5\twashout\n61,5\twashout\n").find("other numbers have a decimal comma") !=
        std::string::npos);
  CHECK(pasted("0,250\twashout\n").events[0].time == Seconds(0.25)); // no group of thousands begins with 0
  CHECK(pasted("1250,0\twashout\n").events[0].time == Seconds(1250.0));
}

TEST_CASE("what cannot be read is one line with its place", "[protocol]") {
  CHECK(fault_of("").find("pasted text:1:1: error: there is no text") == 0);
  CHECK(fault_of(" \n\t\n").find("pasted text:1:1: error: there is no text") == 0);
  CHECK(fault_of("60\tadd\tA\t10\tnM\n").find("pasted text:1:4: error: event is \"add\"") == 0);
  CHECK(fault_of("60\taddition\tA\t10\tnM\nx\twashout\n").find("pasted text:2:1: error: time_s is \"x\"") ==
        0);
  CHECK(fault_of("60\taddition\tA\t10\tnM\tnote\tmore\n").find("cell 7 of a table of 6 columns") !=
        std::string::npos);
  CHECK(fault_of("60\taddition\tA\t10\tmg\n").find("unit is \"mg\"") != std::string::npos);
  CHECK(fault_of("some words").find("pasted text:1:1: error: time_s is \"some words\"") == 0);
  CHECK(fault_of("60\twashout\t\xff\n").find("UTF-8") != std::string::npos);
  CHECK(fault_of("60\tnote\t\t\t\t\"open\n").find("never closed") != std::string::npos);
}

TEST_CASE("no bytes upset the reader of pasted text", "[protocol]") {
  std::mt19937 random(11);
  const std::string letters = "09,.;\t\n\r\"eE-+addition washout\xc2\xb5M";
  std::size_t read = 0;
  for (int i = 0; i < 20'000; ++i) {
    std::string text = i % 2 == 0 ? "" : "1\tnote\t";
    for (auto n = random() % 40; n > 0; --n)
      text += letters[random() % letters.size()];
    const auto log = protocol_from_text(text, "x");
    if (log.ok()) ++read;
    if (!log.ok()) CHECK_FALSE(log.error().what.empty());
  }
  CHECK(read > 100);
}
