// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <span>

#include "ui/evidence/frame.h"

#include "recording/trace.h"

namespace chronodrome::ui::evidence {

/// A trace as lines, at most two points a column; samples more than 4 pixels apart as dots too.
void drawTrace(QCPPainter& painter, const RowFrame& row, std::span<const recording::TracePiece> pieces,
               const QColor& color);

} // namespace chronodrome::ui::evidence
