// Chronodrome, GPL-3.0-or-later.
#include "session/bath_course.h"

#include <algorithm>
#include <cmath>

namespace chronodrome::session {
namespace {

using protocol::BathTimeline;
using protocol::Event;
using protocol::EventKind;

bool is_of(const std::string& a, const std::string& b) {
  return protocol::agent_key(a) == protocol::agent_key(b);
}

/// When the log says that this change was made.
std::optional<Seconds> logged_time(const BathTimeline& timeline, const protocol::LevelChange& change) {
  if (change.by_dilution) return std::nullopt;
  for (const Event& event : timeline.events()) {
    if (is_of(event.agent, change.agent) && timeline.arrival_of(event) == change.time) return event.time;
  }
  return std::nullopt;
}

BathLane lane_of(const BathTimeline& timeline, const std::string& agent, Seconds end) {
  BathLane lane{agent, false, {}};
  for (const Event& event : timeline.events()) {
    if (event.kind == EventKind::antagonist && is_of(event.agent, agent)) lane.is_antagonist = true;
  }
  for (const auto& change : timeline.changes()) {
    if (!is_of(change.agent, agent) || change.time >= end) continue;
    if (!lane.steps.empty() && lane.steps.back().end > change.time) lane.steps.back().end = change.time;
    if (change.concentration.value() <= 0.0) continue;
    lane.steps.push_back({change.time, end, logged_time(timeline, change), change.concentration, 1.0});
  }
  // Two changes at one time: the later one stands.
  std::erase_if(lane.steps, [](const BathStep& step) { return step.end <= step.start; });
  return lane;
}

void set_heights(BathLane& lane) {
  if (lane.steps.empty()) return;
  const auto [low, high] =
      std::minmax_element(lane.steps.begin(), lane.steps.end(), [](const BathStep& a, const BathStep& b) {
        return a.concentration < b.concentration;
      });
  const double bottom = std::log10(low->concentration.value());
  const double range = std::log10(high->concentration.value()) - bottom;
  for (auto& step : lane.steps)
    step.height = range < 1e-9 ? 1.0 : (std::log10(step.concentration.value()) - bottom) / range;
}

void add_mark(BathCourse& course, const BathTimeline& timeline, const Event& event) {
  const bool is_note = event.kind == EventKind::note;
  if (!is_note && event.kind != EventKind::washout && event.kind != EventKind::vehicle) return;
  course.marks.push_back({event.time, is_note ? event.time : timeline.arrival_of(event), event.kind,
                          is_note ? event.note : event.agent});
}

bool changes_bath(const Event& event) {
  return event.kind == EventKind::addition || event.kind == EventKind::vehicle ||
         event.kind == EventKind::antagonist || event.kind == EventKind::washout;
}

} // namespace

BathCourse bath_course(const SessionResult& result) {
  BathCourse course;
  protocol::BathConditions conditions;
  conditions.volume_ml = result.session.preparation.bath_volume_ml;
  conditions.arrival_delay = result.session.preparation.arrival_delay;
  const auto timeline = protocol::follow_bath(result.protocol, conditions);
  if (!timeline || !result.recording) return course;
  for (const auto& agent : timeline->agents()) {
    BathLane lane = lane_of(*timeline, agent, result.recording->duration);
    set_heights(lane);
    if (!lane.steps.empty()) course.lanes.push_back(std::move(lane));
  }
  std::stable_partition(course.lanes.begin(), course.lanes.end(),
                        [](const BathLane& lane) { return !lane.is_antagonist; });
  for (const Event& event : timeline->events()) {
    add_mark(course, *timeline, event);
    if (changes_bath(event) && (course.additions.empty() || course.additions.back() < event.time))
      course.additions.push_back(event.time);
  }
  return course;
}

std::vector<protocol::AgentLevel> agents_at(const BathCourse& course, Seconds time) {
  std::vector<protocol::AgentLevel> present;
  for (const auto& lane : course.lanes) {
    for (const auto& step : lane.steps) {
      if (step.start <= time && time < step.end) present.push_back({lane.agent, step.concentration});
    }
  }
  return present;
}

} // namespace chronodrome::session
