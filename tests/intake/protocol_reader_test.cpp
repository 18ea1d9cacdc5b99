// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>
#include <filesystem>
#include <fstream>
#include <iterator>

#include "intake/protocol_reader.h"
#include "intake/protocol_table.h"

using namespace chronodrome;
using intake::parse_protocol;
using protocol::EventKind;

namespace {

const std::string kHeader = "time_s,event,agent,concentration,unit,note\n";

std::string fault_of(const std::string& text) {
  const auto log = parse_protocol(text, "p.csv");
  return log.ok() ? "accepted" : describe(log.error());
}

} // namespace

TEST_CASE("a drug log reads in its own order of columns, with every column", "[protocol]") {
  const auto log =
      parse_protocol("event,curve,time_s,unit,agent,concentration,note,arrival_s,volume_ml,stock_mol_per_l\n"
                     "antagonist,,60,nM,atropine,100,for the rest,,,\n"
                     "addition,2,300.5,,acetylcholine,,,4.5,0.02,1e-3\n"
                     "vehicle,,400,,saline,,,,0.1,\n"
                     "washout,,500,,,,,,,\n",
                     "p.csv");
  REQUIRE(log.ok());
  CHECK(log->warnings.empty());
  CHECK(log->file == "p.csv");
  REQUIRE(log->events.size() == 4);
  const auto& antagonist = log->events[0];
  CHECK(antagonist.kind == EventKind::antagonist);
  CHECK(antagonist.time == Seconds(60));
  CHECK(antagonist.agent == "atropine");
  CHECK(antagonist.concentration == Molar(1e-7));
  CHECK(antagonist.unit == "nM");
  CHECK(antagonist.note == "for the rest");
  CHECK(antagonist.line == 2);
  const auto& addition = log->events[1];
  CHECK_FALSE(addition.concentration.has_value()); // computed when the bath's volume is known
  CHECK(addition.stock == Molar(1e-3));
  CHECK(addition.volume_ml == 0.02);
  CHECK(addition.arrival == Seconds(4.5));
  CHECK(addition.curve == 2);
  CHECK(log->events[2].volume_ml == 0.1);
  CHECK(log->events[3].agent.empty());
}

TEST_CASE("every unit of concentration reads, with either micro sign", "[protocol]") {
  const auto log =
      parse_protocol(kHeader + "1,addition,A,1,pM,\n2,addition,A,1,nM,\n3,addition,A,1,uM,\n"
                               "4,addition,A,2,\xc2\xb5M,\n5,addition,A,3,\xce\xbcM,\n6,addition,A,1,mM,\n"
                               "7,addition,A,0.1,M,\n",
                     "p.csv");
  REQUIRE(log.ok());
  const std::vector<double> expected = {1e-12, 1e-9, 1e-6, 2e-6, 3e-6, 1e-3, 0.1};
  for (std::size_t i = 0; i < expected.size(); ++i)
    CHECK(log->events[i].concentration->value() == expected[i]);
}

TEST_CASE("byte order mark, CR LF, CR alone, quotes, blanks and empty rows are taken as they are meant",
          "[protocol]") {
  const std::string expected = "a \"mild\" dose, first\nof two";
  for (const std::string end : {"\n", "\r\n", "\r"}) {
    const auto log =
        parse_protocol("\xef\xbb\xbftime_s,event,agent,concentration,unit,note" + end + end +
                           " 60 , \"addition\" ,acetylcholine,1e-7,M,\"a \"\"mild\"\" dose, first\n"
                           "of two\"" +
                           end + ",,,,," + end + "90,washout" + end + "95,note,,,,done",
                       "p.csv");
    REQUIRE(log.ok());
    REQUIRE(log->events.size() == 3);
    CHECK(log->events[0].note == expected);
    CHECK(log->events[0].line == 3);
    CHECK(log->events[1].kind == EventKind::washout); // a short row: its other cells are empty
    CHECK(log->events[1].line == 6);                  // the quoted line end counts
    CHECK(log->events[2].note == "done");
  }
}

TEST_CASE("semicolons and tabs divide cells where the first row has them", "[protocol]") {
  CHECK(parse_protocol("time_s;event;note\n5;note;one, two\n", "p")->events[0].note == "one, two");
  // A row's commas do not count, nor does what is quoted, nor an empty row before.
  CHECK(fault_of("\r\ntime_s;event\n60,5;note\n").find("p.csv:3:1: error: time_s is \"60,5\"") == 0);
  CHECK(parse_protocol("time_s,event,\"a;b;c;\nd;\"\n5,note,\n", "p")->events.size() == 1);
  CHECK(parse_protocol("time_s\tevent\tnote\n5\tnote\tone; two\n", "p")->events[0].note == "one; two");
}

