// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>

#include <QString>
#include <QStringList>
#include <QVector>

#include "session/cursor.h"

namespace chronodrome::ui::evidence {

/// What the cursors read, as a small table of text: a column for the times, one a pathway, one for the bath,
/// one a channel. Rows of different lengths do not occur.
struct ReadOut {
  QStringList heads;
  QVector<QStringList> rows;

  /// Lines with tabs between the cells, for the clipboard.
  [[nodiscard]] QString text() const;
};

/// `reference` and `second`: either may be missing; without both the table has heads alone.
ReadOut readOutOf(const std::optional<session::CursorReading>& reference,
                  const std::optional<session::CursorReading>& second);

} // namespace chronodrome::ui::evidence
