// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <vector>

#include "protocol/curve_plan.h"
#include "protocol/protocol.h"

namespace chronodrome::protocol {

/// The stretches from each `start` event to the next `stop`, cut to 0 ... `end`. A start that is never
/// stopped runs to the end, a second start in a row and a stop without a start are passed over; each adds a
/// warning.
std::vector<Stretch> stretches_of(const Protocol& protocol, EventKind start, EventKind stop, Seconds end,
                                  std::vector<Warning>& warnings);

} // namespace chronodrome::protocol
