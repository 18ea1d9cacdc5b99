// Chronodrome, GPL-3.0-or-later.
#pragma once

#include "ui/evidence/frame.h"

#include "conduction/conduction.h"

namespace chronodrome::ui::evidence {

/// The way of the impulse of one pathway, between the rows of its electrodes.
struct DelayPlace {
  TimeFrame time;
  double from_edge = 0.0; ///< edge of the `from` row that faces the other one, in pixels
  double to_edge = 0.0;   ///< edge of the `to` row that faces it
  double strip_top = 0.0; ///< free strip beside the upper row, where the numbers stand
  double strip_height = 0.0;
};

/// A line for each beat from mark to mark: its slope is the delay. Blocked beats end at a bar; retrograde
/// ones run the other way. Numbers in ms where they find room in `room`. Nothing where beats are too near.
void drawDelays(QCPPainter& painter, const DelayPlace& place, const conduction::PathwayDelays& pathway,
                const look::Theme& theme, StripRoom& room);

} // namespace chronodrome::ui::evidence
