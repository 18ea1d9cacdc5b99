// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <optional>
#include <string>
#include <vector>

#include "base/quantity.h"
#include "recording/recording.h"
#include "recording/time_base.h"
#include "session/session_result.h"

namespace chronodrome::session {

/// `flagged`: measured and used, but something about it is odd (premature, after a pause, low confidence, by
/// hand, ambiguous). `excluded`: the user or the drug log leaves it out.
enum class PointState { normal, flagged, excluded };

/// One beat (or one second of flow) of a measure.
struct TrendPoint {
  Seconds time;
  double value = 0.0; ///< in the trend's unit
  PointState state = PointState::normal;
  bool follows = false; ///< nothing is lost between the point before and this one: a line may join them
};

/// A stretch in which a measure cannot be read or is left out.
struct LostStretch {
  recording::Span span;
  bool is_excluded = false; ///< otherwise it cannot be read
  std::string reason;       ///< `gap`, `saturation` ..., or the user's own words
};

/// The course of one measure over the whole recording, beat by beat.
struct Trend {
  std::string measure;                           ///< `rate:RA`
  std::string unit;                              ///< as in responses
  recording::Role role = recording::Role::other; ///< of the channel; of a pathway, that of its `to`
  std::vector<TrendPoint> points;                ///< in order of time
  /// Pathways: activations of `from` without an answer, in order of time.
  std::vector<Seconds> blocked;
  std::vector<Seconds> edited;   ///< where marks were added, moved or deleted by hand, in order
  std::vector<LostStretch> lost; ///< in order of start; stretches of different channels may overlap
  /// A range for the axis that shows every sustained level and every response; low < high. A few beats far
  /// away do not stretch it: they lie beyond its ends.
  double low = 0.0;
  double high = 1.0;
};

/// Attempts over which the share conducted is counted: every steady n:m up to 4:3, and 6:5, then gives a
/// straight line.
inline constexpr std::size_t kShareAttempts = 12;

/// The course of a measure. Points are, by kind:
/// - `rate`, bpm: 60 over each interval, at its later beat; none where an interval crosses a gap.
/// - `delay`, ms, and `velocity`, m/s (distance over the delay's absolute value): conducted beats, at the
///   activation of `from`.
/// - `conducted`, 1: share over the last kShareAttempts attempts, at the last of them; counted anew after
///   whatever is lost. Attempts as in response::compute.
/// - `force`, `pressure`, `dpdt_max`: one a beat. `flow`: means over a second (reads the signal).
/// A measure that the session's channels and pathways do not hold gives a trend without points.
/// Axis: medians of nine consecutive points, and all response values, set the range; single extremes widen it
/// by at most a third, and it is never narrower than a tenth of the middle value.
Trend trend_of(const SessionResult& result, const std::string& measure);

/// What one pixel column shows of a trend.
struct TrendColumn {
  std::size_t count = 0;              ///< points that are not excluded
  double first = 0.0, last = 0.0;     ///< of those, in time
  double low = 0.0, high = 0.0;       ///< of those: true extremes
  bool follows = false;               ///< a line may come from the column before
  std::size_t excluded = 0;           ///< points that are excluded
  double excluded_low = 0.0;          ///< of those
  double excluded_high = 0.0;         ///< of those
  std::optional<double> flagged = {}; ///< the flagged value farthest from the middle of the axis
  std::size_t blocked = 0;            ///< activations without an answer
};

/// The trend from `start` to `end` in `columns` equal columns, end exclusive. No beat is lost: every column
/// holds the true extremes of its points. Requires: start < end, columns > 0. Cost: one look at each point of
/// the stretch.
std::vector<TrendColumn> columns_of(const Trend& trend, Seconds start, Seconds end, std::size_t columns);

/// The point next to `time`, at most `within` away; nothing: there is none. Excluded points count.
std::optional<TrendPoint> point_near(const Trend& trend, Seconds time, Seconds within);

} // namespace chronodrome::session
