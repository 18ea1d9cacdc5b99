// Chronodrome, GPL-3.0-or-later.
#pragma once

#include "activation/settings.h"
#include "recording/recording.h"

namespace chronodrome::activation {

/// Peak to peak of the deflection about a sample position of an electrogram, conditioned as for detection.
/// Requires: the position lies within the signal. 0 where the run is too short to be conditioned.
double peak_to_peak_about(const recording::Channel& channel, double position,
                          const ActivationSettings& settings);

} // namespace chronodrome::activation
