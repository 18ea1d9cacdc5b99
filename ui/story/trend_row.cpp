// Chronodrome, GPL-3.0-or-later.
#include "ui/story/trend_row.h"

#include <algorithm>
#include <cmath>

#include "ui/look/number_text.h"
#include "ui/look/plot_style.h"
#include "ui/story/story_words.h"

namespace chronodrome::ui::story {
namespace {

constexpr double kPixelsPerDot = 4.0; // beats farther apart than this are drawn one by one
constexpr double kTick = 5.0;
constexpr double kBlockedTick = 3.0;
constexpr double kAxisRoom = 40.0; // between label and axis, for its numbers

auto firstAtOrAfter(const std::vector<session::TrendPoint>& points, Seconds time) {
  return std::lower_bound(points.begin(), points.end(), time,
                          [](const session::TrendPoint& point, Seconds at) { return point.time < at; });
}

} // namespace

QRect TrendRow::clipRect() const {
  return rect_ ? QRect(0, rect_->rect().top() - 3, rect_->rect().right() + 1, rect_->rect().height() + 6)
               : QRect();
}

double TrendRow::yOf(double value) const {
  return rect_->axis(QCPAxis::atLeft)->coordToPixel(value);
}

std::size_t TrendRow::columnCount(const QCPPainter& painter) const {
  // A vector file is looked at from nearer than a screen.
  const double scale =
      painter.modes().testFlag(QCPPainter::pmVectorized) ? 2.0 : mParentPlot->bufferDevicePixelRatio();
  return static_cast<std::size_t>(std::max(1.0, std::round(rect_->width() * scale)));
}

void TrendRow::drawLabel(QCPPainter& painter, const session::Trend& trend) const {
  const QRectF room(look::kUnit, rect_->top(), rect_->left() - kAxisRoom - look::kUnit, rect_->height());
  const QString name = look::measureText(trend.measure);
  const QString unit = rowUnitText(trend);
  painter.setFont(state_.theme.font(look::TextSize::small));
  const QFontMetricsF metrics(painter.font());
  const int flags = Qt::AlignLeft | Qt::AlignTop | Qt::TextWordWrap;
  QRectF nameRect = metrics.boundingRect(room, flags, name);
  const double height = nameRect.height() + (unit.isEmpty() ? 0.0 : metrics.height());
  nameRect = QRectF(room.left(), room.center().y() - 0.5 * height, room.width(), nameRect.height());
  painter.setPen(state_.theme.text);
  painter.drawText(nameRect, flags, name);
  painter.setPen(state_.theme.text_quiet);
  painter.drawText(QRectF(room.left(), nameRect.bottom(), room.width(), metrics.height()), Qt::AlignLeft,
                   metrics.elidedText(unit, Qt::ElideRight, room.width()));
}

void TrendRow::drawEdgeMark(QCPPainter& painter, double x, bool isAbove) const {
  const double edge = isAbove ? rect_->top() : rect_->bottom() + 1.0;
  const double base = edge + (isAbove ? 5.0 : -5.0);
  painter.drawPolygon(QPolygonF{QPointF(x, edge), QPointF(x - 3.5, base), QPointF(x + 3.5, base)});
}

void TrendRow::drawColumns(QCPPainter& painter, const session::Trend& trend) {
  const double width = double(rect_->width()) / double(cache_.columns.size());
  const QColor color = state_.theme.of(trend.role);
  const QPen pen = look::thinPen(color);
  QPolygonF line;
  const auto flush = [&] {
    painter.setPen(pen);
    if (line.size() == 1) painter.drawPoint(line.first());
    if (line.size() > 1) painter.drawPolyline(line);
    line.clear();
  };
  std::vector<double> above, below;
  for (std::size_t i = 0; i < cache_.columns.size(); ++i) {
    const auto& column = cache_.columns[i];
    const double x = rect_->left() + (double(i) + 0.5) * width;
    if (column.excluded > 0) {
      painter.setPen(look::thinPen(state_.theme.excluded));
      painter.drawLine(QLineF(x, yOf(column.excluded_low), x, yOf(column.excluded_high) - 1.0));
    }
    if (column.count == 0) continue;
    if (!column.follows) flush();
    line << QPointF(x, yOf(column.first));
    if (column.high > column.low)
      line << QPointF(x, yOf(column.low)) << QPointF(x, yOf(column.high)) << QPointF(x, yOf(column.last));
    if (column.high > trend.high) above.push_back(x);
    if (column.low < trend.low) below.push_back(x);
  }
  flush();
  painter.setPen(Qt::NoPen);
  painter.setBrush(color);
  for (const auto* marks : {&above, &below}) {
    double last = -1e9;
    for (const double x : *marks) {
      if (x - last < 4.0) continue;
      last = x;
      drawEdgeMark(painter, x, marks == &above);
    }
  }
  painter.setBrush(Qt::NoBrush);
}

void TrendRow::drawPoints(QCPPainter& painter, const session::Trend& trend) const {
  const QColor color = state_.theme.of(trend.role);
  auto from = firstAtOrAfter(trend.points, viewStart());
  auto to = firstAtOrAfter(trend.points, viewEnd());
  if (from != trend.points.begin()) --from;
  if (to != trend.points.end()) ++to;
  painter.setPen(look::thinPen(color));
  for (auto it = from; it != to; ++it) {
    const bool isJoined = it != from && it->follows && it->state != session::PointState::excluded &&
                          std::prev(it)->state != session::PointState::excluded;
    if (isJoined)
      painter.drawLine(
          QLineF(xOf(std::prev(it)->time), yOf(std::prev(it)->value), xOf(it->time), yOf(it->value)));
  }
  painter.setAntialiasing(true);
  for (auto it = from; it != to; ++it) {
    const bool isExcluded = it->state == session::PointState::excluded;
    const bool isOpen = isExcluded || it->state == session::PointState::flagged;
    const QColor ink = isExcluded ? state_.theme.excluded : color;
    painter.setPen(look::thinPen(ink));
    painter.setBrush(isOpen ? state_.theme.surface : ink);
    if (it->value > trend.high || it->value < trend.low)
      drawEdgeMark(painter, xOf(it->time), it->value > trend.high);
    else
      painter.drawEllipse(QPointF(xOf(it->time), yOf(it->value)), isOpen ? 2.0 : 1.5, isOpen ? 2.0 : 1.5);
  }
  painter.setBrush(Qt::NoBrush);
  painter.setAntialiasing(false);
}

void TrendRow::drawTicks(QCPPainter& painter, const session::Trend& trend,
                         const std::vector<char>& blocked) const {
  const double width = double(rect_->width()) / double(blocked.size());
  painter.setPen(look::thinPen(state_.theme.of(trend.role)));
  for (std::size_t i = 0; i < blocked.size(); ++i) {
    const double x = rect_->left() + (double(i) + 0.5) * width;
    if (blocked[i] != 0) painter.drawLine(QLineF(x, rect_->top(), x, rect_->top() + kBlockedTick));
  }
  painter.setPen(look::thinPen(state_.theme.text));
  double last = -1e9;
  for (const Seconds time : trend.edited) {
    const double x = xOf(time);
    if (x - last < 1.0) continue;
    last = x;
    painter.drawLine(QLineF(x, rect_->bottom() - kTick, x, rect_->bottom()));
  }
}

void TrendRow::draw(QCPPainter* painter) {
  if (!state_.content || !rect_ || trend_ >= state_.content->trends.size()) return;
  const session::Trend& trend = state_.content->trends[trend_];
  drawLabel(*painter, trend);
  const std::size_t count = columnCount(*painter);
  if (cache_.of != &trend || cache_.start != viewStart() || cache_.end != viewEnd() ||
      cache_.columns.size() != count)
    cache_ = {&trend, viewStart(), viewEnd(), session::columns_of(trend, viewStart(), viewEnd(), count)};
  const auto points = firstAtOrAfter(trend.points, viewEnd()) - firstAtOrAfter(trend.points, viewStart());
  painter->setClipRect(rect_->rect().adjusted(0, 0, 1, 1));
  painter->setOpacity(opacity());
  if (double(points) * kPixelsPerDot < double(rect_->width()))
    drawPoints(*painter, trend);
  else
    drawColumns(*painter, trend);
  std::vector<char> blocked(cache_.columns.size(), 0);
  // A blocked beat is missing in the row of the delay; the share conducted shows it by itself.
  if (trend.unit != "1")
    std::transform(cache_.columns.begin(), cache_.columns.end(), blocked.begin(),
                   [](const session::TrendColumn& column) { return static_cast<char>(column.blocked > 0); });
  drawTicks(*painter, trend, blocked);
  if (trend.points.empty()) {
    painter->setPen(state_.theme.text_quiet);
    painter->drawText(rect_->rect(), Qt::AlignCenter, QStringLiteral("no beat to read this from"));
  }
  painter->setOpacity(1.0);
}

} // namespace chronodrome::ui::story
