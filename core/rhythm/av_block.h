// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <vector>

#include "rhythm/rhythm.h"

namespace chronodrome::rhythm {

/// Episodes of impaired atrioventricular conduction read from the rows of one pathway.
std::vector<Episode> find_av_block(const conduction::PathwayDelays& av, Seconds end,
                                   const RhythmSettings& settings);

} // namespace chronodrome::rhythm
