// Chronodrome, GPL-3.0-or-later.
#include "session/protocol_guess.h"

#include <algorithm>
#include <filesystem>

#include "base/number_text.h"
#include "intake/annotation_protocol.h"
#include "intake/protocol_reader.h"
#include "protocol/ladder.h"

namespace fs = std::filesystem;

namespace chronodrome::session {
namespace {

/// As an event if it is one, as an addition if it names an agent and a concentration, else as a note.
protocol::Event event_of(const recording::Annotation& annotation) {
  for (const std::string before : {"", "addition "}) {
    auto read = intake::protocol_from_annotations({{annotation.onset, {}, before + annotation.text}}, "");
    if (!read.events.empty()) return read.events.front();
  }
  protocol::Event note;
  note.time = annotation.onset;
  note.note = std::string(trimmed(annotation.text));
  return note;
}

} // namespace

std::vector<ProtocolSource> protocols_for(const recording::Recording& recording,
                                          const std::string& recording_path) {
  std::vector<ProtocolSource> found;
  const fs::path beside = fs::path(recording_path).parent_path() / "protocol.csv";
  std::error_code unreadable;
  if (fs::is_regular_file(beside, unreadable) && beside != fs::path(recording_path)) {
    ProtocolSource source;
    source.file = "protocol.csv";
    auto read = intake::read_protocol(beside.string());
    if (read) {
      source.protocol = std::move(read).value();
    } else {
      source.error = read.error();
    }
    found.push_back(std::move(source));
  }
  auto annotated = intake::protocol_from_annotations(recording.annotations, recording_path);
  if (!annotated.events.empty()) found.push_back({"", std::move(annotated), std::nullopt});
  return found;
}

std::vector<protocol::Event> proposed_events(const recording::Recording& recording,
                                             const protocol::Protocol& log) {
  std::vector<protocol::Event> proposed;
  const auto in_log = [&](const protocol::Event& event) {
    return std::any_of(log.events.begin(), log.events.end(), [&](const protocol::Event& known) {
      return known.time == event.time && known.kind == event.kind &&
             protocol::agent_key(known.agent) == protocol::agent_key(event.agent) && known.note == event.note;
    });
  };
  for (const auto& annotation : recording.annotations) {
    if (trimmed(annotation.text).empty()) continue;
    auto event = event_of(annotation);
    if (!in_log(event)) proposed.push_back(std::move(event));
  }
  return proposed;
}

ProtocolCheck check_protocol(const protocol::Protocol& protocol, const protocol::BathConditions& conditions,
                             Seconds recording_end) {
  protocol::Protocol numbered = protocol;
  for (std::size_t i = 0; i < numbered.events.size(); ++i)
    numbered.events[i].line = i + 1;
  std::stable_sort(numbered.events.begin(), numbered.events.end(),
                   [](const auto& a, const auto& b) { return a.time < b.time; });
  ProtocolCheck check;
  check.warnings = protocol::ladder_warnings(numbered.events, numbered.events, protocol::LadderPart::stated,
                                             numbered.file);
  auto plan = protocol::plan_curves(numbered, conditions, recording_end);
  if (!plan) {
    check.error = plan.error();
    return check;
  }
  check.plan = std::move(plan).value();
  check.warnings.insert(check.warnings.end(), check.plan.warnings.begin(), check.plan.warnings.end());
  return check;
}

} // namespace chronodrome::session
