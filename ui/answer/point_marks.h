// Chronodrome, GPL-3.0-or-later.
#pragma once

#include "ui/look/custom_plot.h"

#include "session/curve_view.h"
#include "ui/look/theme.h"

namespace chronodrome::ui::answer {

/// Which curve a point belongs to is told by its outline, how it was read by its filling, so that neither
/// needs colour.
enum class Outline { circle, square, triangle, diamond };
enum class Filling {
  full,    ///< steady
  open,    ///< not steady
  half,    ///< read from selected beats
  missing, ///< neither value nor bound
};

inline constexpr double kMarkRadius = 4.5; ///< device-independent pixels

/// Of the n-th other curve (0: the first); the chosen one has circles.
Outline outlineOf(std::size_t other);
Filling fillingOf(const session::PlottedPoint& point);

/// A pen that is as wide on paper as on the screen: cosmetic ones become hairlines in vector files.
QPen inkPen(const QColor& color, double width = look::kThin, Qt::PenStyle style = Qt::SolidLine);

/// The mark of a point at `centre`; `ground` fills what is open.
void drawMark(QPainter& painter, QPointF centre, Outline outline, Filling filling, const QColor& color,
              const QColor& ground);

/// A short stroke under a mark: the user has placed its window.
void drawPlaced(QPainter& painter, QPointF centre, const QColor& color);

/// A limit: a bar at the bound and an arrow to the side where the response lies (up: at least).
void drawBound(QPainter& painter, QPointF at, bool up, const QColor& color);

/// Two slanted strokes across an axis that is broken at `at`.
void drawAxisBreak(QPainter& painter, QPointF at, const QColor& color, const QColor& ground);

/// An arrow head with its tip at `tip`, pointing along `direction` (unit length).
void drawArrowHead(QPainter& painter, QPointF tip, QPointF direction, const QColor& color);

} // namespace chronodrome::ui::answer
