// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include "intake/annotation_protocol.h"

using namespace chronodrome;
using protocol::EventKind;

namespace {

protocol::Protocol log_of(const std::vector<std::string>& texts) {
  std::vector<recording::Annotation> annotations;
  double time = 0.0;
  for (const auto& text : texts)
    annotations.push_back({Seconds(time += 10.0), std::nullopt, text});
  return intake::protocol_from_annotations(annotations, "r.edf");
}

protocol::Event event_of(const std::string& text) {
  const auto log = log_of({text});
  REQUIRE(log.events.size() == 1);
  CHECK(log.warnings.empty());
  return log.events[0];
}

} // namespace

TEST_CASE("an annotation gives event, agent, concentration and note", "[protocol]") {
  const auto event = event_of("addition acetylcholine 3e-7 M second series");
  CHECK(event.kind == EventKind::addition);
  CHECK(event.time == Seconds(10));
  CHECK(event.agent == "acetylcholine");
  CHECK(event.concentration == Molar(3e-7));
  CHECK(event.unit == "M");
  CHECK(event.note == "second series");
  CHECK(event.line == 0);
  CHECK(event_of("  Addition\tACh 100 nM ").concentration == Molar(1e-7));
  CHECK(event_of("addition ACh 100nM").concentration == Molar(1e-7));
  CHECK(event_of("addition ACh 3\xc2\xb5M").concentration == Molar(3e-6));
}

TEST_CASE("the agent runs up to the first number that a unit follows", "[protocol]") {
  CHECK(event_of("addition 5-HT 1e-6 M").agent == "5-HT");
  CHECK(event_of("addition BAY 60 6583 30 nM").agent == "BAY 60 6583");
  CHECK(event_of("addition BAY 60 6583 30 nM").concentration == Molar(3e-8));
  CHECK(event_of("antagonist atropine sulfate 1e-7 M until 20 mM").note == "until 20 mM");
}

TEST_CASE("washout and vehicle take an agent without a number, other events a note", "[protocol]") {
  CHECK(event_of("washout").agent.empty());
  CHECK(event_of("washout acetylcholine").agent == "acetylcholine");
  CHECK(event_of("vehicle dimethyl sulfoxide").agent == "dimethyl sulfoxide");
  CHECK(event_of("pacing_start 5 Hz, 2 ms").note == "5 Hz, 2 ms");
  CHECK(event_of("exclude_start electrode moved").kind == EventKind::exclude_start);
  CHECK(event_of("note 3 mM glucose").note == "3 mM glucose");
}

TEST_CASE("other annotations are passed over in silence", "[protocol]") {
  const auto log = log_of({"lights off", "", "   ", "R wave?", "37.0 M", "Stimulus 3"});
  CHECK(log.events.empty());
  CHECK(log.warnings.empty());
}

TEST_CASE("a text that looks like an event and cannot be read is told", "[protocol]") {
  const auto log = log_of({"addition acetylcholine", "addition 1e-7 M", "addition ACh -1 nM",
                           "added ACh 1e-7 M", "wash", "addition ACh 0,3 uM"});
  CHECK(log.events.empty());
  REQUIRE(log.warnings.size() == 6);
  CHECK(describe(log.warnings[0]) == "r.edf:0: warning: the annotation \"addition acetylcholine\" at 10 s is "
                                     "no event: it holds no number with a "
                                     "unit; write it as EVENT AGENT VALUE UNIT, or give the log in a file");
  CHECK(log.warnings[1].what == "the annotation \"addition 1e-7 M\" at 20 s is no event: it names no agent");
  CHECK(log.warnings[2].what ==
        "the annotation \"addition ACh -1 nM\" at 30 s is no event: its concentration is negative");
  CHECK(log.warnings[3].what.find("it begins with none of addition, vehicle") != std::string::npos);
}

TEST_CASE("annotations carry the same doubts as a log in a file", "[protocol]") {
  const auto log = log_of({"addition ACh 1 nM", "addition ACh 1 mM"});
  CHECK(log.events.size() == 2);
  REQUIRE(log.warnings.size() == 1);
  CHECK(log.warnings[0].file == "r.edf");
  CHECK(log.file.empty());
}
