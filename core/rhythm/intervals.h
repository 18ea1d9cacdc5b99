// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <span>
#include <string>
#include <vector>

#include "activation/activation.h"
#include "base/quantity.h"
#include "base/result.h"
#include "recording/time_base.h"

namespace chronodrome::rhythm {

/// What is special about an interval; the first that applies, in this order.
enum class IntervalFlag { none, gap, excluded, edited, low_confidence, premature, after_pause };
std::string name_of(IntervalFlag flag);

/// From one activation of a channel to the next; belongs to the later one.
struct Interval {
  std::size_t index = 0; ///< of the later mark
  Seconds time;          ///< of the later mark
  Seconds length;
  IntervalFlag flag = IntervalFlag::none;
};

struct IntervalSettings {
  double premature_ratio = 0.85; ///< shorter than this share of the running cycle
  double pause_ratio = 1.7;      ///< longer than this many running cycles
  std::size_t running_beats = 8; ///< intervals before, whose median is the running cycle
  double low_confidence = 0.5;   ///< a mark below this

  /// Errors: bad_usage, naming the setting.
  [[nodiscard]] std::optional<Error> check() const;
};

/// All intervals of a channel, one a mark from the second on. An interval that crosses a stretch that cannot
/// be read is flagged `gap` and is no interval: nothing may be computed from its length.
std::vector<Interval> intervals_of(const activation::ChannelActivations& channel,
                                   std::span<const recording::Span> excluded,
                                   const IntervalSettings& settings);

} // namespace chronodrome::rhythm
