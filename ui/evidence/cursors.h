// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>

#include <QString>

#include "base/quantity.h"
#include "session/session_result.h"

namespace chronodrome::ui::evidence {

/// What a cursor is drawn to.
enum class Snap { marks, samples, off };
QString snapText(Snap snap); ///< `cursor snaps to marks`

/// The two cursors. The second follows the pointer until it is placed.
struct Cursors {
  enum class Which { reference, second };
  std::optional<Seconds> reference, second;
  bool is_pinned = false;      ///< the second was placed and stays
  Which moved = Which::second; ///< the one that was placed last: keys move it
  Snap snap = Snap::marks;

  /// A cursor was placed: arrow keys step it.
  [[nodiscard]] bool isActive() const { return is_pinned || (moved == Which::reference && reference); }
};

/// Where a cursor at `time` on channel `row` comes to lie. Marks: the nearest of the channel within `reach`,
/// else the nearest sample. Requires: row is a channel of the result.
Seconds snapped(const session::SessionResult& result, int row, Seconds time, Snap snap, Seconds reach);

} // namespace chronodrome::ui::evidence
