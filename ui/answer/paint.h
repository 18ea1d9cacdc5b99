// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>

#include "ui/look/custom_plot.h"

#include "session/session_result.h"
#include "ui/look/theme.h"

namespace chronodrome::ui::answer {

/// Draws the concentration-response panel of one measure into `size` at the painter's origin: points, fit and
/// band of `curve`, the others of the measure fainter beside it. For the report and for exported figures.
void paintCurve(QCPPainter& painter, QSize size, const session::SessionResult& result, int curve,
                const std::string& measure, const look::Theme& theme);

} // namespace chronodrome::ui::answer
