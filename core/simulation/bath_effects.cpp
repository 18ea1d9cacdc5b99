// Chronodrome, GPL-3.0-or-later.
#include "simulation/bath_effects.h"

#include <algorithm>
#include <cmath>

#include "protocol/concentration.h"

namespace chronodrome::simulation {

double hill_fraction(double concentration, double pec50, double nh) {
  if (concentration <= 0.0) return 0.0;
  return 1.0 / (1.0 + std::pow(10.0, -nh * (pec50 + std::log10(concentration))));
}

Bath bath_after(const std::vector<LoggedEvent>& events, std::size_t count) {
  Bath bath;
  for (std::size_t i = 0; i < count; ++i) {
    const LoggedEvent& event = events[i];
    const std::string agent = protocol::agent_key(event.agent);
    if (event.kind == protocol::EventKind::washout) {
      if (agent.empty()) bath.clear();
      bath.erase(agent);
    }
    const bool dosed =
        event.kind == protocol::EventKind::addition || event.kind == protocol::EventKind::antagonist;
    if (!dosed || !event.concentration) continue;
    if (const auto molar = protocol::concentration_in(*event.concentration, event.unit))
      bath[agent] = molar->value();
  }
  return bath;
}

double pec50_in(const Effect& effect, const std::string& agent, const Scenario& scenario, const Bath& bath) {
  double shift = 1.0;
  for (const Agent& other : scenario.agents) {
    const auto present = bath.find(protocol::agent_key(other.name));
    if (present == bath.end() || present->second <= 0.0) continue;
    for (const Antagonism& antagonism : other.antagonisms) {
      if (protocol::agent_key(antagonism.against) != protocol::agent_key(agent)) continue;
      shift += std::pow(10.0, antagonism.slope * (std::log10(present->second) + antagonism.pkb));
    }
  }
  return effect.pec50 - std::log10(shift);
}

double BathEffects::Course::fraction_at(double time) const {
  const auto after = std::upper_bound(turns.begin(), turns.end(), time,
                                      [](double t, const Turn& turn) { return t < turn.time; });
  if (after == turns.begin()) return 0.0;
  const Turn& turn = *std::prev(after);
  return turn.goal + (turn.start - turn.goal) * std::exp(-(time - turn.time) / turn.tau);
}

BathEffects::BathEffects(const Scenario& scenario) : scenario_(&scenario) {
  for (const Agent& agent : scenario.agents) {
    for (const Effect& effect : agent.effects) {
      Course course{effect.target, effect.emax_ratio, {}};
      for (std::size_t i = 0; i < scenario.protocol.size(); ++i) {
        const Bath bath = bath_after(scenario.protocol, i + 1);
        const auto present = bath.find(protocol::agent_key(agent.name));
        const double concentration = present == bath.end() ? 0.0 : present->second;
        const double goal =
            hill_fraction(concentration, pec50_in(effect, agent.name, scenario, bath), effect.nh);
        const double time = (scenario.protocol[i].time + scenario.preparation.arrival_delay).value();
        const double start = course.fraction_at(time);
        const double before = course.turns.empty() ? 0.0 : course.turns.back().goal;
        if (goal == before) continue;
        const Seconds tau = goal > start ? effect.onset_tau : effect.washout_tau;
        course.turns.push_back({time, start, goal, tau.value()});
      }
      courses_.push_back(std::move(course));
    }
  }
}

double BathEffects::ratio_at(EffectTarget target, Seconds time) const {
  double ratio = 1.0;
  for (const Course& course : courses_) {
    if (course.target == target) ratio *= 1.0 + (course.emax_ratio - 1.0) * course.fraction_at(time.value());
  }
  return ratio;
}

double BathEffects::settled_ratio(EffectTarget target, const Bath& bath) const {
  double ratio = 1.0;
  for (const Agent& agent : scenario_->agents) {
    const auto present = bath.find(protocol::agent_key(agent.name));
    if (present == bath.end()) continue;
    for (const Effect& effect : agent.effects) {
      if (effect.target != target) continue;
      const double fraction =
          hill_fraction(present->second, pec50_in(effect, agent.name, *scenario_, bath), effect.nh);
      ratio *= 1.0 + (effect.emax_ratio - 1.0) * fraction;
    }
  }
  return ratio;
}

} // namespace chronodrome::simulation
