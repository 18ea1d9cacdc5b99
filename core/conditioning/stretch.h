// Chronodrome, GPL-3.0-or-later.
#pragma once

#include "base/quantity.h"
#include "base/result.h"
#include "conditioning/conditioning.h"
#include "recording/recording.h"

namespace chronodrome::conditioning {

inline constexpr Seconds kLongestStretch{60.0};

/// The prepared (filtered) signal of a channel from `from` until `to`, on the recording's clock: what
/// condition() calls `timing`, for showing it over the raw one. It comes as a channel of its own that holds
/// nothing but the stretch, with the label, role, unit and skew of `channel`; gaps stay gaps, and runs that
/// are too short to be prepared are left out. Values equal those of condition() to 1e-9 of the signal's
/// size, for both depend on nothing beyond `context`.
/// Errors: bad_usage (settings; a stretch that is empty or longer than kLongestStretch), not_enough_data (no
/// prepared sample lies in the stretch).
/// Cost: that of preparing the stretch and `context` to either side of it.
Result<recording::Channel> condition_stretch(const recording::Channel& channel,
                                             const ConditioningSettings& settings, Seconds from, Seconds to);

} // namespace chronodrome::conditioning
