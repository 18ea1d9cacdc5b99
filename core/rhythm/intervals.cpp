// Chronodrome, GPL-3.0-or-later.
#include "rhythm/intervals.h"

#include <algorithm>

#include "numerics/robust.h"

namespace chronodrome::rhythm {
namespace {

/// True if an ordered list of stretches meets (from, to); `cursor` moves on with rising times.
template <class Stretches, class SpanOf>
bool meets(const Stretches& stretches, std::size_t& cursor, Seconds from, Seconds to, SpanOf span_of) {
  while (cursor < stretches.size() && span_of(stretches[cursor]).end <= from)
    ++cursor;
  return cursor < stretches.size() && span_of(stretches[cursor]).start < to;
}

} // namespace

std::string name_of(IntervalFlag flag) {
  switch (flag) {
  case IntervalFlag::none:
    return "";
  case IntervalFlag::gap:
    return "gap";
  case IntervalFlag::excluded:
    return "excluded";
  case IntervalFlag::edited:
    return "edited";
  case IntervalFlag::low_confidence:
    return "low_confidence";
  case IntervalFlag::premature:
    return "premature";
  case IntervalFlag::after_pause:
    return "after_pause";
  }
  return "";
}

std::optional<Error> IntervalSettings::check() const {
  const auto wrong = [](const char* what, const char* remedy) {
    return Error{ErrorCode::bad_usage, "", {}, what, remedy};
  };
  if (!(premature_ratio > 0.0 && premature_ratio < 1.0))
    return wrong("intervals.premature_ratio must lie between 0 and 1", "leave it out for 0.85");
  if (!(low_confidence >= 0.0 && low_confidence <= 1.0))
    return wrong("intervals.low_confidence must lie from 0 to 1", "leave it out for 0.5");
  return std::nullopt;
}

std::vector<Interval> intervals_of(const activation::ChannelActivations& channel,
                                   std::span<const recording::Span> excluded,
                                   const IntervalSettings& settings) {
  std::vector<Interval> intervals;
  std::vector<double> running; // the lengths before, without gaps and exclusions
  std::size_t bad = 0;
  std::size_t out = 0;
  const auto edited = [](const activation::Activation& mark) {
    return mark.origin != activation::Origin::detected;
  };
  for (std::size_t i = 1; i < channel.marks.size(); ++i) {
    const auto& before = channel.marks[i - 1];
    const auto& mark = channel.marks[i];
    Interval interval{i, mark.time, mark.time - before.time, IntervalFlag::none};
    const std::size_t known = std::min(running.size(), settings.running_beats);
    const double cycle = known < 3 ? 0.0 : numerics::median(std::span(running).last(known));
    if (meets(channel.unreadable, bad, before.time, mark.time, [](const auto& u) { return u.span; })) {
      interval.flag = IntervalFlag::gap;
    } else if (meets(excluded, out, before.time, mark.time, [](const auto& span) { return span; })) {
      interval.flag = IntervalFlag::excluded;
    } else {
      if (edited(before) || edited(mark)) {
        interval.flag = IntervalFlag::edited;
      } else if (std::min(before.confidence, mark.confidence) < settings.low_confidence) {
        interval.flag = IntervalFlag::low_confidence;
      } else if (cycle > 0.0 && interval.length.value() < settings.premature_ratio * cycle) {
        interval.flag = IntervalFlag::premature;
      } else if (cycle > 0.0 && interval.length.value() > settings.pause_ratio * cycle) {
        interval.flag = IntervalFlag::after_pause;
      }
      running.push_back(interval.length.value());
    }
    intervals.push_back(interval);
  }
  return intervals;
}

} // namespace chronodrome::rhythm
