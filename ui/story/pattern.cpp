// Chronodrome, GPL-3.0-or-later.
#include "ui/story/pattern.h"

#include <algorithm>
#include <cmath>

#include <QList>

namespace chronodrome::ui::story {
namespace {

double firstOnRaster(double from, double spacing) {
  return std::ceil(from / spacing) * spacing;
}

void addSlanted(QList<QLineF>& lines, const QRectF& r, double spacing, bool isRising) {
  const double from = isRising ? r.left() + r.top() : r.top() - r.right();
  const double to = isRising ? r.right() + r.bottom() : r.bottom() - r.left();
  for (double c = firstOnRaster(from, spacing); c < to; c += spacing) {
    const double left = std::max(r.left(), isRising ? c - r.bottom() : r.top() - c);
    const double right = std::min(r.right(), isRising ? c - r.top() : r.bottom() - c);
    if (right <= left) continue;
    lines.append(isRising ? QLineF(left, c - left, right, c - right)
                          : QLineF(left, left + c, right, right + c));
  }
}

} // namespace

void fillPattern(QPainter& painter, const QRectF& rect, Pattern pattern, const QColor& color,
                 double spacing) {
  if (pattern == Pattern::none || rect.width() <= 0.0 || rect.height() <= 0.0) return;
  if (pattern == Pattern::solid) {
    painter.fillRect(rect, color);
    return;
  }
  QList<QLineF> lines;
  if (pattern == Pattern::rising || pattern == Pattern::crossed) addSlanted(lines, rect, spacing, true);
  if (pattern == Pattern::falling || pattern == Pattern::crossed) addSlanted(lines, rect, spacing, false);
  if (pattern == Pattern::upright || pattern == Pattern::squared) {
    for (double x = firstOnRaster(rect.left(), spacing); x < rect.right(); x += spacing)
      lines.append(QLineF(x, rect.top(), x, rect.bottom()));
  }
  if (pattern == Pattern::level || pattern == Pattern::squared) {
    for (double y = firstOnRaster(rect.top(), spacing); y < rect.bottom(); y += spacing)
      lines.append(QLineF(rect.left(), y, rect.right(), y));
  }
  painter.save();
  const bool isSlanted =
      pattern == Pattern::rising || pattern == Pattern::falling || pattern == Pattern::crossed;
  painter.setRenderHint(QPainter::Antialiasing, isSlanted);
  QPen pen(color, 1.0);
  pen.setCapStyle(Qt::FlatCap);
  painter.setPen(pen);
  painter.drawLines(lines);
  painter.restore();
}

} // namespace chronodrome::ui::story
