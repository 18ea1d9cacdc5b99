// Chronodrome, GPL-3.0-or-later.
#include "ui/evidence/cursors.h"

#include <cmath>

#include "session/cursor.h"

namespace chronodrome::ui::evidence {

QString snapText(Snap snap) {
  switch (snap) {
  case Snap::marks:
    return QStringLiteral("cursor snaps to marks");
  case Snap::samples:
    return QStringLiteral("cursor snaps to samples");
  case Snap::off:
    break;
  }
  return QStringLiteral("cursor snaps to nothing");
}

Seconds snapped(const session::SessionResult& result, int row, Seconds time, Snap snap, Seconds reach) {
  if (snap == Snap::off) return time;
  const auto index = static_cast<std::size_t>(row);
  if (snap == Snap::marks && index < result.activations.size()) {
    const auto& marks = result.activations[index].marks;
    const auto mark = session::nearest_mark(marks, time);
    if (mark && std::abs((marks[*mark].time - time).value()) <= reach.value()) return marks[*mark].time;
  }
  return session::nearest_sample(result.channels[index], time).value_or(time);
}

} // namespace chronodrome::ui::evidence
