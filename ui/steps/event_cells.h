// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <array>
#include <optional>
#include <string>
#include <vector>

#include <QString>

#include "protocol/protocol.h"

namespace chronodrome::ui::steps {

enum EventColumn {
  kTime,
  kEvent,
  kAgent,
  kConcentration,
  kUnitOf,
  kNote,
  kStock,
  kVolume,
  kArrival,
  kCurve,
  kEventColumns
};
/// Columns from kStock on are shown on demand.
inline constexpr int kFirstOptionalColumn = kStock;

/// One row of the drug log as it is typed.
using EventCells = std::array<QString, kEventColumns>;

/// How times are typed and shown: from the start of the recording, or by the clock of the day.
struct EventClock {
  bool of_day = false;
  std::string start; ///< of the recording, ISO 8601; empty: not known
};

QString eventHeading(int column);
QString eventWord(protocol::EventKind kind);
EventCells cellsOf(const protocol::Event& event, const EventClock& clock);

/// The event that the cells say, or what is still missing or wrong, in words.
struct EventReading {
  std::optional<protocol::Event> event;
  QString problem;
  int column = kTime; ///< where the problem lies
};
EventReading readCells(const EventCells& cells, const EventClock& clock);

/// All that a log says of the two is the same.
bool sameEvent(const protocol::Event& a, const protocol::Event& b);
/// `addition carbachol 30 nM`: as a step of the history names it.
QString eventText(const protocol::Event& event);

/// Rows pasted from a spreadsheet: columns by their names if the first row has names, else in the order of
/// the table. Divided by tabs, or semicolons, or commas.
std::vector<EventCells> pastedRows(const QString& text);

} // namespace chronodrome::ui::steps
