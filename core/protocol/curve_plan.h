// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <string>
#include <vector>

#include "base/quantity.h"
#include "base/result.h"
#include "protocol/bath_timeline.h"
#include "protocol/protocol.h"

namespace chronodrome::protocol {

/// A stretch of time, end exclusive.
struct Stretch {
  Seconds start;
  Seconds end;
};

/// One bath concentration of a curve's agent, from its arrival at the tissue to the next change. A stretch
/// without length (start = end): the step was over before the agent arrived, or there is no control before
/// it.
struct Step {
  Molar concentration; ///< of the curve's agent; 0: the control just before its first addition
  Seconds start;
  Seconds end;
  std::size_t line = 0; ///< of the addition in its file; 0: from an annotation
};

struct Curve {
  int number = 0;         ///< from 1, in time, unless the log's column `curve` says otherwise
  std::string agent;      ///< as first written
  std::string background; ///< `atropine 1e-07 M`, by name, ` + ` between; empty: no other agent
  std::vector<AgentLevel> background_agents; ///< the same as numbers: as set, before thinning
  std::vector<Step> steps;                   ///< in order of time; the control first
};

struct CurvePlan {
  std::vector<Curve> curves;     ///< by number
  std::vector<Stretch> excluded; ///< exclude_start to exclude_stop, in order, not overlapping
  std::vector<Stretch> paced;    ///< pacing_start to pacing_stop, in order, not overlapping
  std::vector<Warning> warnings; ///< those of the bath included
};

/// Curves and steps of a drug log, by the rules of `resources/formats/protocol.md`.
///
/// An addition opens a curve if none runs, if its agent differs from the running curve's, or if the
/// background (what the other agents were set to; thinning is no change) has changed. A washout of
/// everything, or of the curve's agent, ends the curve. A step runs from the arrival of its addition to the
/// next logged addition, vehicle, antagonist, washout or pacing_start, or to the end. The control runs from
/// the arrival of the last event before the curve's first addition that changes bath or pacing, to that
/// addition; that of a curve whose agent was already in the bath has no length, and a warning says so. An
/// addition of 0 is taken as vehicle, or as washout of an agent that is there, with a warning. Requires:
/// events in order of time. Errors: those of follow_bath(); bad_value (column `curve` gives one number to two
/// agents).
Result<CurvePlan> plan_curves(const Protocol& protocol, const BathConditions& conditions,
                              Seconds recording_end);

} // namespace chronodrome::protocol
