// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <QColor>
#include <QPainter>
#include <QRectF>

namespace chronodrome::ui::story {

/// Hatchings that stay apart in grey and in print.
enum class Pattern { none, solid, rising, falling, crossed, upright, level, squared };

/// Fills a rectangle with thin lines. Drawn as lines and not as a brush: the same on screens of any scale and
/// in vector files. Neighbouring rectangles join, for the lines lie on one raster.
void fillPattern(QPainter& painter, const QRectF& rect, Pattern pattern, const QColor& color,
                 double spacing = 6.0);

} // namespace chronodrome::ui::story
