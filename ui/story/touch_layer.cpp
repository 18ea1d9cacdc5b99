// Chronodrome, GPL-3.0-or-later.
#include "ui/story/touch_layer.h"

#include <algorithm>

#include "ui/look/plot_style.h"
#include "ui/story/pattern.h"

namespace chronodrome::ui::story {
namespace {

constexpr double kTabHeight = 8.0;
constexpr double kLeastTab = 12.0; // seconds of hours are narrower than a pixel, but must be seen and caught

} // namespace

QRectF TouchLayer::frameRect() const {
  if (!touch_.frame || !rect_ || !bottom_) return {};
  const double left = std::clamp(xOf(touch_.frame->start), double(rect_->left()), double(rect_->right() + 1));
  const double right = std::clamp(xOf(touch_.frame->end), double(rect_->left()), double(rect_->right() + 1));
  const double top = rect_->top() - kTabStrip;
  return {left, top, right - left, bottom_->bottom() + 1.0 - top};
}

QRectF TouchLayer::tabRect() const {
  const QRectF area = frameRect();
  const bool isOutside = touch_.frame && (touch_.frame->end < viewStart() || touch_.frame->start > viewEnd());
  if (area.isNull() || isOutside) return {};
  QRectF tab(area.left(), area.top() + 1.0, std::max(kLeastTab, area.width()), kTabHeight);
  if (area.width() < kLeastTab) tab.moveLeft(area.center().x() - 0.5 * kLeastTab);
  return tab;
}

void TouchLayer::drawFrame(QCPPainter& painter) const {
  const QRectF tab = tabRect();
  if (tab.isNull()) return;
  const QRectF area = frameRect().adjusted(0.0, 1.0, 0.0, 0.0);
  QColor tint = state_.theme.accent;
  tint.setAlphaF(0.10F);
  // A frame about everything marks nothing: then its outline is enough.
  if (area.width() < 0.9 * rect_->width()) painter.fillRect(area, tint);
  painter.fillRect(tab, state_.theme.accent);
  painter.setPen(look::thinPen(state_.theme.accent));
  if (area.width() < 3.0) {
    painter.drawLine(QLineF(area.center().x(), area.top(), area.center().x(), area.bottom()));
    return;
  }
  painter.drawRect(area.adjusted(0.0, 0.0, -1.0, -1.0));
  // Grips: two short strokes in the tab's ends say that they can be pulled.
  painter.setPen(look::thinPen(state_.theme.on_accent));
  if (tab.width() > 20.0) {
    for (const double x : {tab.left() + 3.0, tab.right() - 4.0})
      painter.drawLine(QLineF(x, tab.top() + 2.0, x, tab.bottom() - 3.0));
  }
}

void TouchLayer::drawSelection(QCPPainter& painter) const {
  const double left = xOf(touch_.selection->start);
  const QRectF area(left, rect_->top(), xOf(touch_.selection->end) - left,
                    bottom_->bottom() + 1.0 - rect_->top());
  fillPattern(painter, area, Pattern::falling, state_.theme.accent, 8.0);
  painter.setPen(look::thinPen(state_.theme.accent));
  painter.drawRect(area);
}

void TouchLayer::drawWords(QCPPainter& painter) const {
  painter.setFont(state_.theme.font(look::TextSize::small, true));
  const QFontMetricsF metrics(painter.font());
  double width = 0.0;
  for (const QString& line : touch_.words->lines)
    width = std::max(width, metrics.horizontalAdvance(line));
  QRectF plate(0.0, 0.0, width + 2.0 * look::kUnit,
               metrics.height() * double(touch_.words->lines.size()) + look::kUnit);
  // Beside the band, so that what is dragged stays in sight.
  plate.moveTopLeft({touch_.words->band.right() + look::kUnit, touch_.words->band.top()});
  const QRect view = parentPlot()->viewport();
  if (plate.right() > view.right() - 2) plate.moveRight(touch_.words->band.left() - look::kUnit);
  if (plate.bottom() > view.bottom() - 2) plate.moveBottom(view.bottom() - 2);
  painter.fillRect(plate, state_.theme.surface);
  painter.setPen(look::thinPen(state_.theme.accent));
  painter.drawRect(plate);
  painter.setPen(state_.theme.text);
  painter.drawText(plate.adjusted(look::kUnit, 0.0, 0.0, 0.0), Qt::AlignLeft | Qt::AlignVCenter,
                   touch_.words->lines.join(QLatin1Char('\n')));
}

void TouchLayer::draw(QCPPainter* painter) {
  if (!rect_ || !bottom_ || !state_.content) return;
  if (touch_.pointer && *touch_.pointer >= viewStart() && *touch_.pointer <= viewEnd()) {
    painter->setPen(look::thinPen(state_.theme.text_quiet, Qt::DotLine));
    painter->drawLine(QLineF(xOf(*touch_.pointer), rect_->top(), xOf(*touch_.pointer), bottom_->bottom()));
  }
  if (touch_.frame) drawFrame(*painter);
  if (touch_.selection) drawSelection(*painter);
  if (touch_.words) drawWords(*painter);
  if (touch_.hasFocus) {
    painter->setPen(look::thinPen(state_.theme.accent));
    painter->drawRect(parentPlot()->viewport().adjusted(0, 0, -1, -1));
  }
}

} // namespace chronodrome::ui::story
