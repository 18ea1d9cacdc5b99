// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <optional>
#include <string>
#include <vector>

#include "base/quantity.h"
#include "recording/time_base.h"

namespace chronodrome::conduction {

enum class DelayState { conducted, blocked, retrograde, unpaired };
std::string name_of(DelayState state);

/// One row of a pathway: each activation of `from` and of `to` stands in exactly one.
struct DelayRow {
  std::optional<std::size_t> from; ///< index into the marks of the from channel
  std::optional<std::size_t> to;   ///< index into the marks of the to channel
  std::optional<Seconds> from_time;
  std::optional<Seconds> to_time;
  std::optional<Seconds> delay; ///< to - from; negative for retrograde
  DelayState state = DelayState::unpaired;
  bool ambiguous = false; ///< the times alone do not say which `from` caused this `to`
  /// Blocked only as far as one can see: an answer could lie where `to` cannot be read, or behind the end of
  /// the recording. Such a row is no evidence of block.
  bool answer_unseen = false;
};

/// Conduction from one electrode to another. Rows in order of their earliest time.
struct PathwayDelays {
  std::string pathway, from, to;
  bool within_chamber = false; ///< signed nearest pairing instead of cause and effect
  Seconds control_delay;       ///< what the pairing took as the usual delay
  std::vector<DelayRow> rows;
  std::vector<recording::Span> dissociated; ///< stretches in which the phase test found no conduction
};

} // namespace chronodrome::conduction
