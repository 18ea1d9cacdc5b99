// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstdint>

#include "simulation/scenario.h"

namespace chronodrome::simulation {

/// Another preparation of the same kind: the scenario with its seed set to `seed` and, drawn from it,
/// - each effect: pEC50 uniform within 0.4 of its value, nh log-uniform in 0.8 to 1.6, effect size
///   (emax_ratio - 1) times 0.8 to 1.2 (never below a ratio of 0.15);
/// - basal sinus rate times 0.88 to 1.12, delay_min times 0.9 to 1.1;
/// - amplitude of each channel times 0.7 to 1.3 (rails unchanged), polarity of bipolar leads;
/// - phases of mains and wander uniform, mains amplitude times 0.5 to 1.5, mains offset within 0.05 Hz.
/// The drug log stays as it is. Same `base` and `seed`: the same scenario.
Scenario varied(const Scenario& base, std::uint64_t seed);

} // namespace chronodrome::simulation
