// Chronodrome, GPL-3.0-or-later.
// What a form proposes from the beats, from annotations and from the clock on the wall.
#include <catch2/catch.hpp>
#include <cmath>

#include "session/notebook_clock.h"
#include "session/order_check.h"
#include "session/preview_traces.h"
#include "session/protocol_guess.h"
#include "support/channel_of_samples.h"

using namespace chronodrome;

namespace {

/// Bipolar deflections of 20 ms, one each cycle from `first` on, at 1 kHz over 90 s.
recording::Signal train(const std::string& source, double first, double cycle) {
  std::vector<double> samples(90'000, 0.0);
  unsigned state = 12345;
  for (std::size_t i = 0; i < samples.size(); ++i) {
    state = state * 1664525U + 1013904223U; // noise of 1 % of the deflections, the same on every run
    samples[i] = 0.02 * (static_cast<double>(state >> 8U) / 16777216.0 - 0.5);
  }
  for (double beat = first; beat < 89.9; beat += cycle) {
    for (int k = -10; k <= 10; ++k) {
      const auto at = static_cast<std::ptrdiff_t>(std::lround(1000.0 * beat)) + k;
      if (at < 0 || at >= 90'000) continue;
      const double x = k / 3.0;
      samples[static_cast<std::size_t>(at)] += -x * std::exp(0.5 - 0.5 * x * x);
    }
  }
  recording::Signal signal;
  signal.source = signal.source_as_written = source;
  signal.unit = "mV";
  signal.time_base = recording::TimeBase(Hertz(1000.0), {{0, samples.size(), Seconds(0.0)}});
  signal.samples = std::make_shared<test_support::SamplesInMemory>(std::move(samples));
  signal.envelope = recording::Envelope::of(*signal.samples);
  return signal;
}

struct Heart {
  std::shared_ptr<recording::Recording> recording = std::make_shared<recording::Recording>();
  document::SessionFile session;

  Heart(const std::string& role1, double first1, const std::string& role2, double first2,
        double cycle = 0.4) {
    recording->signals = {train("EG1", first1, cycle), train("EG2", first2, cycle)};
    recording->duration = Seconds(90.0);
    session.preparation.species = "guinea pig";
    session.channels = {{"EG1", "one", role1, "bipolar", "mV", false, {}, {}, Seconds(0.0)},
                        {"EG2", "two", role2, "bipolar", "mV", false, {}, {}, Seconds(0.0)}};
  }
};

} // namespace

TEST_CASE("an atrium that follows its ventricle is doubted, with the change that would mend it",
          "[session]") {
  const Heart swapped("ventricular", 0.3, "atrial", 0.36);
  const auto doubts = session::check_order(swapped.session, swapped.recording);
  REQUIRE(doubts.size() == 1);
  CHECK(doubts.front().text.find("60 ms") != std::string::npos);
  CHECK(doubts.front().text.find("swapped") != std::string::npos);
  CHECK(doubts.front().roles ==
        std::vector<std::pair<std::string, std::string>>{{"two", "ventricular"}, {"one", "atrial"}});
}

TEST_CASE("the usual order raises no doubt", "[session]") {
  const Heart usual("atrial", 0.3, "ventricular", 0.36);
  CHECK(session::check_order(usual.session, usual.recording).empty());
}

TEST_CASE("half a cycle of delay tells nothing about the order", "[session]") {
  const Heart even("ventricular", 0.3, "atrial", 0.5);
  CHECK(session::check_order(even.session, even.recording).empty());
}

TEST_CASE("two electrograms without a role are proposed in the order of their beats", "[session]") {
  const Heart open("other", 0.36, "other", 0.3);
  const auto doubts = session::check_order(open.session, open.recording);
  REQUIRE(doubts.size() == 1);
  CHECK(doubts.front().roles ==
        std::vector<std::pair<std::string, std::string>>{{"two", "atrial"}, {"one", "ventricular"}});
}

TEST_CASE("one deflection on both electrodes proposes nothing", "[session]") {
  const Heart same("other", 0.3, "other", 0.302);
  CHECK(session::check_order(same.session, same.recording).empty());
}

TEST_CASE(
    "annotations are proposed: events as they are, agent and concentration as additions, others as notes",
    "[session]") {
  recording::Recording recording;
  recording.annotations = {{Seconds(10.0), {}, "addition carbachol 3e-7 M"},
                           {Seconds(20.0), {}, "ACh 3 uM"},
                           {Seconds(30.0), {}, "ISO 1e-7"},
                           {Seconds(40.0), {}, "  "},
                           {Seconds(50.0), {}, "washout"}};
  const auto proposed = session::proposed_events(recording, {});
  REQUIRE(proposed.size() == 4);
  CHECK(proposed[0].kind == protocol::EventKind::addition);
  CHECK(proposed[1].kind == protocol::EventKind::addition);
  CHECK(proposed[1].agent == "ACh");
  CHECK(proposed[1].concentration == Molar(3e-6));
  CHECK(proposed[2].kind == protocol::EventKind::note); // no unit: nothing is invented
  CHECK(proposed[2].note == "ISO 1e-7");
  CHECK(proposed[3].kind == protocol::EventKind::washout);
  protocol::Protocol log;
  log.events = proposed;
  CHECK(session::proposed_events(recording, log).empty());
}

TEST_CASE("doubts about a log name the event they are about", "[session]") {
  protocol::Protocol log;
  protocol::Event addition;
  addition.kind = protocol::EventKind::addition;
  addition.agent = "carbachol";
  for (const auto& [time, molar] : {std::pair{10.0, 1e-8}, std::pair{30.0, 1e-4}, std::pair{20.0, 3e-8}}) {
    addition.time = Seconds(time);
    addition.concentration = Molar(molar);
    log.events.push_back(addition);
  }
  const auto check = session::check_protocol(log, {}, Seconds(100.0));
  REQUIRE_FALSE(check.error.has_value());
  REQUIRE(check.plan.curves.size() == 1);
  CHECK(check.plan.curves.front().steps.size() == 4);
  REQUIRE(check.warnings.size() == 1); // 30 nM to 100 uM: a factor of 3000
  CHECK(check.warnings.front().place.line == 2U);
  log.events.front().concentration.reset();
  log.events.front().stock = Molar(1e-3);
  log.events.front().volume_ml = 0.1;
  CHECK(session::check_protocol(log, {}, Seconds(100.0)).error.has_value()); // the bath's volume is not known
}

TEST_CASE("a notebook's clock becomes the recording's time and back", "[session]") {
  using session::clock_at;
  using session::time_of_clock;
  const std::string start = "2026-03-04T14:20:00.5";
  CHECK(time_of_clock(start, "14:32") == Seconds(719.5));
  CHECK(time_of_clock(start, "14:20:01,5") == Seconds(1.0));
  CHECK(time_of_clock(start, "14:00:00") == Seconds(-1200.5)); // the log began before the recorder
  CHECK(time_of_clock("2026-03-04T23:50:00", "00:10") == Seconds(1200.0));
  CHECK(clock_at(start, Seconds(719.5)) == "14:32:00");
  CHECK(clock_at(start, Seconds(0.0)) == "14:20:00.5");
  CHECK(clock_at("2026-03-04T23:59:59", Seconds(1.99)) == "00:00:01");
  CHECK(clock_at("2026-03-04T23:59:59", Seconds(0.97)) == "00:00:00");
  for (const char* text : {"", "14", "25:00", "14:60", "14:20:60", "14:2x", "-1:20", "14.5:20", "1:2:3:4"}) {
    CAPTURE(text);
    CHECK_FALSE(time_of_clock(start, text).has_value());
  }
  CHECK_FALSE(time_of_clock("", "14:32").has_value());
  CHECK_FALSE(clock_at("", Seconds(1.0)).has_value());
}

TEST_CASE("a preview shows the whole and two seconds from the middle of the longest run", "[session]") {
  auto recording = std::make_shared<recording::Recording>();
  recording->signals = {train("EG1", 0.3, 0.4)};
  recording->duration = Seconds(90.0);
  const auto previews = session::preview_traces(recording, 100);
  REQUIRE(previews.size() == 1);
  CHECK(previews[0].whole.span.end == Seconds(90.0));
  CHECK(previews[0].close.span.start == Seconds(44.0));
  CHECK(previews[0].close.span.end == Seconds(46.0));
  CHECK(previews[0].whole.range.max > 0.9);
  recording->signals[0].time_base = recording::TimeBase(Hertz(1000.0), {});
  CHECK(session::preview_traces(recording, 100)[0].whole.pieces.empty());
}
