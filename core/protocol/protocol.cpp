// Chronodrome, GPL-3.0-or-later.
#include "protocol/protocol.h"

#include <array>

#include "base/number_text.h"

namespace chronodrome::protocol {
namespace {

struct NamedKind {
  EventKind kind;
  const char* name;
};

constexpr std::array<NamedKind, 9> kKinds = {{{EventKind::addition, "addition"},
                                              {EventKind::vehicle, "vehicle"},
                                              {EventKind::antagonist, "antagonist"},
                                              {EventKind::washout, "washout"},
                                              {EventKind::pacing_start, "pacing_start"},
                                              {EventKind::pacing_stop, "pacing_stop"},
                                              {EventKind::exclude_start, "exclude_start"},
                                              {EventKind::exclude_stop, "exclude_stop"},
                                              {EventKind::note, "note"}}};

} // namespace

std::string name_of(EventKind kind) {
  for (const auto& known : kKinds) {
    if (known.kind == kind) return known.name;
  }
  return "";
}

std::optional<EventKind> event_named(const std::string& name) {
  for (const auto& known : kKinds) {
    if (name == known.name) return known.kind;
  }
  return std::nullopt;
}

std::string event_names() {
  std::string names;
  for (const auto& known : kKinds)
    names += (names.empty() ? "" : ", ") + std::string(known.name);
  return names;
}

std::string agent_key(const std::string& agent) {
  std::string key;
  for (const char c : lower_case(trimmed(agent))) {
    const bool blank = c == ' ' || c == '\t';
    if (!blank) {
      key += c;
    } else if (key.back() != ' ') {
      key += ' ';
    }
  }
  return key;
}

} // namespace chronodrome::protocol