TEST_CASE("faults are named with line, column and what may stand there", "[protocol]") {
  CHECK(fault_of(kHeader + "60,additon,ACh,1e-7,M,\n") ==
        "p.csv:2:4: error: event is \"additon\"; use one of addition, vehicle, antagonist, washout, "
        "pacing_start, "
        "pacing_stop, exclude_start, exclude_stop, note");
  CHECK(fault_of(kHeader + "60,,ACh,1e-7,M,\n").find("p.csv:2:4: error: event is empty; use one of") == 0);
  CHECK(fault_of(kHeader + "60,addition,ACh,1e-7,mol,\n") ==
        "p.csv:2:22: error: unit is \"mol\"; use one of M, mM, uM (or \xc2\xb5M), nM, pM");
  CHECK(fault_of(kHeader + "60,addition,ACh,1e-7,,\n") ==
        "p.csv:2:22: error: a concentration stands without a unit; use one of M, mM, uM (or \xc2\xb5M), nM, "
        "pM");
  CHECK(fault_of(kHeader + "60,note,,,,\n90,addition,ACh,-7,M,\n") ==
        "p.csv:3:17: error: concentration is \"-7\", which is negative; write the concentration itself, for "
        "example "
        "1e-7, not its logarithm");
  CHECK(fault_of(kHeader + "60,addition,ACh,,M,\n") == "p.csv:2:17: error: addition without a concentration; "
                                                       "fill in concentration and unit, or stock_mol_per_l "
                                                       "and volume_ml");
  CHECK(fault_of(kHeader + "60,antagonist,,1e-7,M,\n") ==
        "p.csv:2:15: error: antagonist without an agent; name the agent");
  CHECK(fault_of(kHeader + "1:30,note,,,,\n") ==
        "p.csv:2:1: error: time_s is \"1:30\", not a number; write the number alone, with a decimal point");
  CHECK(fault_of(kHeader + ",note,,,,\n") == "p.csv:2:1: error: time_s is empty; fill it in");
  CHECK(
      fault_of("time_s;event;agent;concentration;unit\n60,5;note;;;\n") ==
      "p.csv:2:1: error: time_s is \"60,5\", not a number; write a point, not a comma, before the decimals");
  CHECK(fault_of("time_s,event,curve\n60,note,1.5\n") ==
        "p.csv:2:9: error: curve is \"1.5\"; use a whole number from 1 to 10000");
  CHECK(fault_of("time_s,event,arrival_s\n60,note,-1\n") ==
        "p.csv:2:9: error: arrival_s is \"-1\"; write 0 or more");
  CHECK(fault_of("time_s,event,volume_ml\n60,vehicle,0\n") ==
        "p.csv:2:12: error: volume_ml is \"0\"; write a number above 0");
  CHECK(fault_of("time_s,event,agent,stock_mol_per_l,volume_ml\n60,addition,ACh,1e-3,\n") ==
        "p.csv:2:17: error: stock_mol_per_l stands without volume_ml; fill in volume_ml, or empty both");
  CHECK(fault_of(kHeader + "60,note,,,,one, two\n") ==
        "p.csv:2:17: error: cell 7 of a table of 6 columns; put quotes around a text that holds a delimiter, "
        "and a "
        "point before decimals");
}

TEST_CASE("a table that is no drug log is refused at its first row", "[protocol]") {
  CHECK(
      fault_of("time,RA,RV\n0,1,2\n").find("p.csv:1:1: error: the first row names no column time_s; begin") ==
      0);
  CHECK(fault_of("time_s,RA\n0,1\n").find("names no column event") != std::string::npos);
  CHECK(fault_of("").find("p.csv:1:1: error: the file is empty") == 0);
  CHECK(fault_of("time_s,event,time_s\n") ==
        "p.csv:1:14: error: the column time_s stands twice; keep one of the two");
}

TEST_CASE("quotes that do not pair, bytes that are not UTF-8 and zero bytes are refused where they stand",
          "[protocol]") {
  CHECK(fault_of(kHeader + "60,note,,,,\"open\n70,note,,,,\n") ==
        "p.csv:2:12: error: the quote that opens here is never closed; close it, or take it out");
  CHECK(fault_of(kHeader + "60,note,,,,\"a\" b\n") ==
        "p.csv:2:16: error: text follows a closing quote; double every quote inside a quoted cell");
  const auto latin = parse_protocol(kHeader + "60,addition,ACh,1,\xb5M,\n", "p.csv");
  REQUIRE_FALSE(latin.ok());
  CHECK(latin.error().code == ErrorCode::wrong_format);
  CHECK(latin.error().place.line == 2U);
  CHECK(latin.error().place.column == 19U);
  CHECK(parse_protocol(kHeader + std::string("6\0,note", 7), "p.csv").error().code ==
        ErrorCode::wrong_format);
}

