// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "base/result.h"
#include "protocol/curve_plan.h"
#include "protocol/protocol.h"
#include "recording/recording.h"

namespace chronodrome::session {

/// A drug log that a new session could take, for review: nothing is accepted unseen.
struct ProtocolSource {
  std::string file; ///< `protocol.csv` beside the recording; empty: the recording's annotations
  protocol::Protocol protocol;
  std::optional<Error> error; ///< the file is there but cannot be read; `protocol` is empty
};

/// What there is: `protocol.csv` in the folder of `recording_path`, then annotations of the recording that
/// are events. Annotations without an event are no log.
std::vector<ProtocolSource> protocols_for(const recording::Recording& recording,
                                          const std::string& recording_path);

/// Every annotation as an event that the user may take: those that are events as they are; a text with an
/// agent and a concentration (`ACh 3 uM`) as an addition; any other as a note. Left out: events that `log`
/// holds already (same time, kind and agent), and empty texts.
std::vector<protocol::Event> proposed_events(const recording::Recording& recording,
                                             const protocol::Protocol& log);

/// A drug log looked at as a whole.
struct ProtocolCheck {
  protocol::CurvePlan plan;      ///< empty if `error`
  std::optional<Error> error;    ///< no plan: what and what to do
  std::vector<Warning> warnings; ///< doubts; `place.line` counts the log's events from 1
};

/// Curves, steps and every doubt about them. Events may stand in any order; lines in messages count them as
/// they stand, from 1.
ProtocolCheck check_protocol(const protocol::Protocol& protocol, const protocol::BathConditions& conditions,
                             Seconds recording_end);

} // namespace chronodrome::session
