// Chronodrome, GPL-3.0-or-later.
#include "simulation/vary.h"

#include <algorithm>
#include <cmath>
#include <numbers>

#include "simulation/random.h"

namespace chronodrome::simulation {
namespace {

constexpr double kLeastRatio = 0.15;

void vary_channel(ChannelPlan& channel, Random& random) {
  constexpr double kTurn = 2.0 * std::numbers::pi;
  channel.amplitude *= random.uniform(0.7, 1.3);
  const bool upside_down = random.uniform() < 0.5;
  if (channel.lead == recording::Lead::bipolar) channel.inverted = upside_down;
  Disturbance& plan = channel.disturbance;
  plan.mains_phase_rad = random.uniform(0.0, kTurn);
  plan.wander_phase_rad = random.uniform(0.0, kTurn);
  plan.mains_amplitude *= random.uniform(0.5, 1.5);
}

} // namespace

Scenario varied(const Scenario& base, std::uint64_t seed) {
  Scenario scenario = base;
  scenario.seed = seed;
  Random random(seed, "varied");
  scenario.sinus.rate = scenario.sinus.rate * random.uniform(0.88, 1.12);
  scenario.node.delay_min = scenario.node.delay_min * random.uniform(0.9, 1.1);
  const Hertz mains_offset(random.uniform(-0.05, 0.05)); // one mains for all channels
  for (Agent& agent : scenario.agents) {
    for (Effect& effect : agent.effects) {
      effect.pec50 += random.uniform(-0.4, 0.4);
      effect.nh = 0.8 * std::exp(std::log(2.0) * random.uniform());
      effect.emax_ratio = std::max(kLeastRatio, 1.0 + (effect.emax_ratio - 1.0) * random.uniform(0.8, 1.2));
    }
  }
  for (ChannelPlan& channel : scenario.channels) {
    vary_channel(channel, random);
    channel.disturbance.mains_offset = mains_offset;
  }
  return scenario;
}

} // namespace chronodrome::simulation
