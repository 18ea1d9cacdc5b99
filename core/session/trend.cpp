// Chronodrome, GPL-3.0-or-later.
#include "session/trend.h"

#include <algorithm>
#include <cmath>

#include "document/measure.h"
#include "response/window.h"
#include "session/flow_series.h"
#include "session/trend_range.h"
#include "session/trend_stretches.h"

namespace chronodrome::session {
namespace {

using activation::ChannelActivations;
using activation::Origin;
using conduction::DelayRow;
using conduction::DelayState;
using document::MeasureKind;
using recording::Span;

constexpr double kLowConfidence = 0.5; // as rhythm::IntervalSettings
constexpr std::size_t kBlockedBreaksLine =
    5; // as complete block: what lies on its two sides is not one course

std::optional<std::size_t> channel_named(const SessionResult& result, const std::string& label) {
  for (std::size_t i = 0; i < result.channels.size() && i < result.activations.size(); ++i) {
    if (result.channels[i].label == label) return i;
  }
  return std::nullopt;
}

/// Adds points in order of time and decides whether a line may join them.
class Builder {
public:
  explicit Builder(Trend& trend) : trend_(trend) {
    for (const auto& stretch : trend.lost) {
      any_.push_back(stretch.span);
      if (stretch.is_excluded) excluded_.push_back(stretch.span);
    }
    any_ = response::merged(std::move(any_));
    excluded_ = response::merged(std::move(excluded_));
  }

  [[nodiscard]] bool is_excluded(Seconds time) const { return response::meets(excluded_, time, time); }
  [[nodiscard]] bool is_lost_between(Seconds from, Seconds to) const {
    return response::meets(any_, from, to);
  }
  void break_line() { broken_ = true; }

