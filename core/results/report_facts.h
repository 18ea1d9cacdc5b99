// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <optional>
#include <string>
#include <vector>

#include "base/quantity.h"
#include "session/session_result.h"

// What a report states beside the tables: short sums of them, each from the rows that the tables hold.
namespace chronodrome::results {

/// A short stretch of a plateau's window, to show typical beats.
struct Excerpt {
  int curve = 0;
  Molar concentration;
  Seconds start, end;               ///< of the excerpt
  Seconds window_start, window_end; ///< of the plateau it is taken from
};

/// For each curve the control, the middle and the highest concentration (all steps where there are three or
/// fewer), each from the middle of the plateau's window of the curve's first measure. All excerpts of a curve
/// have one length, so that shapes can be compared: three cycles of the slowest of them, 0.2 to 6 s, and
/// never longer than the shortest window. Steps without a window are passed over.
std::vector<Excerpt> typical_beats(const session::SessionResult& result);

/// One channel over the whole recording.
struct ChannelQuality {
  std::string channel;
  std::size_t activations = 0;
  std::size_t low_confidence = 0;
  std::optional<double> signal_to_noise; ///< median over the windows with beats; nothing: no beats
  std::optional<double> lowest_index;    ///< of all windows, 0 to 100
  Seconds lowest_start;                  ///< where
  double clipped_share = 0.0;            ///< of the time, 0 to 1
  double unreadable_share = 0.0;
  double mains_hz = 0.0;            ///< removed; 0: none
  std::optional<double> mains_rms;  ///< of what was removed, median over windows, in the channel's unit
  std::optional<Seconds> timing_sd; ///< of one activation; nothing: no activation
};

/// Parallel to `result.channels`.
std::vector<ChannelQuality> channel_qualities(const session::SessionResult& result);

/// All episodes of one kind of rhythm.
struct RhythmSum {
  std::string kind;
  std::size_t episodes = 0;
  Seconds total; ///< overlapping episodes count twice
  Seconds longest;
  Seconds first_start; ///< of the first episode
};

/// In order of first appearance.
std::vector<RhythmSum> rhythm_sums(const session::SessionResult& result);

} // namespace chronodrome::results
