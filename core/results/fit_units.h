// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>

#include "session/session_result.h"

namespace chronodrome::results {

/// Unit of a measure as its responses carry it (`bpm`, `ms` ...); empty where no response has that measure.
std::string unit_of_measure(const session::SessionResult& result, const std::string& measure);

/// Unit of a fit's parameter or derived number: that of the measure, `mol/L`, or empty for a pure number.
std::string unit_of_parameter(const session::SessionResult& result, const session::FittedCurve& curve,
                              const std::string& parameter);

} // namespace chronodrome::results
