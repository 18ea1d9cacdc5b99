// Chronodrome, GPL-3.0-or-later.
#include "session/places.h"

#include <catch2/catch.hpp>

#include "session/hand_made_result.h"
#include "session/stretches.h"

using namespace chronodrome;
using session::LandmarkKind;
using session::next_landmark;
using session::previous_landmark;

TEST_CASE("the next beat is one of the channel, and not the one that is stood on", "[session]") {
  const auto result = test_support::hand_made_result();
  CHECK(next_landmark(result, LandmarkKind::beat, Seconds(4.0), "RA")->time == Seconds(5.0));
  CHECK(next_landmark(result, LandmarkKind::beat, Seconds(4.99995), "RA")->time == Seconds(6.0));
  CHECK(previous_landmark(result, LandmarkKind::beat, Seconds(4.0), "RA")->time == Seconds(3.0));
  CHECK(next_landmark(result, LandmarkKind::beat, Seconds(4.0))->time == Seconds(4.1));
  CHECK(next_landmark(result, LandmarkKind::beat, Seconds(4.0))->channel == "RV");
  CHECK_FALSE(next_landmark(result, LandmarkKind::beat, Seconds(59.0), "RA"));
  CHECK_FALSE(previous_landmark(result, LandmarkKind::beat, Seconds(1.0), "RA"));
}

TEST_CASE("flagged beats are those that may be wrong or special; a gap is no beat", "[session]") {
  auto result = test_support::hand_made_result();
  CHECK(session::landmarks(result, LandmarkKind::flagged_beat).empty());
  result.intervals[0][10].flag = rhythm::IntervalFlag::premature;
  result.intervals[0][20].flag = rhythm::IntervalFlag::edited;
  result.intervals[1][5].flag = rhythm::IntervalFlag::low_confidence;
  const auto flagged = session::landmarks(result, LandmarkKind::flagged_beat);
  REQUIRE(flagged.size() == 2);
  CHECK(flagged[0].channel == "RV");
  CHECK(flagged[0].time == Seconds(7.1));
  CHECK(flagged[1].what == "premature");
  CHECK(flagged[1].time == Seconds(12.0));
}

TEST_CASE("edits are marks that were added or moved, and places where one was deleted", "[session]") {
  auto result = test_support::hand_made_result();
  result.activations[0].marks[4].origin = activation::Origin::added;
  result.activations[1].marks[2].origin = activation::Origin::moved;
  document::Correction removed;
  removed.what = document::CorrectionKind::remove;
  removed.channel = "RA";
  removed.time = Seconds(40.5);
  result.session.review.push_back(removed);
  const auto edits = session::landmarks(result, LandmarkKind::edited_mark);
  REQUIRE(edits.size() == 3);
  CHECK(edits[0].time == Seconds(3.1));
  CHECK(edits[0].what == "moved");
  CHECK(edits[1].what == "added");
  CHECK(edits[2].what == "deleted");
  CHECK(edits[2].time == Seconds(40.5));
  CHECK(session::landmarks(result, LandmarkKind::edited_mark, "RA").size() == 2);
}

TEST_CASE("additions, rhythm episodes and gaps are places too", "[session]") {
  auto result = test_support::hand_made_result();
  protocol::Event note;
  note.kind = protocol::EventKind::note;
  note.time = Seconds(5.0);
  result.protocol.events.insert(result.protocol.events.begin(), note);
  const auto addition = next_landmark(result, LandmarkKind::addition, Seconds(0.0));
  CHECK(addition->time == Seconds(10.0));
  CHECK(addition->what == "acetylcholine");
  CHECK(previous_landmark(result, LandmarkKind::addition, Seconds(60.0))->time == Seconds(40.0));
  result.rhythm.episodes = {{Seconds(0.0), Seconds(19.0), "regular", ""},
                            {Seconds(19.0), Seconds(22.0), "second_degree_fixed", ""}};
  const auto episode = next_landmark(result, LandmarkKind::rhythm, Seconds(3.0));
  CHECK(episode->what == "second_degree_fixed");
  CHECK(episode->end == Seconds(22.0));
  const auto gap = next_landmark(result, LandmarkKind::gap, Seconds(0.0));
  CHECK(gap->time == Seconds(30.0));
  CHECK(gap->end == Seconds(35.0));
  CHECK(gap->channel == "RV");
  CHECK_FALSE(next_landmark(result, LandmarkKind::gap, Seconds(0.0), "RA"));
}

TEST_CASE("measures that share a window share its entry", "[session]") {
  auto result = test_support::hand_made_result();
  const auto add = [&](const char* measure, double molar, double start, double end) {
    response::Response row;
    row.curve = 1;
    row.agent = "acetylcholine";
    row.measure = measure;
    row.concentration = Molar(molar);
    row.window_start = Seconds(start);
    row.window_end = Seconds(end);
    result.responses.rows.push_back(row);
  };
  add("rate:RA", 3e-6, 50.0, 60.0);
  add("rate:RA", 1e-6, 30.0, 40.0);
  add("delay:AV", 1e-6, 30.0, 40.0);
  add("delay:AV", 3e-6, 52.0, 60.0);
  add("rate:RV", 3e-6, 0.0, 0.0); // no window
  const auto windows = session::plateau_windows(result);
  REQUIRE(windows.size() == 3);
  CHECK(windows[0].measures == std::vector<std::string>{"rate:RA", "delay:AV"});
  CHECK(windows[0].concentration == Molar(1e-6));
  CHECK(windows[1].span.start == Seconds(50.0));
  CHECK(windows[2].span.start == Seconds(52.0));
}

TEST_CASE("before an analysis every signal is a channel with its gaps", "[session]") {
  const auto made = test_support::hand_made_result();
  const auto result = session::unanalysed(made.recording);
  REQUIRE(result.channels.size() == 2);
  CHECK(result.channels[0].label == "EG1");
  CHECK(result.channels[1].unit == "mV");
  REQUIRE(result.activations.size() == 2);
  CHECK(result.activations[0].unreadable.empty());
  REQUIRE(result.activations[1].unreadable.size() == 1);
  CHECK(result.activations[1].unreadable[0].span.end == Seconds(35.0));
  CHECK(result.activations[1].unreadable[0].reason == "gap");
}
