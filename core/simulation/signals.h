// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <vector>

#include "simulation/bath_effects.h"
#include "simulation/heart.h"
#include "simulation/scenario.h"

namespace chronodrome::simulation {

/// Samples of one channel over the whole recording, in its unit: the waves of every beat, then what disturbs
/// them, then the converter.
std::vector<double> samples_of(const ChannelPlan& channel, const Scenario& scenario, const Beats& beats,
                               const BathEffects& effects);

/// Samples that a channel has: duration times rate, rounded.
std::size_t sample_count(const ChannelPlan& channel, Seconds duration);

} // namespace chronodrome::simulation
