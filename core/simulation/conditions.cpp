// Chronodrome, GPL-3.0-or-later.
#include "simulation/conditions.h"

#include <algorithm>

namespace chronodrome::simulation {

bool acts_on(const Scenario& scenario, EffectTarget target) {
  return std::any_of(scenario.agents.begin(), scenario.agents.end(), [&](const Agent& agent) {
    return std::any_of(agent.effects.begin(), agent.effects.end(),
                       [&](const Effect& effect) { return effect.target == target; });
  });
}

Conditions::Conditions(const Scenario& scenario)
    : scenario_(&scenario), effects_(scenario),
      basal_delay_(steady_delay(scenario.node, Seconds(60.0 / scenario.sinus.rate.value()))),
      steers_delay_(acts_on(scenario, EffectTarget::delay)) {}

template <class RatioOf>
AvNode Conditions::node_under(const RatioOf& ratio_of) const {
  AvNode node = scenario_->node;
  node.delay_span = node.delay_span * ratio_of(EffectTarget::delay_span);
  node.recovery_tau = node.recovery_tau * ratio_of(EffectTarget::recovery_tau);
  node.recovery_min = node.recovery_min * ratio_of(EffectTarget::recovery_min);
  if (!steers_delay_ || !basal_delay_) {
    node.delay_min = node.delay_min * ratio_of(EffectTarget::delay_min);
    return node;
  }
  const Seconds cycle(60.0 / (scenario_->sinus.rate.value() * ratio_of(EffectTarget::rate)));
  // A delay beyond the cycle has no 1:1 conduction: the node then blocks by itself.
  const Seconds delay = std::min(*basal_delay_ * ratio_of(EffectTarget::delay), cycle * 0.95);
  node.delay_min = std::max(delay_min_for(node, delay, cycle), milliseconds(1.0));
  return node;
}

BeatsPerMinute Conditions::rate_at(Seconds time) const {
  return scenario_->sinus.rate * effects_.ratio_at(EffectTarget::rate, time);
}

AvNode Conditions::node_at(Seconds time) const {
  return node_under([&](EffectTarget target) { return effects_.ratio_at(target, time); });
}

BeatsPerMinute Conditions::settled_rate(const Bath& bath) const {
  return scenario_->sinus.rate * effects_.settled_ratio(EffectTarget::rate, bath);
}

AvNode Conditions::settled_node(const Bath& bath) const {
  return node_under([&](EffectTarget target) { return effects_.settled_ratio(target, bath); });
}

} // namespace chronodrome::simulation
