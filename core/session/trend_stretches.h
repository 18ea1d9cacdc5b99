// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>
#include <vector>

#include "session/trend.h"

namespace chronodrome::session {

/// Where any of these channels cannot be read or is left out, in order of start. An empty list of channels:
/// only what is left out of all.
std::vector<LostStretch> lost_stretches(const SessionResult& result,
                                        const std::vector<std::string>& channels);

/// Times of marks of these channels that were added, moved or deleted by hand, in order.
std::vector<Seconds> edited_times(const SessionResult& result, const std::vector<std::string>& channels);

} // namespace chronodrome::session
