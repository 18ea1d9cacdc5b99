// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>
#include <vector>

#include "response/response.h"
#include "session/session_result.h"

namespace chronodrome::session {

/// What the response stage works on, for the given measures: everything but them is that of `result`, to
/// which the inputs point. Requires: the stages up to the pathways are done, and `result` outlives the
/// inputs.
response::Inputs response_inputs(const SessionResult& result, const std::vector<std::string>& measures);

} // namespace chronodrome::session
