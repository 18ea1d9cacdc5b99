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

} // namespace chronodrome::test_support