  void add(Seconds time, double value, bool is_flagged, bool is_left_out = false) {
    TrendPoint point{time, value, is_flagged ? PointState::flagged : PointState::normal, false};
    if (is_left_out || is_excluded(time)) point.state = PointState::excluded;
    point.follows = !broken_ && !trend_.points.empty() && !is_lost_between(trend_.points.back().time, time);
    broken_ = false;
    trend_.points.push_back(point);
  }

private:
  Trend& trend_;
  std::vector<Span> any_, excluded_;
  bool broken_ = false;
};

void add_rate(const std::vector<rhythm::Interval>& intervals, Builder& builder) {
  using rhythm::IntervalFlag;
  for (const auto& interval : intervals) {
    if (interval.flag == IntervalFlag::gap || interval.length.value() <= 0.0) {
      builder.break_line();
      continue;
    }
    const bool left_out = interval.flag == IntervalFlag::excluded;
    builder.add(interval.time, rate_of(interval.length).value(), interval.flag != IntervalFlag::none,
                left_out);
  }
}

bool is_doubtful(const ChannelActivations& channel, std::optional<std::size_t> index) {
  if (!index || *index >= channel.marks.size()) return false;
  const auto& mark = channel.marks[*index];
  return mark.origin != Origin::detected || mark.confidence < kLowConfidence;
}

void add_beats(const ChannelActivations& channel, bool is_rise, Builder& builder) {
  for (std::size_t i = 0; i < channel.beats.size(); ++i) {
    const auto& beat = channel.beats[i];
    builder.add(beat.time, is_rise ? beat.rate_of_rise : beat.developed, is_doubtful(channel, i));
  }
}

void add_flow(const recording::Channel& channel, Builder& builder) {
  const response::FlowSeries series = second_means(channel);
  for (std::size_t i = 0; i < series.times.size(); ++i) {
    // Two means follow each other a second apart; a gap in the samples lies between others.
    if (i > 0 && series.times[i] - series.times[i - 1] > Seconds(1.5)) builder.break_line();
    builder.add(series.times[i], series.values[i], false);
  }
}

/// Rows that say something about an activation of `from`, by its time.
std::vector<const DelayRow*> attempts_of(const conduction::PathwayDelays& pathway) {
  std::vector<const DelayRow*> rows;
  for (const auto& row : pathway.rows) {
    if (row.from_time && row.state != DelayState::retrograde && !row.answer_unseen) rows.push_back(&row);
  }
  std::stable_sort(rows.begin(), rows.end(),
                   [](const DelayRow* a, const DelayRow* b) { return *a->from_time < *b->from_time; });
  return rows;
}

bool is_conducted(const DelayRow& row) {
  return row.state == DelayState::conducted && row.delay.has_value();
}

void add_delays(const std::vector<const DelayRow*>& rows, std::optional<double> distance_m,
                const ChannelActivations& from, const ChannelActivations& to, Builder& builder) {
  std::size_t blocked_in_a_row = 0;
  for (const auto* row : rows) {
    if (!is_conducted(*row)) {
      if (++blocked_in_a_row >= kBlockedBreaksLine) builder.break_line();
      continue;
    }
    blocked_in_a_row = 0;
    const bool flagged = row->ambiguous || is_doubtful(from, row->from) || is_doubtful(to, row->to);
    if (!distance_m) {
      builder.add(*row->from_time, in_milliseconds(*row->delay), flagged);
    } else if (row->delay->value() != 0.0) {
      builder.add(*row->from_time, *distance_m / std::abs(row->delay->value()), flagged);
    }
  }
}

void add_share(const std::vector<const DelayRow*>& rows, Builder& builder) {
  std::vector<char> run; // 1 conducted, since something was lost
  std::size_t conducted = 0;
  std::optional<Seconds> before;
  for (const auto* row : rows) {
    const Seconds time = *row->from_time;
    if (builder.is_excluded(time) || (before && builder.is_lost_between(*before, time))) {
      run.clear();
      conducted = 0;
      builder.break_line();
    }
    before = time;
    if (builder.is_excluded(time)) continue;
    run.push_back(is_conducted(*row) ? 1 : 0);
    conducted += static_cast<std::size_t>(run.back());
    if (run.size() > kShareAttempts)
      conducted -= static_cast<std::size_t>(run[run.size() - kShareAttempts - 1]);
    if (run.size() >= kShareAttempts)
      builder.add(time, static_cast<double>(conducted) / static_cast<double>(kShareAttempts), false);
  }
}

void fill_pathway(const SessionResult& result, const document::Measure& measure, Trend& trend) {
  trend.unit = measure.kind == MeasureKind::delay      ? "ms"
               : measure.kind == MeasureKind::velocity ? "m/s"
                                                       : "1";
  for (std::size_t i = 0; i < result.pathways.size() && i < result.session.pathways.size(); ++i) {
    const auto& pathway = result.pathways[i];
    if (pathway.pathway != measure.label) continue;
    const auto from = channel_named(result, pathway.from);
    const auto to = channel_named(result, pathway.to);
    if (!from || !to) return;
    trend.role = result.channels[*to].role;
    trend.lost = lost_stretches(result, {pathway.from, pathway.to});
    trend.edited = edited_times(result, {pathway.from, pathway.to});
    Builder builder(trend);
    const auto rows = attempts_of(pathway);
    for (const auto* row : rows) {
      if (row->state == DelayState::blocked && !builder.is_excluded(*row->from_time))
        trend.blocked.push_back(*row->from_time);
    }
    const auto& mm = result.session.pathways[i].distance_mm;
    if (measure.kind == MeasureKind::conducted) {
      add_share(rows, builder);
    } else if (measure.kind == MeasureKind::delay || mm) {
      const auto distance =
          measure.kind == MeasureKind::velocity ? std::optional(millimetres(*mm).value()) : std::nullopt;
      add_delays(rows, distance, result.activations[*from], result.activations[*to], builder);
    }
    return;
  }
}

std::string unit_of(MeasureKind kind, const std::string& unit) {
  switch (kind) {
  case MeasureKind::rate:
    return "bpm";
  case MeasureKind::force:
    return unit.empty() ? "mN" : unit;
  case MeasureKind::dpdt_max:
    return (unit.empty() ? "mmHg" : unit) + "/s";
  case MeasureKind::flow:
    return unit.empty() ? "mL/min" : unit;
  default:
    return unit.empty() ? "mmHg" : unit;
  }
}

void fill_channel(const SessionResult& result, const document::Measure& measure, Trend& trend) {
  const auto index = channel_named(result, measure.label);
  trend.unit = unit_of(measure.kind, index ? result.channels[*index].unit : "");
  if (!index) return;
  const recording::Channel& channel = result.channels[*index];
  trend.role = channel.role;
  trend.lost = lost_stretches(result, {channel.label});
  trend.edited = edited_times(result, {channel.label});
  Builder builder(trend);
  if (measure.kind == MeasureKind::flow) {
    if (channel.recording) add_flow(channel, builder);
  } else if (measure.kind != MeasureKind::rate) {
    add_beats(result.activations[*index], measure.kind == MeasureKind::dpdt_max, builder);
  } else if (*index < result.intervals.size()) {
    add_rate(result.intervals[*index], builder);
  }
}

} // namespace

Trend trend_of(const SessionResult& result, const std::string& measure) {
  Trend trend;
  trend.measure = measure;
  const auto named = document::measure_named(measure);
  if (!named) return trend;
  if (document::is_of_pathway(named->kind))
    fill_pathway(result, *named, trend);
  else
    fill_channel(result, *named, trend);
  const AxisRange range = named->kind == MeasureKind::conducted
                              ? AxisRange{-0.05, 1.05}
                              : axis_range(trend.points, response_values(result, measure));
  trend.low = range.low;
  trend.high = range.high;
  return trend;
}

} // namespace chronodrome::session
