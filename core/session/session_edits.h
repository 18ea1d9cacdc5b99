// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>
#include <optional>
#include <string>

#include "base/result.h"
#include "document/session_file.h"
#include "recording/recording.h"

// Changes of what a session says, with all that hangs on them. Each takes a session and returns another.
namespace chronodrome::session {

/// Another entry for the channel that is now called `label`: a new label is carried into pathways, measures,
/// corrections and placed windows; a lead goes where the role has none; measures that the new role does not
/// allow are dropped. Errors: bad_value (a label that is empty or taken, no such channel).
Result<document::SessionFile> with_channel_changed(document::SessionFile session, const std::string& label,
                                                   const document::ChannelEntry& entry);

/// One more channel, in the order of the recording's signals, its label made unique.
document::SessionFile with_channel_added(document::SessionFile session, document::ChannelEntry entry,
                                         const recording::Recording& recording);

/// Without the channel, its pathways and their measures. Errors: bad_value (the last channel; a channel with
/// corrections, which would be lost).
Result<document::SessionFile> with_channel_removed(document::SessionFile session, const std::string& label);

/// Another entry for pathway number `index`, or one more at the end (index = number of pathways); a new label
/// is carried into measures. Errors: bad_value (a label empty or taken, ends that are no channels or the
/// same, a distance that is not above 0).
Result<document::SessionFile> with_pathway_set(document::SessionFile session, std::size_t index,
                                               const document::PathwayEntry& entry);

/// Without the pathway and its measures. Requires: index < number of pathways.
document::SessionFile with_pathway_removed(document::SessionFile session, std::size_t index);

/// With the measure (at its place in the order of possible_measures()) or without it.
document::SessionFile with_measure(document::SessionFile session, const std::string& measure, bool wanted);

} // namespace chronodrome::session
