// Chronodrome, GPL-3.0-or-later.
#include "ui/story/figure_part.h"

namespace chronodrome::ui::story {

void drawPlate(QPainter& painter, const QRectF& rect, const QString& text, const look::Theme& theme,
               const QColor& color) {
  const QFontMetricsF metrics(painter.font());
  QRectF plate(0.0, 0.0, metrics.horizontalAdvance(text) + 6.0, metrics.height());
  plate.moveCenter(rect.center());
  painter.fillRect(plate.intersected(rect), theme.surface);
  painter.setPen(color);
  painter.drawText(plate, Qt::AlignCenter, text);
}

} // namespace chronodrome::ui::story
