// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <QPointF>
#include <QString>

#include "ui/story/story_figure.h"

namespace chronodrome::ui::story {

/// What stands under the pointer, in one line: time, value, bath concentration; over a plateau, an episode or
/// a hatched stretch its own words.
QString readoutText(const StoryFigure& figure, QPointF place);

/// The same in full, for a tooltip; empty where the line says all.
QString tooltipText(const StoryFigure& figure, QPointF place);

} // namespace chronodrome::ui::story
