// Chronodrome, GPL-3.0-or-later.
#include "session/cursor.h"

#include <algorithm>
#include <array>
#include <cmath>

#include "base/number_text.h"

namespace chronodrome::session {
namespace {

using activation::Activation;

/// Sample nearest to `time`, if that lies within a run.
std::optional<std::size_t> sample_at(const recording::Channel& channel, Seconds time) {
  const auto& base = channel.time_base();
  const auto position = base.position_at(time - channel.skew);
  if (!position) return std::nullopt;
  const auto& run = base.runs()[base.run_of(static_cast<std::size_t>(*position))];
  return std::min(static_cast<std::size_t>(std::llround(*position)), run.first + run.count - 1);
}

std::optional<double> value_at(const recording::Channel& channel, Seconds time) {
  const auto sample = sample_at(channel, time);
  if (!sample) return std::nullopt;
  std::array<double, 1> value{};
  channel.read(*sample, value);
  return value[0];
}

/// Length of the interval that ends at mark `index`, unless a hole lies in it.
std::optional<Seconds> interval_to(const std::vector<rhythm::Interval>& intervals, std::size_t index) {
  const auto at =
      std::lower_bound(intervals.begin(), intervals.end(), index,
                       [](const rhythm::Interval& i, std::size_t wanted) { return i.index < wanted; });
  if (at == intervals.end() || at->index != index || at->flag == rhythm::IntervalFlag::gap)
    return std::nullopt;
  return at->length;
}

ChannelReading read_channel(const SessionResult& result, std::size_t c,
                            std::span<const recording::Channel> filtered, Seconds time) {
  const recording::Channel& channel = result.channels[c];
  ChannelReading reading;
  reading.channel = channel.label;
  reading.unit = channel.unit;
  if (const auto sample = sample_at(channel, time)) {
    reading.sample_time = channel.time_at(static_cast<double>(*sample));
    reading.raw = value_at(channel, *reading.sample_time);
    for (const auto& stretch : filtered) {
      if (stretch.label == channel.label) reading.filtered = value_at(stretch, *reading.sample_time);
    }
  }
  if (c >= result.activations.size()) return reading;
  const auto& marks = result.activations[c].marks;
  const auto index = nearest_mark(marks, time);
  if (!index) return reading;
  MarkReading mark{*index, marks[*index].time, marks[*index].origin, {}, {}};
  if (c < result.intervals.size()) {
    mark.interval_before = interval_to(result.intervals[c], *index);
    mark.interval_after = interval_to(result.intervals[c], *index + 1);
  }
  reading.nearest = mark;
  return reading;
}

double distance_to(const conduction::DelayRow& row, Seconds time) {
  double distance = HUGE_VAL;
  if (row.from_time) distance = std::abs((*row.from_time - time).value());
  if (row.to_time) distance = std::min(distance, std::abs((*row.to_time - time).value()));
  return distance;
}

PathwayReading read_pathway(const conduction::PathwayDelays& pathway, Seconds time) {
  PathwayReading reading;
  reading.pathway = pathway.pathway;
  reading.from = pathway.from;
  reading.to = pathway.to;
  const auto nearest =
      std::min_element(pathway.rows.begin(), pathway.rows.end(), [&](const auto& a, const auto& b) {
        return distance_to(a, time) < distance_to(b, time);
      });
  if (nearest == pathway.rows.end()) return reading;
  reading.from_time = nearest->from_time;
  reading.to_time = nearest->to_time;
  reading.delay = nearest->delay;
  reading.state = nearest->state;
  reading.is_ambiguous = nearest->ambiguous;
  return reading;
}

bool changes_bath(protocol::EventKind kind) {
  using protocol::EventKind;
  return kind == EventKind::addition || kind == EventKind::vehicle || kind == EventKind::antagonist ||
         kind == EventKind::washout;
}

/// Seconds since midnight of `2026-03-12T09:15:30.5`.
std::optional<Seconds> time_of_day(const std::string& clock) {
  const std::size_t t = clock.find('T');
  if (t == std::string::npos || clock.size() < t + 9) return std::nullopt;
  const auto hours = parse_number(clock.substr(t + 1, 2));
  const auto minutes = parse_number(clock.substr(t + 4, 2));
  const auto seconds = parse_number(clock.substr(t + 7));
  if (!hours || !minutes || !seconds) return std::nullopt;
  return Seconds(*hours * 3600.0 + *minutes * 60.0 + *seconds);
}

std::optional<double> step(const std::optional<double>& from, const std::optional<double>& to) {
  if (!from || !to) return std::nullopt;
  return *to - *from;
}

} // namespace

protocol::BathTimeline bath_of(const SessionResult& result) {
  protocol::BathConditions conditions;
  conditions.volume_ml = result.session.preparation.bath_volume_ml;
  conditions.arrival_delay = result.session.preparation.arrival_delay;
  auto bath = protocol::follow_bath(result.protocol, conditions);
  return bath.ok() ? std::move(bath).value() : protocol::BathTimeline{};
}

std::optional<std::size_t> nearest_mark(std::span<const Activation> marks, Seconds time) {
  if (marks.empty()) return std::nullopt;
  const auto after =
      std::partition_point(marks.begin(), marks.end(), [&](const Activation& m) { return m.time < time; });
  const auto at = static_cast<std::size_t>(after - marks.begin());
  if (at == marks.size()) return at - 1;
  if (at == 0) return at;
  return time - marks[at - 1].time <= marks[at].time - time ? at - 1 : at;
}

std::optional<Seconds> nearest_sample(const recording::Channel& channel, Seconds time) {
  const auto& base = channel.time_base();
  if (base.size() == 0) return std::nullopt;
  if (const auto inside = sample_at(channel, time)) return channel.time_at(static_cast<double>(*inside));
  const std::size_t after = base.first_at_or_after(time - channel.skew);
  if (after == 0) return channel.time_at(0.0);
  const Seconds before = channel.time_at(static_cast<double>(after - 1));
  if (after == base.size()) return before;
  const Seconds behind = channel.time_at(static_cast<double>(after));
  return time - before <= behind - time ? before : behind;
}

CursorReading read_cursor(const SessionResult& result, const protocol::BathTimeline& bath,
                          std::span<const recording::Channel> filtered, Seconds time) {
  CursorReading reading;
  reading.time = time;
  for (std::size_t c = 0; c < result.channels.size(); ++c)
    reading.channels.push_back(read_channel(result, c, filtered, time));
  for (const auto& pathway : result.pathways)
    reading.pathways.push_back(read_pathway(pathway, time));
  reading.bath = bath.present_at(time);
  for (const auto& event : bath.events()) {
    if (event.time > time) break;
    if (changes_bath(event.kind)) reading.last_event = event;
  }
  if (reading.last_event) reading.since_event = time - reading.last_event->time;
  if (result.recording && result.recording->clock_start) {
    if (const auto start = time_of_day(*result.recording->clock_start)) {
      constexpr double kDay = 86400.0;
      const double now = std::fmod((*start + time).value(), kDay);
      reading.clock = Seconds(now < 0.0 ? now + kDay : now);
    }
  }
  return reading;
}

CursorDifference difference_of(const CursorReading& reference, const CursorReading& second) {
  CursorDifference difference;
  difference.time = second.time - reference.time;
  const Seconds apart(std::abs(difference.time.value()));
  if (apart > Seconds(0.0)) difference.rate = rate_of(apart);
  for (std::size_t c = 0; c < std::min(reference.channels.size(), second.channels.size()); ++c) {
    const ChannelReading& from = reference.channels[c];
    const ChannelReading& to = second.channels[c];
    difference.channels.push_back(
        {to.channel, to.unit, step(from.raw, to.raw), step(from.filtered, to.filtered)});
  }
  return difference;
}

} // namespace chronodrome::session
