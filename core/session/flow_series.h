// Chronodrome, GPL-3.0-or-later.
#pragma once

#include "recording/recording.h"
#include "response/response.h"

namespace chronodrome::session {

/// Means of a channel over each full second of each stretch without a gap, in the channel's unit.
response::FlowSeries second_means(const recording::Channel& channel);

} // namespace chronodrome::session