TEST_CASE("unknown columns are told and have no effect", "[protocol]") {
  const auto log = parse_protocol("time_s,event,mood\n5,note,good\n", "p.csv");
  REQUIRE(log.ok());
  REQUIRE(log->warnings.size() == 1);
  CHECK(log->warnings[0].what == "the column \"mood\" is not known");
  CHECK(log->warnings[0].place.column == 14U);
}

TEST_CASE("rows out of time are put in order with notice, ties keep the file's order", "[protocol]") {
  const auto log =
      parse_protocol(kHeader + "60,note,,,,a\n90,note,,,,b\n30,note,,,,c\n60,note,,,,d\n", "p.csv");
  REQUIRE(log.ok());
  std::string order;
  for (const auto& event : log->events)
    order += event.note;
  CHECK(order == "cadb");
  REQUIRE(log->warnings.size() == 1);
  CHECK(describe(log->warnings[0]) ==
        "p.csv:4: warning: the times are not in order: 30 s follows 90 s; the rows are "
        "put in order; check the times");
}

TEST_CASE("two bath events at one time are told, two notes are not", "[protocol]") {
  const auto log = parse_protocol(
      kHeader + "60,addition,ACh,1e-7,M,\n60,washout,,,,\n70,note,,,,\n70,note,,,,\n", "p.csv");
  REQUIRE(log.ok());
  REQUIRE(log->warnings.size() == 1);
  CHECK(log->warnings[0].what == "washout at 60 s, the same time as the addition of line 2");
  CHECK(log->warnings[0].place.line == 3U);
}

TEST_CASE("doubtful concentrations are told with their line", "[protocol]") {
  const auto log = parse_protocol(
      kHeader + "60,addition,ACh,1,nM,\n120,addition,ACh,3,uM,\n180,addition,ACh,1,uM,\n", "p.csv");
  REQUIRE(log.ok());
  REQUIRE(log->warnings.size() == 2);
  CHECK(log->warnings[0].what == "ACh goes from 1e-09 M to 3e-06 M, a factor of 3000");
  CHECK(log->warnings[0].place.line == 3U);
  CHECK(log->warnings[1].what == "ACh goes from 3e-06 M to 1e-06 M without a washout between");
  CHECK(log->warnings[1].place.line == 4U);
}

TEST_CASE("a drug log is read from its file", "[protocol]") {
  const auto path = std::filesystem::path(CHRONODROME_BUILD_DIR) / "test-protocol.csv";
  std::ofstream(path) << kHeader << "60,washout,,,,\n";
  const auto log = intake::read_protocol(path.string());
  REQUIRE(log.ok());
  CHECK(log->events.size() == 1);
  std::filesystem::remove(path);
  CHECK(intake::read_protocol(path.string()).error().code == ErrorCode::file_missing);
}

TEST_CASE("the example of the format page reads without a warning", "[protocol]") {
  std::ifstream file(std::string(CHRONODROME_SOURCE_DIR) + "/resources/formats/protocol.md");
  const std::string page((std::istreambuf_iterator<char>(file)), std::istreambuf_iterator<char>());
  const auto from = page.find("```\n") + 4;
  const auto to = page.find("```", from);
  REQUIRE(to != std::string::npos);
  const auto log = parse_protocol(page.substr(from, to - from), "protocol.md");
  REQUIRE(log.ok());
  CHECK(log->events.size() == 5);
  CHECK(log->warnings.empty());
}

TEST_CASE("a drug log cut or changed at any byte reads or fails with a place, never crashes", "[protocol]") {
  const std::string whole =
      kHeader + "60,antagonist,\"atropine, base\",100,nM,\n300,addition,ACh,1e-7,M,\"x \"\"y\"\"\"\n";
  std::size_t failed = 0;
  for (std::size_t at = 0; at < whole.size(); ++at) {
    const auto cut = parse_protocol(whole.substr(0, at), "p.csv");
    if (!cut.ok() && !cut.error().place.line) FAIL("cut after " << at);
    for (const char change : {'\0', '"', ',', '\n', '\r', '\xff', ';'}) {
      std::string text = whole;
      text[at] = change;
      const auto changed = parse_protocol(text, "p.csv");
      if (changed.ok()) continue;
      ++failed;
      if (!changed.error().place.line) FAIL("changed at " << at);
    }
  }
  CHECK(failed > whole.size());
}
