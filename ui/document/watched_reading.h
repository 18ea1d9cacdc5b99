// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>
#include <vector>

#include "base/result.h"
#include "intake/recording_reader.h"
#include "session/analysis.h"

namespace chronodrome::ui {

/// As intake::read_recordings, but it tells how far it is and can be stopped within a block of bytes.
/// Requires: watch.cancelled is set. Errors: as there; cancelled.
Result<recording::Recording> readWatched(const std::vector<std::string>& paths,
                                         const intake::ReadSettings& settings, const session::Watch& watch);

} // namespace chronodrome::ui
