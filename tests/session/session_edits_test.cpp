// Chronodrome, GPL-3.0-or-later.
#include "session/session_edits.h"

#include <catch2/catch.hpp>

#include "session/proposal.h"
#include "session/saved_layout.h"
#include "support/channel_of_samples.h"

using namespace chronodrome;
using document::SessionFile;

namespace {

SessionFile heart() {
  SessionFile session;
  session.channels = {{"EG1", "RA", "atrial", "bipolar", "mV", false, {}, {}, Seconds(0.0)},
                      {"EG2", "RV", "ventricular", "unipolar", "mV", false, {}, {}, Seconds(0.0)}};
  session.pathways = {{"AV", "RA", "RV", 8.0}};
  session.measures = {"rate:RA", "rate:RV", "delay:AV", "velocity:AV"};
  return session;
}

recording::Recording recording_of(const std::vector<std::string>& sources) {
  recording::Recording made;
  for (const auto& source : sources) {
    recording::Signal signal;
    signal.source = signal.source_as_written = source;
    signal.unit = "mV";
    made.signals.push_back(signal);
  }
  made.files.push_back({"b.edf", "edf", std::string(64, 'b'), 10, Seconds(0.0)});
  return made;
}

} // namespace

TEST_CASE("a new label is carried into everything that names the channel", "[session]") {
  auto session = heart();
  document::Correction correction;
  correction.channel = "RA";
  session.review = {correction};
  document::WindowChoice window;
  window.measure = "rate:RA";
  session.windows = {window};
  auto entry = session.channels.front();
  entry.label = "atrium";
  const auto changed = session::with_channel_changed(session, "RA", entry);
  REQUIRE(changed.ok());
  CHECK(changed->pathways.front().from == "atrium");
  CHECK(changed->measures == std::vector<std::string>{"rate:atrium", "rate:RV", "delay:AV", "velocity:AV"});
  CHECK(changed->review.front().channel == "atrium");
  CHECK(changed->windows.front().measure == "rate:atrium");
}

TEST_CASE("a label that is taken or empty is refused", "[session]") {
  auto entry = heart().channels.front();
  for (const char* label : {"RV", "", "  "}) {
    entry.label = label;
    const auto changed = session::with_channel_changed(heart(), "RA", entry);
    REQUIRE_FALSE(changed.ok());
    CHECK(changed.error().code == ErrorCode::bad_value);
    CHECK_FALSE(changed.error().remedy.empty());
  }
}

TEST_CASE("a role that is no electrogram loses its lead, and measures that it does not allow", "[session]") {
  auto entry = heart().channels[1];
  entry.role = "tension";
  const auto changed = session::with_channel_changed(heart(), "RV", entry);
  REQUIRE(changed.ok());
  CHECK(changed->channels[1].lead.empty());
  CHECK(changed->measures == std::vector<std::string>{"rate:RA", "rate:RV", "delay:AV", "velocity:AV"});
  entry.role = "stimulus";
  const auto stimulus = session::with_channel_changed(heart(), "RV", entry);
  REQUIRE(stimulus.ok());
  CHECK(stimulus->measures == std::vector<std::string>{"rate:RA", "delay:AV", "velocity:AV"});
}

TEST_CASE("a channel that goes takes its pathways and measures with it", "[session]") {
  const auto removed = session::with_channel_removed(heart(), "RV");
  REQUIRE(removed.ok());
  CHECK(removed->pathways.empty());
  CHECK(removed->measures == std::vector<std::string>{"rate:RA"});
  CHECK_FALSE(session::with_channel_removed(*removed, "RA").ok());
  auto corrected = heart();
  document::Correction correction;
  correction.channel = "RV";
  corrected.review = {correction};
  CHECK_FALSE(session::with_channel_removed(corrected, "RV").ok());
}

TEST_CASE("an added channel stands in the recording's order with a label of its own", "[session]") {
  auto session = heart();
  const document::ChannelEntry entry{"EG0", "RA", "other", "", "mV", false, {}, {}, Seconds(0.0)};
  const auto added = session::with_channel_added(session, entry, recording_of({"EG0", "EG1", "EG2"}));
  REQUIRE(added.channels.size() == 3);
  CHECK(added.channels.front().source == "EG0");
  CHECK(added.channels.front().label == "RA 2");
}

