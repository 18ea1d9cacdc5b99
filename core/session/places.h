// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "base/quantity.h"
#include "session/session_result.h"

namespace chronodrome::session {

enum class LandmarkKind {
  beat,         ///< an activation
  flagged_beat, ///< one whose interval is premature, after a pause, or whose mark is doubtful
  edited_mark,  ///< added, moved or deleted by the user
  addition,     ///< addition, vehicle, antagonist or washout of the drug log
  rhythm,       ///< start of a rhythm episode
  gap           ///< of any channel's samples
};

/// A place in a recording that one may want to go to.
struct Landmark {
  Seconds time;
  Seconds end;         ///< equal to `time` for a moment
  std::string channel; ///< empty: of the whole recording
  std::string what;    ///< `premature`, `deleted`, `wenckebach`, agent ...; empty for a beat
};

/// All of a kind, by time. `channel`: beats, flags, edits and gaps of this channel alone; empty: of all.
std::vector<Landmark> landmarks(const SessionResult& result, LandmarkKind kind,
                                const std::string& channel = {});

/// The first that lies behind `time`, and the last before it, by more than 0.1 ms: from a place that was
/// gone to one comes to the next.
std::optional<Landmark> next_landmark(const SessionResult& result, LandmarkKind kind, Seconds time,
                                      const std::string& channel = {});
std::optional<Landmark> previous_landmark(const SessionResult& result, LandmarkKind kind, Seconds time,
                                          const std::string& channel = {});

} // namespace chronodrome::session
