// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstdint>
#include <span>
#include <string_view>

#include "base/quantity.h"
#include "simulation/channel_plan.h"
#include "simulation/heart.h"

namespace chronodrome::simulation {

/// Adds noise, mains, wander, artefacts and baseline steps, and takes the lead off during dropouts.
/// `stream` names the channel's random numbers.
void disturb(std::span<double> samples, Hertz rate, const Disturbance& disturbance,
             std::span<const Stimulus> stimuli, std::uint64_t seed, std::string_view stream);

/// The values that a converter of `bits` bits between `low` and `high` gives: low + k (high - low) / (2^bits
/// - 1), k whole, clipped at both rails.
void convert(std::span<double> samples, double low, double high, int bits);

} // namespace chronodrome::simulation
