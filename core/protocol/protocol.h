// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <optional>
#include <string>
#include <vector>

#include "base/quantity.h"
#include "base/result.h"

namespace chronodrome::protocol {

enum class EventKind {
  addition,
  vehicle,
  antagonist,
  washout,
  pacing_start,
  pacing_stop,
  exclude_start,
  exclude_stop,
  note
};
std::string name_of(EventKind kind);
std::optional<EventKind> event_named(const std::string& name);
/// All names, as a message lists them.
std::string event_names();

/// Two spellings are one agent if this is equal: ASCII letters in lower case, single blanks, none at the
/// ends.
std::string agent_key(const std::string& agent);

/// One line of the drug log.
struct Event {
  Seconds time; ///< on the recording's clock, as logged
  EventKind kind = EventKind::note;
  std::string agent;                  ///< as written; empty for a washout of everything
  std::optional<Molar> concentration; ///< final, in the bath, after this event
  std::string unit;                   ///< as written
  std::string note;
  std::optional<Molar> stock; ///< with `volume`: what was pipetted
  std::optional<double> volume_ml;
  std::optional<Seconds> arrival; ///< overrides the preparation's arrival delay
  std::optional<int> curve;       ///< overrides the counting of curves
  std::size_t line = 0;           ///< in its file; 0: from an annotation
};

/// The drug log in order of time (ties keep the file's order).
struct Protocol {
  std::string file; ///< empty: from annotations
  std::vector<Event> events;
  std::vector<Warning> warnings;
};

} // namespace chronodrome::protocol
