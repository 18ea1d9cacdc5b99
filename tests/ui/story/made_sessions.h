// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cmath>
#include <memory>
#include <string>
#include <vector>

#include "session/analysis.h"
#include "session/session_result.h"

namespace chronodrome::test_support {

inline std::string sampleFile(const std::string& name) {
  return std::string(CHRONODROME_SOURCE_DIR) + "/sample-sessions/" + name + "/" + name + ".session.json";
}

/// Made for drawing only: a result whose single atrial channel beats at these times (s).
inline session::SessionResult beatsAt(const std::vector<double>& times, double duration_s) {
  session::SessionResult result;
  auto recording = std::make_shared<recording::Recording>();
  recording->duration = Seconds(duration_s);
  result.recording = recording;
  recording::Channel channel;
  channel.label = "RA";
  channel.role = recording::Role::atrial;
  result.channels.push_back(channel);
  activation::ChannelActivations marks;
  marks.channel = "RA";
  for (const double time : times) {
    activation::Activation mark;
    mark.time = Seconds(time);
    mark.confidence = 1.0;
    marks.marks.push_back(mark);
  }
  result.intervals.push_back(rhythm::intervals_of(marks, {}, {}));
  result.activations.push_back(marks);
  result.session.measures = {"rate:RA"};
  return result;
}

/// Steady beats over an hour, 240 a minute with a slow sway.
inline std::vector<double> hourOfBeats() {
  std::vector<double> times;
  for (double t = 0.0; t < 3600.0; t += 0.25 * (1.0 + 0.02 * std::sin(t / 200.0)))
    times.push_back(t);
  return times;
}

/// An hour with five measures, a drug log of 24 entries and 60 plateaus a measure: for measuring time.
inline session::SessionResult busyHour() {
  session::SessionResult result = beatsAt(hourOfBeats(), 3600.0);
  const auto marks = result.activations.front();
  const auto intervals = result.intervals.front();
  result.session.measures.clear();
  for (int i = 0; i < 5; ++i) {
    const std::string label = "RA" + std::to_string(i);
    if (i > 0) {
      result.channels.push_back(result.channels.front());
      result.activations.push_back(marks);
      result.intervals.push_back(intervals);
    }
    result.channels.back().label = label;
    result.activations.back().channel = label;
    result.session.measures.push_back("rate:" + label);
    for (int k = 0; k < 60; ++k) {
      response::Response row;
      row.curve = 1;
      row.measure = result.session.measures.back();
      row.unit = "bpm";
      row.concentration = Molar(1e-9 * (k + 1));
      row.window_start = Seconds(60.0 * k + 20.0);
      row.window_end = Seconds(60.0 * k + 50.0);
      row.value = 240.0;
      result.responses.rows.push_back(row);
    }
  }
  for (int k = 0; k < 24; ++k) {
    protocol::Event event;
    event.time = Seconds(150.0 * k + 10.0);
    event.kind = protocol::EventKind::addition;
    event.agent = "acetylcholine";
    event.concentration = Molar(1e-9 * std::pow(10.0, 0.25 * k));
    result.protocol.events.push_back(event);
  }
  for (int k = 0; k < 600; ++k)
    result.rhythm.episodes.push_back(
        {Seconds(6.0 * k), Seconds(6.0 * k + 6.0), k % 3 == 0 ? "wenckebach" : "two_to_one", "ratio=4:3"});
  return result;
}

/// Ten minutes in which everything happens that the story can show.
inline session::SessionResult eventful() {
  using protocol::EventKind;
  std::vector<double> times;
  for (double t = 0.0; t < 600.0; t += 0.3 + (t > 300.0 ? 0.1 : 0.0)) {
    const bool isSilent = (t > 220.0 && t < 250.0) || (t > 430.0 && t < 445.0) || (t > 520.0 && t < 540.0);
    if (!isSilent) times.push_back(t + 0.004 * std::sin(t));
  }
  times.insert(times.begin() + 200, times[199] + 0.02);
  session::SessionResult result = beatsAt(times, 600.0);
  auto& marks = result.activations.front();
  marks.unreadable = {{{Seconds(220.0), Seconds(250.0)}, "gap"},
                      {{Seconds(520.0), Seconds(540.0)}, "saturation"}};
  for (const std::size_t edited : {300U, 301U, 305U, 420U, 900U})
    marks.marks[edited].origin = activation::Origin::moved;
  result.intervals.front() = rhythm::intervals_of(marks, {}, {});
  result.session.measures = {"rate:RA", "conducted:AV"};
  result.plan.excluded = {{Seconds(330.0), Seconds(360.0)}};
  result.plan.paced = {{Seconds(20.0), Seconds(60.0)}, {Seconds(560.0), Seconds(572.0)}};
  const auto log = [&](double time_s, EventKind kind, const char* agent, double molar) {
    protocol::Event event;
    event.time = Seconds(time_s);
    event.kind = kind;
    event.agent = agent;
    if (molar >= 0.0) event.concentration = Molar(molar);
    result.protocol.events.push_back(event);
  };
  result.session.preparation.arrival_delay = Seconds(6.0);
  for (int k = 0; k < 5; ++k)
    log(60.0 + 25.0 * k, EventKind::addition, "acetylcholine", 1e-8 * std::pow(10.0, 0.5 * k));
  log(190.0, EventKind::washout, "", -1.0);
  log(250.0, EventKind::antagonist, "atropine", 1e-7);
  log(262.0, EventKind::vehicle, "", -1.0);
  for (int k = 0; k < 16; ++k)
    log(310.0 + 12.0 * k, EventKind::addition, "acetylcholine", 1e-8 * std::pow(10.0, 0.25 * k));
  log(550.0, EventKind::washout, "", -1.0);
  const auto plateau = [&](double from, double to, response::Status status, double value) {
    response::Response row;
    row.curve = 1;
    row.measure = "rate:RA";
    row.unit = "bpm";
    row.concentration = Molar(from * 1e-9);
    row.window_start = Seconds(from);
    row.window_end = Seconds(to);
    row.status = status;
    if (status == response::Status::ok || status == response::Status::not_steady) row.value = value;
    result.responses.rows.push_back(row);
  };
  plateau(70.0, 85.0, response::Status::ok, 199.0);
  plateau(95.0, 110.0, response::Status::not_steady, 201.0);
  plateau(330.0, 360.0, response::Status::excluded, 0.0);
  plateau(385.0, 400.0, response::Status::censored, 0.0);
  plateau(430.0, 445.0, response::Status::arrested, 0.0);
  plateau(522.0, 538.0, response::Status::unreadable, 0.0);
  result.rhythm.episodes = {{Seconds(0.0), Seconds(20.0), "regular", ""},
                            {Seconds(20.0), Seconds(60.0), "paced", ""},
                            {Seconds(60.0), Seconds(120.0), "first_degree_av_block", ""},
                            {Seconds(120.0), Seconds(170.0), "wenckebach", "ratio=4:3"},
                            {Seconds(170.0), Seconds(220.0), "second_degree_fixed", "ratio=3:2"},
                            {Seconds(220.0), Seconds(250.0), "unreadable", ""},
                            {Seconds(250.0), Seconds(290.0), "two_to_one", ""},
                            {Seconds(290.0), Seconds(340.0), "high_degree_av_block", ""},
                            {Seconds(340.0), Seconds(400.0), "complete_av_block", ""},
                            {Seconds(400.0), Seconds(402.0), "sinus_pause", ""},
                            {Seconds(402.0), Seconds(430.0), "regular", ""},
                            {Seconds(430.0), Seconds(445.0), "arrest", ""},
                            {Seconds(445.0), Seconds(448.0), "ventricular_escape", ""},
                            {Seconds(448.0), Seconds(451.0), "undetermined", ""},
                            {Seconds(451.0), Seconds(455.0), "wenckebach", "ratio=3:2"},
                            {Seconds(455.0), Seconds(520.0), "regular", ""},
                            {Seconds(490.0), Seconds(490.3), "premature_atrial", ""},
                            {Seconds(520.0), Seconds(540.0), "unreadable", ""},
                            {Seconds(540.0), Seconds(600.0), "regular", ""}};
  return result;
}

} // namespace chronodrome::test_support
