// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>
#include <utility>
#include <vector>

#include "recording/stores.h"
#include "session/session_result.h"

namespace chronodrome::test_support {

/// Two channels at 1 kHz, "RA" and "RV", of 60 s, with a gap in RV from 30 s to 35 s; sample i of RA is i, of
/// RV -2 i. RA beats at 1, 2 ... 59 s, RV 0.1 s later; the beat of 20 s is blocked. Acetylcholine 1 µM is
/// logged at 10 s and 3 µM at 40 s, and arrives 2 s later.
inline session::SessionResult hand_made_result() {
  using namespace chronodrome;
  session::SessionResult result;
  auto recording = std::make_shared<recording::Recording>();
  recording->clock_start = "2026-03-12T23:59:30.5";
  recording->duration = Seconds(60.0);
  const auto add_signal = [&](double slope, std::vector<recording::Run> runs) {
    std::vector<double> samples(runs.back().first + runs.back().count);
    for (std::size_t i = 0; i < samples.size(); ++i)
      samples[i] = slope * static_cast<double>(i);
    recording::Signal signal;
    signal.unit = "mV";
    signal.time_base = recording::TimeBase(Hertz(1000.0), std::move(runs));
    signal.samples = recording::store_of(std::move(samples));
    signal.envelope = recording::Envelope::of(*signal.samples);
    recording->signals.push_back(std::move(signal));
  };
  add_signal(1.0, {{0, 60000, Seconds(0.0)}});
  add_signal(-2.0, {{0, 30000, Seconds(0.0)}, {30000, 25000, Seconds(35.0)}});
  recording->signals[0].source = "EG1";
  recording->signals[1].source = "EG2";
  for (std::size_t c = 0; c < 2; ++c) {
    recording::Channel channel;
    channel.label = c == 0 ? "RA" : "RV";
    channel.role = c == 0 ? recording::Role::atrial : recording::Role::ventricular;
    channel.unit = "mV";
    channel.recording = recording;
    channel.signal = c;
    result.channels.push_back(channel);
    activation::ChannelActivations found;
    found.channel = channel.label;
    std::vector<rhythm::Interval> intervals;
    for (int beat = 1; beat < 60; ++beat) {
      if (c == 1 && (beat == 20 || (beat >= 30 && beat < 35))) continue;
      activation::Activation mark;
      mark.time = Seconds(beat + 0.1 * static_cast<double>(c));
      if (!found.marks.empty()) {
        const Seconds length = mark.time - found.marks.back().time;
        const bool crosses = c == 1 && beat == 35;
        intervals.push_back({found.marks.size(), mark.time, length,
                             crosses ? rhythm::IntervalFlag::gap : rhythm::IntervalFlag::none});
      }
      found.marks.push_back(mark);
    }
    result.activations.push_back(std::move(found));
    result.intervals.push_back(std::move(intervals));
  }
  conduction::PathwayDelays av;
  av.pathway = "AV", av.from = "RA", av.to = "RV";
  for (int beat = 1; beat < 60; ++beat) {
    conduction::DelayRow row;
    row.from_time = Seconds(beat);
    row.state = conduction::DelayState::blocked;
    if (beat != 20 && (beat < 30 || beat >= 35)) {
      row.to_time = Seconds(beat + 0.1);
      row.delay = Seconds(0.1);
      row.state = conduction::DelayState::conducted;
    }
    av.rows.push_back(row);
  }
  result.pathways.push_back(std::move(av));
  for (const auto& [time, molar] : {std::pair{10.0, 1e-6}, {40.0, 3e-6}}) {
    protocol::Event event;
    event.time = Seconds(time);
    event.kind = protocol::EventKind::addition;
    event.agent = "acetylcholine";
    event.concentration = Molar(molar);
    result.protocol.events.push_back(event);
  }
  result.session.preparation.arrival_delay = Seconds(2.0);
  result.recording = std::move(recording);
  return result;
}

} // namespace chronodrome::test_support
