// Chronodrome, GPL-3.0-or-later.
#include "response/window.h"

#include <algorithm>

#include "numerics/robust.h"

namespace chronodrome::response {
namespace {

using recording::Span;

/// Intervals whose median is the cycle at the end of a step.
constexpr std::size_t kCycleIntervals = 20;

double cycle_at_end(std::span<const double> beats) {
  const std::size_t known = std::min(beats.size(), kCycleIntervals + 1);
  if (known < 2) return 0.0;
  const auto last = beats.last(known);
  std::vector<double> intervals;
  for (std::size_t i = 1; i < last.size(); ++i)
    intervals.push_back(last[i] - last[i - 1]);
  return numerics::median(intervals);
}

/// First of the stretches that ends after `time`.
auto first_after(const std::vector<Span>& spans, Seconds time) {
  return std::partition_point(spans.begin(), spans.end(), [time](const Span& s) { return s.end <= time; });
}

} // namespace

std::span<const double> within(std::span<const double> times, const Span& span) {
  const auto first = std::lower_bound(times.begin(), times.end(), span.start.value());
  const auto last = std::lower_bound(first, times.end(), span.end.value());
  return times.subspan(static_cast<std::size_t>(first - times.begin()),
                       static_cast<std::size_t>(last - first));
}

Window window_of(const protocol::Step& step, std::span<const double> beats, const Settings& settings) {
  const double cycle = cycle_at_end(within(beats, {step.start, step.end}));
  Window window;
  window.wanted = std::max(settings.window, Seconds(settings.window_beats * cycle));
  const Seconds most = (step.end - step.start) * settings.max_share;
  window.cut = most < window.wanted;
  window.span = {step.end - std::min(most, window.wanted), step.end};
  return window;
}

std::vector<Span> merged(std::vector<Span> spans) {
  std::sort(spans.begin(), spans.end(), [](const Span& a, const Span& b) { return a.start < b.start; });
  std::vector<Span> joined;
  for (const Span& span : spans) {
    if (span.end <= span.start) continue;
    if (!joined.empty() && span.start <= joined.back().end) {
      joined.back().end = std::max(joined.back().end, span.end);
    } else {
      joined.push_back(span);
    }
  }
  return joined;
}

Seconds covered(const std::vector<Span>& spans, Seconds from, Seconds to) {
  Seconds sum;
  for (auto it = first_after(spans, from); it != spans.end() && it->start < to; ++it)
    sum += std::min(it->end, to) - std::max(it->start, from);
  return sum;
}

bool meets(const std::vector<Span>& spans, Seconds from, Seconds to) {
  const auto it = first_after(spans, from);
  return it != spans.end() && it->start <= to;
}

} // namespace chronodrome::response
