// Chronodrome, GPL-3.0-or-later.
#include "ui/answer/curve_layer.h"

#include <algorithm>
#include <cmath>

#include "ui/answer/words.h"

namespace chronodrome::ui::answer {
namespace {

using session::CurveSeries;
using session::LinePiece;
using session::PlottedInterval;
using session::PlottedPoint;

constexpr double kBandShare = 0.16;     // of the curve's colour in the band's
constexpr double kZeroHalfWidth = 0.16; // decades: the fitted level at the control
constexpr double kFloor = 20.0;         // pixels of marks without a value above the axis
constexpr double kEc50Height = 7.0;     // ... and of the EC50's bar

QColor mixed(const QColor& color, const QColor& ground, double share) {
  const auto part = [&](int a, int b) {
    return static_cast<int>(std::lround(share * a + (1.0 - share) * b));
  };
  return {part(color.red(), ground.red()), part(color.green(), ground.green()),
          part(color.blue(), ground.blue())};
}

} // namespace

CurveLayer::CurveLayer(QCustomPlot* plot) : QCPLayerable(plot, QStringLiteral("legend")) {}

void CurveLayer::setView(const session::CurveView* view, const look::Theme& theme, const QColor& color) {
  view_ = view;
  theme_ = &theme;
  color_ = color;
}

void CurveLayer::applyDefaultAntialiasingHint(QCPPainter* painter) const {
  painter->setAntialiasing(true); // some hundred short lines: nothing that costs time
}

QRectF CurveLayer::inner() const {
  return QRectF(mParentPlot->axisRect()->rect());
}

QPointF CurveLayer::at(double position, double response) const {
  return {mParentPlot->xAxis->coordToPixel(position), mParentPlot->yAxis->coordToPixel(response)};
}

QPointF CurveLayer::centreOf(const PlottedPoint& point) const {
  const double position = point.position.value_or(view_->axis.zero.value_or(view_->axis.low));
  if (point.value) return at(position, *point.value);
  if (point.bound) return at(position, *point.bound);
  return {mParentPlot->xAxis->coordToPixel(position), inner().bottom() - kFloor};
}

void CurveLayer::draw(QCPPainter* painter) {
  if (!view_) return;
  painter->save();
  painter->setClipRect(inner(), Qt::IntersectClip);
  drawBand(*painter);
  for (const CurveSeries& other : view_->others)
    drawLines(*painter, other, theme_->text_quiet, look::kThin);
  drawLines(*painter, view_->chosen, color_, look::kThick);
  painter->restore();
  for (std::size_t i = 0; i < view_->others.size(); ++i)
    drawPoints(*painter, view_->others[i], outlineOf(i), theme_->text_quiet);
  drawEc50(*painter);
  drawChosen(*painter);
  drawPoints(*painter, view_->chosen, Outline::circle, color_);
  if (view_->axis.break_at)
    drawAxisBreak(*painter, {at(*view_->axis.break_at, 0.0).x(), inner().bottom() - 0.5},
                  mParentPlot->xAxis->basePen().color(), theme_->surface);
  const QRect rect = mParentPlot->axisRect()->rect();
  const int height = legendHeight(legend_, theme_->font(look::TextSize::small), rect.width());
  drawLegend(*painter, legend_, {rect.left(), rect.top() - height - look::kUnit, rect.width(), height},
             *theme_);
  if (!framed_) return;
  painter->setBrush(Qt::NoBrush);
  painter->setPen(inkPen(theme_->accent, look::kThin));
  painter->drawRect(QRectF(mParentPlot->viewport()).adjusted(0.5, 0.5, -0.5, -1.5));
}

void CurveLayer::drawBand(QPainter& painter) const {
  painter.setPen(Qt::NoPen);
  painter.setBrush(mixed(color_, theme_->surface, kBandShare));
  QPolygonF low, high;
  for (const LinePiece& piece : view_->chosen.line) {
    for (std::size_t i = 0; i < piece.band.size(); ++i) {
      low << at(piece.position[i], piece.band[i].low);
      high << at(piece.position[i], piece.band[i].high);
    }
  }
  std::reverse(high.begin(), high.end());
  painter.drawPolygon(low + high);
  const auto& zero = view_->chosen.zero;
  if (!zero || !zero->band || !view_->axis.zero) return;
  painter.drawRect(QRectF(at(*view_->axis.zero - kZeroHalfWidth, zero->band->high),
                          at(*view_->axis.zero + kZeroHalfWidth, zero->band->low)));
}

void CurveLayer::drawLines(QPainter& painter, const CurveSeries& series, const QColor& color,
                           double width) const {
  painter.setBrush(Qt::NoBrush);
  for (const LinePiece& piece : series.line) {
    QPen pen = inkPen(color, width);
    if (!piece.is_inside) pen.setDashPattern({4.0, 3.0});
    painter.setPen(pen);
    QPolygonF line;
    for (std::size_t i = 0; i < piece.position.size(); ++i)
      line << at(piece.position[i], piece.response[i]);
    painter.drawPolyline(line);
  }
  if (!series.zero || !view_->axis.zero) return;
  painter.setPen(inkPen(color, width));
  painter.drawLine(at(*view_->axis.zero - kZeroHalfWidth, series.zero->response),
                   at(*view_->axis.zero + kZeroHalfWidth, series.zero->response));
}

void CurveLayer::drawPoints(QPainter& painter, const CurveSeries& series, Outline outline,
                            const QColor& color) const {
  for (const PlottedPoint& point : series.points) {
    const QPointF centre = centreOf(point);
    if (!point.value && !point.bound) {
      drawMissing(painter, point, outline);
      continue;
    }
    if (!point.value) {
      drawBound(painter, centre, point.is_at_least, color);
      continue;
    }
    if (point.sem) {
      const double x = mParentPlot->xAxis->pixelToCoord(centre.x());
      const QPointF top = at(x, *point.value + *point.sem), bottom = at(x, *point.value - *point.sem);
      // An error smaller than the mark is told by the tooltip and the caption.
      if (bottom.y() - top.y() > 2.0 * kMarkRadius) {
        painter.setPen(inkPen(color, look::kThin));
        painter.drawLine(top, bottom);
        for (const QPointF& end : {top, bottom})
          painter.drawLine(end - QPointF(3.0, 0.0), end + QPointF(3.0, 0.0));
      }
    }
    drawMark(painter, centre, outline, fillingOf(point), color, theme_->surface);
    if (point.is_placed) drawPlaced(painter, centre, color);
  }
}

void CurveLayer::drawMissing(QPainter& painter, const PlottedPoint& point, Outline outline) const {
  const QPointF centre = centreOf(point);
  drawMark(painter, centre, outline, Filling::missing, theme_->excluded, theme_->surface);
  painter.save();
  painter.setFont(theme_->font(look::TextSize::small));
  painter.setPen(theme_->text_quiet);
  painter.translate(centre.x(), centre.y() - kMarkRadius - 4.0);
  painter.rotate(-90.0);
  const QString words = missingText(point);
  const QRectF place(0.0, -6.0, painter.fontMetrics().horizontalAdvance(words), 12.0);
  painter.fillRect(place, theme_->surface); // a curve may pass behind
  painter.drawText(place, Qt::AlignLeft | Qt::AlignVCenter | Qt::TextDontClip, words);
  painter.restore();
}

void CurveLayer::drawChosen(QPainter& painter) const {
  if (!chosen_ || *chosen_ >= view_->chosen.points.size()) return;
  const QPointF centre = centreOf(view_->chosen.points[*chosen_]);
  painter.setPen(inkPen(theme_->accent, look::kThin, Qt::DotLine));
  painter.drawLine(QPointF(centre.x(), inner().bottom()), centre);
  painter.setBrush(theme_->accent_fill);
  painter.setPen(inkPen(theme_->accent, look::kThick));
  painter.drawEllipse(centre, kMarkRadius + 4.0, kMarkRadius + 4.0);
}

void CurveLayer::drawEc50(QPainter& painter) const {
  const QRectF rect = inner();
  const double y = rect.bottom() - kEc50Height;
  const double left = at(view_->axis.log_low, 0.0).x(), right = rect.right();
  const auto pixel = [&](double position) { return std::clamp(at(position, 0.0).x(), left, right); };
  for (const PlottedInterval& ec50 : view_->chosen.ec50) {
    const bool none = !ec50.low && !ec50.high;
    if (none && !ec50.estimate) continue;
    const bool bounded = ec50.low && ec50.high;
    if (!none) {
      const double from = ec50.low ? pixel(*ec50.low) : left, to = ec50.high ? pixel(*ec50.high) : right;
      painter.setPen(inkPen(color_, look::kThick));
      painter.drawLine(QPointF(from, y), QPointF(to, y));
      const auto end = [&](const std::optional<double>& limit, double x, double side) {
        const bool beyond = !limit || at(*limit, 0.0).x() != x;
        if (beyond) return drawArrowHead(painter, {x, y}, {side, 0.0}, color_);
        painter.setPen(inkPen(color_, look::kThin));
        painter.drawLine(QPointF(x, y - 3.5), QPointF(x, y + 3.5));
      };
      end(ec50.low, from, -1.0);
      end(ec50.high, to, 1.0);
    }
    // Where a side is open the estimate is only where the search ended: the bound alone is shown.
    if (!ec50.estimate || !(bounded || none)) continue;
    const double x = at(*ec50.estimate, 0.0).x();
    if (x < left || x > right) continue;
    painter.setPen(inkPen(color_, look::kThick));
    painter.drawLine(QPointF(x, y - 6.0), QPointF(x, rect.bottom()));
  }
}

} // namespace chronodrome::ui::answer
