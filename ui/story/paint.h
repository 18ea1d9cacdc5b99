// Chronodrome, GPL-3.0-or-later.
#pragma once

#include "ui/look/custom_plot.h"

#include "session/session_result.h"
#include "ui/look/theme.h"

namespace chronodrome::ui::story {

/// Draws the story of a session (bath, trends with plateaus, rhythm) into `size` at the painter's origin, as
/// the pane shows it: for the report and for exported figures. Vector output where the device is vector.
void paintStory(QCPPainter& painter, QSize size, const session::SessionResult& result,
                const look::Theme& theme);

} // namespace chronodrome::ui::story
