// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>

#include "base/quantity.h"

// Times as a notebook gives them, by the clock of the day, against the recording's own zero.
namespace chronodrome::session {

/// Time in the recording at which the clock showed `text` (`14:32`, `14:32:05`, `14:32:05.5`). The first time
/// at or after the start: a clock time earlier than the start belongs to the next day, unless it is less than
/// an hour earlier (then the time is negative, for a log begun before the recorder). Nothing if the text is
/// no clock time, or `clock_start` (ISO 8601, as in Recording) is none.
std::optional<Seconds> time_of_clock(const std::string& clock_start, const std::string& text);

/// `14:32:05` at this time of the recording, with tenths of a second where they are not zero.
std::optional<std::string> clock_at(const std::string& clock_start, Seconds time);

} // namespace chronodrome::session
