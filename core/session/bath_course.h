// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "base/quantity.h"
#include "protocol/bath_timeline.h"
#include "protocol/protocol.h"
#include "session/session_result.h"

namespace chronodrome::session {

/// One concentration of an agent at the tissue, above 0.
struct BathStep {
  Seconds start;                 ///< arrival at the tissue
  Seconds end;                   ///< next change at the tissue, or the end of the recording
  std::optional<Seconds> logged; ///< when it was added, as the log says; nothing: by dilution
  Molar concentration;
  double height =
      1.0; ///< 0 to 1: where its logarithm lies between the agent's lowest and highest; 1 if alone
};

/// One agent over the whole recording. Between its steps there is none of it.
struct BathLane {
  std::string agent;           ///< as first written
  bool is_antagonist = false;  ///< the log calls it so
  std::vector<BathStep> steps; ///< in order of time, not overlapping
};

/// An event of the log that makes no step of its own.
struct BathMark {
  Seconds logged;
  Seconds arrival;
  protocol::EventKind kind = protocol::EventKind::washout; ///< washout, vehicle or note
  std::string text; ///< agent of a washout (empty: everything), agent of a vehicle, words of a note
};

/// What the tissue met, drawn from the log as it is.
struct BathCourse {
  std::vector<BathLane> lanes;    ///< antagonists last, otherwise in order of first appearance
  std::vector<BathMark> marks;    ///< in order of time
  std::vector<Seconds> additions; ///< as logged: additions, vehicles, antagonists, washouts; each time once
};

/// Errors of the log leave the course empty: analyse() reports them.
BathCourse bath_course(const SessionResult& result);

/// Agents above 0 at that time, in order of the lanes.
std::vector<protocol::AgentLevel> agents_at(const BathCourse& course, Seconds time);

} // namespace chronodrome::session
