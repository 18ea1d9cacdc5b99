// Chronodrome, GPL-3.0-or-later.
#pragma once

#include "protocol/protocol.h"

namespace chronodrome::intake {

/// Puts the events in order of time (ties keep their order) and adds the warnings that any log may need: out
/// of order, two bath events at one time, doubtful concentrations.
void put_in_order(protocol::Protocol& protocol);

} // namespace chronodrome::intake
