// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>
#include <vector>

#include "base/result.h"
#include "document/session_file.h"
#include "recording/recording.h"

namespace chronodrome::session {

struct ChannelSet {
  std::vector<recording::Channel> channels; ///< in the session's order
  std::vector<Warning> warnings;
};

/// Gives the signals of a recording the meaning that the session states: role, lead, unit, calibration,
/// polarity. The file's own unit wins over the session's, with a warning; a signal without a unit takes the
/// session's. Errors: bad_value (a source that the recording does not hold: the message lists those it does;
/// a calibration whose two raw readings are equal).
Result<ChannelSet> channels_of(const document::SessionFile& session,
                               const std::shared_ptr<const recording::Recording>& recording);

} // namespace chronodrome::session
