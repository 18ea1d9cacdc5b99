// Chronodrome, GPL-3.0-or-later.
#include "simulation/simulate.h"

#include <algorithm>
#include <cmath>

#include "base/number_text.h"
#include "simulation/conditions.h"
#include "simulation/signals.h"

namespace chronodrome::simulation {
namespace {

Beats beats_of(const Scenario& scenario, const Conditions& conditions) {
  const FluctuationPlan& plan = scenario.fluctuation;
  Fluctuation rate(scenario.seed, "rate", plan.rate_sd.value(), plan.rate_tau);
  Fluctuation delay(scenario.seed, "delay", plan.delay_sd.value(), plan.delay_tau);
  const HeartState state{
      [&](Seconds time) { return conditions.rate_at(time) + BeatsPerMinute(rate.at(time)); },
      [&](Seconds time) {
        AvNode node = conditions.node_at(time);
        node.delay_min = std::max(node.delay_min + Seconds(delay.at(time)), milliseconds(1.0));
        return node;
      }};
  return run_heart(scenario, state, scenario.duration);
}

std::string annotation_text(const LoggedEvent& event) {
  std::string text = protocol::name_of(event.kind);
  if (!event.agent.empty()) text += " " + event.agent;
  if (event.concentration) text += " " + exact_text(*event.concentration) + " " + event.unit;
  if (!event.note.empty()) text += " " + event.note;
  return text;
}

intake::WrittenSignal signal_of(const ChannelPlan& channel, const Scenario& scenario, const Beats& beats,
                                const BathEffects& effects) {
  intake::WrittenSignal signal;
  signal.label = channel.source.empty() ? channel.label : channel.source;
  signal.unit = channel.unit;
  signal.rate = channel.rate;
  signal.samples = samples_of(channel, scenario, beats, effects);
  if (channel.range) {
    signal.physical_min = (*channel.range)[0];
    signal.physical_max = (*channel.range)[1];
    const int half = 1 << (channel.bits - 1);
    signal.digital_min = -half;
    signal.digital_max = half - 1;
  }
  return signal;
}

} // namespace

std::vector<LoggedEvent> protocol_of(const Scenario& scenario) {
  std::vector<LoggedEvent> events = scenario.protocol;
  for (const PacingTrain& train : scenario.pacing) {
    LoggedEvent event;
    event.kind = protocol::EventKind::pacing_start;
    event.time = train.start;
    event.note = name_of(train.chamber) + " S1S1 " + number_text(in_milliseconds(train.cycle), 6) + " ms";
    events.push_back(event);
    event.kind = protocol::EventKind::pacing_stop;
    event.time = train.start + train.cycle * (train.beats - 1) + train.premature.value_or(Seconds(0.0));
    event.note.clear();
    events.push_back(event);
  }
  std::stable_sort(events.begin(), events.end(),
                   [](const LoggedEvent& a, const LoggedEvent& b) { return a.time < b.time; });
  return events;
}

Result<Simulated> simulate(const Scenario& scenario) {
  if (auto error = scenario.check()) return *std::move(error);
  const Conditions conditions(scenario);
  const Beats beats = beats_of(scenario, conditions);
  Simulated made;
  made.scenario = scenario;
  made.recording.clock_start = scenario.file.clock_start;
  made.recording.recording_text = scenario.file.recording_text;
  made.recording.record_duration = scenario.file.record_duration;
  made.recording.left_out = scenario.file.gaps;
  for (const ChannelPlan& channel : scenario.channels) {
    made.recording.signals.push_back(signal_of(channel, scenario, beats, conditions.effects()));
    if (recording::is_electrogram(channel.role) || recording::is_mechanical(channel.role))
      made.truth.activations.push_back(true_activations(channel, beats, scenario.duration));
  }
  if (scenario.file.protocol_in_annotations) {
    for (const LoggedEvent& event : protocol_of(scenario))
      made.recording.annotations.push_back({event.time, std::nullopt, annotation_text(event)});
  }
  for (const PathwayPlan& pathway : scenario.pathways)
    made.truth.pathways.push_back(true_pathway(pathway, scenario, beats));
  for (const Stimulus& stimulus : beats.stimuli)
    made.truth.stimuli.push_back(stimulus.time);
  made.truth.rhythm = true_rhythm(scenario, beats);
  add_true_responses(scenario, made.truth);
  return made;
}

} // namespace chronodrome::simulation
