// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <vector>

#include "rhythm/rhythm.h"

namespace chronodrome::rhythm {

/// Pauses and arrests of one chamber: intervals too long for the running cycle, and silence before the first
/// and after the last beat. A stretch that holds a gap or cannot be read is neither.
std::vector<Episode> find_silence(const activation::ChannelActivations& chamber, bool is_atrial, Seconds end,
                                  const RhythmSettings& settings);

} // namespace chronodrome::rhythm
