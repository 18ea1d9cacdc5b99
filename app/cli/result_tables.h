// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>
#include <vector>

#include "pharmacology/curve_fit.h"
#include "session/session_result.h"

namespace chronodrome::cli {

/// The main results of a session, as tables for a terminal.
std::string session_text(const session::SessionResult& result);

/// Fits as a table for a terminal, with the meaning of each flag that occurs.
std::string fits_text(const std::vector<session::FittedCurve>& curves);

} // namespace chronodrome::cli