TEST_CASE("pathways need two channels, a label of their own and a distance above zero", "[session]") {
  const auto session = heart();
  using document::PathwayEntry;
  const std::vector<PathwayEntry> bad = {{"", "RA", "RV", {}},    {"VA", "RA", "RA", {}},
                                         {"VA", "RA", "X", {}},   {"AV", "RV", "RA", {}},
                                         {"VA", "RV", "RA", 0.0}, {"VA", "RV", "RA", -1.0}};
  for (const auto& entry : bad) {
    CAPTURE(entry.label, entry.from, entry.to);
    CHECK_FALSE(session::with_pathway_set(session, 1, entry).ok());
  }
  const auto added = session::with_pathway_set(session, 1, {"VA", "RV", "RA", {}});
  REQUIRE(added.ok());
  CHECK(added->pathways.size() == 2);
  const auto renamed = session::with_pathway_set(session, 0, {"A-V", "RA", "RV", std::nullopt});
  REQUIRE(renamed.ok());
  CHECK(renamed->measures == std::vector<std::string>{"rate:RA", "rate:RV", "delay:A-V"});
  CHECK(session::with_pathway_removed(session, 0).measures == std::vector<std::string>{"rate:RA", "rate:RV"});
}

TEST_CASE("measures keep the order of the story", "[session]") {
  auto session = session::with_measure(heart(), "conducted:AV", true);
  CHECK(session.measures ==
        std::vector<std::string>{"rate:RA", "rate:RV", "delay:AV", "conducted:AV", "velocity:AV"});
  session = session::with_measure(session, "rate:RA", false);
  CHECK(session.measures.front() == "rate:RV");
}

TEST_CASE("a layout gives what belongs to the set-up and leaves what belongs to the animal", "[session]") {
  auto layout = heart();
  layout.preparation.label = "SMR-1";
  layout.preparation.species = "rabbit";
  layout.preparation.animal = "R1";
  layout.preparation.arrival_delay = Seconds(12.0);
  layout.analysis["response.window_s"] = 45.0;
  layout.review = {document::Correction{}};
  layout.windows = {document::WindowChoice{}};
  layout.protocol_file = "protocol.csv";
  const auto match = session::apply_layout(layout, recording_of({"EG2", "EG1"}));
  CHECK(match.matched == 2);
  CHECK(match.unmatched.empty());
  CHECK(match.session.preparation.species == "rabbit");
  CHECK(match.session.preparation.arrival_delay == Seconds(12.0));
  CHECK(match.session.preparation.label.empty());
  CHECK(match.session.preparation.animal.empty());
  CHECK(match.session.analysis == layout.analysis);
  CHECK(match.session.review.empty());
  CHECK(match.session.windows.empty());
  CHECK_FALSE(match.session.protocol_file.has_value());
  CHECK(match.session.files.front().sha256 == std::string(64, 'b'));
  CHECK(match.session.channels.front().label == "RA");
}

TEST_CASE("what of a layout does not match is said", "[session]") {
  const auto match = session::apply_layout(heart(), recording_of({"eg 1", "EG7"}));
  CHECK(match.matched == 1);
  REQUIRE(match.session.channels.size() == 1);
  CHECK(match.session.channels.front().source == "eg 1");
  CHECK(match.session.pathways.empty());
  CHECK(match.session.measures == std::vector<std::string>{"rate:RA"});
  // EG2 is missing, EG7 is left out, the pathway and three measures fall.
  CHECK(match.unmatched.size() == 6);
  // Two signals that are spelled alike: neither is taken.
  CHECK(session::apply_layout(heart(), recording_of({"eg1", "EG 1"})).matched == 0);
}

TEST_CASE("the recording's unit wins over a layout's", "[session]") {
  auto recording = recording_of({"EG1", "EG2"});
  recording.signals[0].unit = "uV";
  const auto match = session::apply_layout(heart(), recording);
  CHECK(match.session.channels[0].unit == "uV");
  REQUIRE(match.unmatched.size() == 1);
  CHECK(match.unmatched.front().find("uV") != std::string::npos);
}
