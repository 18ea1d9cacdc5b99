// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>

#include "simulation/scenario.h"

namespace chronodrome::test_simulation {

using namespace chronodrome::simulation;

inline ChannelPlan electrode(const std::string& label, recording::Role role, recording::Lead lead) {
  ChannelPlan channel;
  channel.label = label;
  channel.role = role;
  channel.lead = lead;
  channel.unit = "mV";
  return channel;
}

/// A heart without chance: atrial and ventricular electrode, one pathway, no noise.
inline Scenario quiet_heart(double cycle_ms, double seconds) {
  Scenario scenario;
  scenario.duration = Seconds(seconds);
  scenario.sinus.rate = BeatsPerMinute(60000.0 / cycle_ms);
  scenario.ventricular_refractory = milliseconds(20);
  scenario.atrial_refractory = milliseconds(20);
  scenario.channels = {electrode("RA", recording::Role::atrial, recording::Lead::bipolar),
                       electrode("RV", recording::Role::ventricular, recording::Lead::unipolar)};
  scenario.pathways = {{"AV", "RA", "RV", std::nullopt}};
  return scenario;
}

inline LoggedEvent addition(double time, const std::string& agent, double molar) {
  LoggedEvent event;
  event.time = Seconds(time);
  event.kind = protocol::EventKind::addition;
  event.agent = agent;
  event.concentration = molar;
  return event;
}

inline Effect effect_on(EffectTarget target, double ratio, double pec50, double nh) {
  Effect effect;
  effect.target = target;
  effect.emax_ratio = ratio;
  effect.pec50 = pec50;
  effect.nh = nh;
  return effect;
}

} // namespace chronodrome::test_simulation
