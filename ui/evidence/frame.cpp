// Chronodrome, GPL-3.0-or-later.
#include "ui/evidence/frame.h"

#include <algorithm>
#include <cmath>

#include "ui/look/plot_style.h"

namespace chronodrome::ui::evidence {

void drawHatching(QCPPainter& painter, const QRectF& rect, const QColor& color) {
  if (rect.width() <= 0.0 || rect.height() <= 0.0) return;
  painter.setPen(look::thinPen(color));
  QVector<QLineF> lines;
  // Lines x + y = c, cut to the rectangle, for c on one grid of the whole figure.
  const double first = std::ceil((rect.left() + rect.top()) / look::kUnit) * look::kUnit;
  for (double c = first; c < rect.right() + rect.bottom(); c += look::kUnit) {
    const double x1 = std::max(rect.left(), c - rect.bottom());
    const double x2 = std::min(rect.right(), c - rect.top());
    if (x2 > x1) lines.append(QLineF(x1, c - x1, x2, c - x2));
  }
  painter.drawLines(lines);
}

bool drawChip(QCPPainter& painter, const QRectF& room, const QString& text, const QColor& ink,
              const QColor& ground) {
  const QFontMetricsF metrics(painter.font());
  const QSizeF size(metrics.horizontalAdvance(text) + look::kUnit, metrics.height() + 2.0);
  if (size.width() > room.width() || size.height() > room.height()) return false;
  QRectF chip(QPointF(), size);
  chip.moveCenter(room.center());
  painter.fillRect(chip, ground);
  painter.setPen(ink);
  painter.drawText(chip, Qt::AlignCenter, text);
  return true;
}

bool TextRoom::take(double left, double right) {
  for (const auto& [from, to] : taken_) {
    if (left < to && from < right) return false;
  }
  taken_.emplace_back(left, right);
  return true;
}

} // namespace chronodrome::ui::evidence
