// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <span>
#include <string>

#include "recording/recording.h"
#include "session/inspection.h"

namespace chronodrome::results {

/// What `inspect --json` prints (`resources/formats/results.md`). `looks` parallel to the recording's
/// signals.
std::string inspection_json(const recording::Recording& recording,
                            std::span<const session::SignalLook> looks);

} // namespace chronodrome::results
