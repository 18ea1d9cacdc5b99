// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>
#include <vector>

#include "protocol/protocol.h"

namespace chronodrome::protocol {

/// Which neighbouring additions are looked at: as the log states them, or only those whose concentration was
/// computed from what was pipetted.
enum class LadderPart { stated, computed };

/// Doubts about the concentrations of a cumulative series: a step of 1000 or more between neighbours (a slip
/// of the unit?), a fall without a washout, more than 1 mol/L. `events` in order of time; `as_written` the
/// same before concentrations were computed, so that no doubt is voiced twice (equal to `events` if none
/// were). Source: factor and rule are common practice.
std::vector<Warning> ladder_warnings(const std::vector<Event>& events, const std::vector<Event>& as_written,
                                     LadderPart part, const std::string& file);

} // namespace chronodrome::protocol
