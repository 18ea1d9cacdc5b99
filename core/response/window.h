// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <span>
#include <vector>

#include "protocol/curve_plan.h"
#include "recording/time_base.h"
#include "response/response.h"

namespace chronodrome::response {

/// Where in a step its value is read.
struct Window {
  recording::Span span;
  Seconds wanted;   ///< as long as it should be
  bool cut = false; ///< shorter than wanted: the step is too short
};

/// `beats`: times in seconds, rising. A step without length has a window without length.
Window window_of(const protocol::Step& step, std::span<const double> beats, const Settings& settings);

/// The part of `times` (rising) in [span.start, span.end).
std::span<const double> within(std::span<const double> times, const recording::Span& span);

/// Stretches in order of time without overlaps, from stretches in any order.
std::vector<recording::Span> merged(std::vector<recording::Span> spans);

/// How much of [from, to) the stretches (merged) cover.
Seconds covered(const std::vector<recording::Span>& spans, Seconds from, Seconds to);

/// True if a stretch (merged) meets [from, to].
bool meets(const std::vector<recording::Span>& spans, Seconds from, Seconds to);

} // namespace chronodrome::response
