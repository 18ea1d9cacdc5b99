// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>

#include "ui/evidence/frame.h"

namespace chronodrome::ui::evidence {

class EvidenceFigure;

/// What lies over the traces and moves with the hand: cursors, the chosen mark, a mark on its way, a
/// selected stretch.
struct Overlay {
  struct Mark {
    int row = 0;
    Seconds time;
  };
  struct Move {
    int row = 0;
    Seconds from, to;
  };
  struct Selection {
    int row = -1; ///< -1: all rows
    Seconds start, end;
  };
  std::optional<Seconds> reference, second;
  bool is_pinned = false; ///< the second cursor stays where it was placed
  int active_row = 0;
  std::optional<Mark> chosen;
  std::optional<Move> move;
  std::optional<Selection> selection;
};

void drawOverlay(QCPPainter& painter, const EvidenceFigure& figure);

} // namespace chronodrome::ui::evidence
