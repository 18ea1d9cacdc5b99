// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <vector>

#include "session/session_result.h"

namespace chronodrome::session {

/// What one pathway shows over the whole recording: control delay, median delay of conducted beats, conducted
/// share, and apparent velocity where a distance is stated. Intervals are 95 %, of the mean, with the lag-1
/// correction for beats that resemble their neighbours; they say nothing of other preparations.
std::vector<ConductionFact> conduction_facts(const conduction::PathwayDelays& pathway,
                                             std::optional<Metres> distance);

} // namespace chronodrome::session
