// Chronodrome, GPL-3.0-or-later.
#include "intake/protocol_order.h"

#include <algorithm>

#include "base/number_text.h"
#include "protocol/ladder.h"

namespace chronodrome::intake {
namespace {

using protocol::Event;
using protocol::EventKind;

Place place_of(const Event& event) {
  return event.line > 0 ? Place::at_line(event.line) : Place{};
}

bool is_of_bath(const Event& event) {
  return event.kind == EventKind::addition || event.kind == EventKind::vehicle ||
         event.kind == EventKind::antagonist || event.kind == EventKind::washout;
}

} // namespace

void put_in_order(protocol::Protocol& protocol) {
  auto& events = protocol.events;
  const auto earlier = [](const Event& a, const Event& b) { return a.time < b.time; };
  const auto late = std::is_sorted_until(events.begin(), events.end(), earlier);
  if (late != events.end()) {
    protocol.warnings.push_back({protocol.file, place_of(*late),
                                 "the times are not in order: " + number_text(late->time.value()) +
                                     " s follows " + number_text((late - 1)->time.value()) + " s",
                                 "the rows are put in order; check the times"});
    std::stable_sort(events.begin(), events.end(), earlier);
  }
  const Event* before = nullptr;
  for (const Event& event : events) {
    if (!is_of_bath(event)) continue;
    if (before != nullptr && before->time == event.time) {
      protocol.warnings.push_back({protocol.file, place_of(event),
                                   name_of(event.kind) + " at " + number_text(event.time.value()) +
                                       " s, the same time as the " + name_of(before->kind) +
                                       (before->line > 0 ? " of line " + std::to_string(before->line) : ""),
                                   "check the times; the rows are taken in the order in which they stand"});
    }
    before = &event;
  }
  const auto doubts = protocol::ladder_warnings(events, events, protocol::LadderPart::stated, protocol.file);
  protocol.warnings.insert(protocol.warnings.end(), doubts.begin(), doubts.end());
}

} // namespace chronodrome::intake
