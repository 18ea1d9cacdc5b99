// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <optional>
#include <span>
#include <string>
#include <vector>

#include "base/quantity.h"
#include "protocol/bath_timeline.h"
#include "recording/recording.h"
#include "session/session_result.h"

namespace chronodrome::session {

/// A mark beside a cursor.
struct MarkReading {
  std::size_t index = 0; ///< into the channel's marks
  Seconds time;
  activation::Origin origin = activation::Origin::detected;
  /// To the marks beside it; nothing at the ends, and where a stretch that cannot be read lies between.
  std::optional<Seconds> interval_before, interval_after;
};

struct ChannelReading {
  std::string channel, unit;
  std::optional<Seconds> sample_time;  ///< of the nearest sample; nothing in a gap
  std::optional<double> raw, filtered; ///< of that sample, in `unit`
  std::optional<MarkReading> nearest;
};

/// The row of a pathway that belongs to the activation nearest to the cursor.
struct PathwayReading {
  std::string pathway, from, to;
  std::optional<Seconds> from_time, to_time, delay; ///< nothing of it: the pathway has no row
  conduction::DelayState state = conduction::DelayState::unpaired;
  bool is_ambiguous = false;
};

/// What a cursor reads.
struct CursorReading {
  Seconds time;
  std::vector<ChannelReading> channels; ///< in the result's order
  std::vector<PathwayReading> pathways;
  std::vector<protocol::AgentLevel> bath;    ///< agents in the bath, as the tissue meets them
  std::optional<protocol::Event> last_event; ///< addition, vehicle, antagonist or washout, as logged
  std::optional<Seconds> since_event;        ///< from its logged time
  std::optional<Seconds> clock;              ///< since midnight; nothing where the file tells no time
};

/// The bath of a session; agent-free where the log cannot be followed (the analysis has said why).
protocol::BathTimeline bath_of(const SessionResult& result);

/// `bath`: bath_of() the same result. `filtered`: prepared stretches, found by label; a channel without one,
/// or a cursor outside of it, has no filtered value.
CursorReading read_cursor(const SessionResult& result, const protocol::BathTimeline& bath,
                          std::span<const recording::Channel> filtered, Seconds time);

/// From the reference cursor to the second one.
struct CursorDifference {
  struct Step {
    std::string channel, unit;
    std::optional<double> raw, filtered; ///< second minus reference
  };
  Seconds time;                       ///< second minus reference
  std::optional<BeatsPerMinute> rate; ///< of beats that far apart; nothing for no difference
  std::vector<Step> channels;
};

/// Requires: both of the same result.
CursorDifference difference_of(const CursorReading& reference, const CursorReading& second);

/// Index of the mark nearest to `time`; nothing without marks.
std::optional<std::size_t> nearest_mark(std::span<const activation::Activation> marks, Seconds time);

/// Time of the sample nearest to `time`; of the nearest run's edge in a gap. Nothing without samples.
std::optional<Seconds> nearest_sample(const recording::Channel& channel, Seconds time);

} // namespace chronodrome::session
