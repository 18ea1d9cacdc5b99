// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <optional>
#include <span>
#include <vector>

#include "base/quantity.h"
#include "recording/recording.h"

namespace chronodrome::recording {

/// A part of one run, ready to be drawn: its samples, or the true minimum and maximum of each column.
struct TracePiece {
  bool is_samples = false;
  Seconds start;              ///< of the first point: a sample's time, or the left edge of a column
  Seconds step;               ///< from one point to the next
  std::vector<MinMax> points; ///< in the channel's unit; min equals max for samples

  /// Where point `i` is drawn: at its sample, or in the middle of its column.
  [[nodiscard]] Seconds time_of(std::size_t i) const {
    return start + step * (static_cast<double>(i) + (is_samples ? 0.0 : 0.5));
  }
};

/// What is drawn of a channel from `from` until `to` on a width of `columns` pixels: a piece for each run, so
/// that gaps stay open, with the sample before and the one behind the stretch, so that lines reach its edges.
/// Below two samples a column the samples themselves, at most about two points a column; above, columns that
/// count from the signal's first sample: a trace that is moved sideways does not flicker, and a spike of one
/// sample is seen at any width. Requires: to > from, columns > 0, the signal has an envelope.
std::vector<TracePiece> trace_of(const Channel& channel, Seconds from, Seconds to, std::size_t columns);

/// Smallest and largest value of the pieces; nothing if they hold no point.
std::optional<MinMax> range_of(std::span<const TracePiece> pieces);

/// Round limits of an axis about `data`, with a little air. Limits `before` are kept as long as the data lie
/// in them and fill two fifths: an axis that moves with every beat cannot be read.
MinMax settled_limits(const MinMax& data, const std::optional<MinMax>& before);

} // namespace chronodrome::recording
