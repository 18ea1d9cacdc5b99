// Chronodrome, GPL-3.0-or-later.
#pragma once

#include "ui/look/custom_plot.h"

#include "session/session_result.h"
#include "ui/look/theme.h"

namespace chronodrome::ui::evidence {

/// Draws the traces of all channels over [start, end] with activation marks, one row a channel on one time
/// axis, into `size` at the painter's origin: for the report and for exported figures.
void paintTraces(QCPPainter& painter, QSize size, const session::SessionResult& result, Seconds start,
                 Seconds end, const look::Theme& theme);

} // namespace chronodrome::ui::evidence
