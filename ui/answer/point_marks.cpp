// Chronodrome, GPL-3.0-or-later.
#include "ui/answer/point_marks.h"

#include <array>

#include <QPainterPath>

namespace chronodrome::ui::answer {
namespace {

constexpr double kArrowLength = 14.0;
constexpr double kHead = 5.0;

QPainterPath shape(Outline outline, QPointF c) {
  QPainterPath path;
  const double r = kMarkRadius;
  switch (outline) {
  case Outline::circle:
    path.addEllipse(c, r, r);
    break;
  case Outline::square:
    path.addRect(QRectF(c.x() - r * 0.9, c.y() - r * 0.9, r * 1.8, r * 1.8));
    break;
  case Outline::triangle:
    path.addPolygon(QPolygonF{
        {c.x(), c.y() - r * 1.2}, {c.x() + r * 1.1, c.y() + r * 0.8}, {c.x() - r * 1.1, c.y() + r * 0.8}});
    path.closeSubpath();
    break;
  case Outline::diamond:
    path.addPolygon(QPolygonF{{c.x(), c.y() - r * 1.3},
                              {c.x() + r * 1.3, c.y()},
                              {c.x(), c.y() + r * 1.3},
                              {c.x() - r * 1.3, c.y()}});
    path.closeSubpath();
    break;
  }
  return path;
}

} // namespace

Outline outlineOf(std::size_t other) {
  static constexpr std::array<Outline, 3> outlines{Outline::square, Outline::triangle, Outline::diamond};
  return outlines[other % outlines.size()];
}

Filling fillingOf(const session::PlottedPoint& point) {
  if (!point.value) return Filling::missing;
  if (point.is_selected) return Filling::half;
  return point.status == response::Status::not_steady ? Filling::open : Filling::full;
}

QPen inkPen(const QColor& color, double width, Qt::PenStyle style) {
  QPen pen(color, width, style, Qt::FlatCap, Qt::MiterJoin);
  pen.setCosmetic(false);
  return pen;
}

void drawMark(QPainter& painter, QPointF centre, Outline outline, Filling filling, const QColor& color,
              const QColor& ground) {
  const QPainterPath path = shape(outline, centre);
  painter.setBrush(filling == Filling::full ? color : ground);
  painter.setPen(inkPen(color, filling == Filling::missing ? look::kThin : 1.5));
  painter.drawPath(path);
  if (filling != Filling::half) return;
  QPainterPath left;
  left.addRect(QRectF(centre.x() - 20.0, centre.y() - 20.0, 20.0, 40.0));
  painter.setPen(Qt::NoPen);
  painter.setBrush(color);
  painter.drawPath(path.intersected(left));
}

void drawPlaced(QPainter& painter, QPointF centre, const QColor& color) {
  const QPointF below = centre + QPointF(0.0, kMarkRadius + 3.0);
  painter.setPen(inkPen(color, 1.5));
  painter.drawLine(below - QPointF(kMarkRadius, 0.0), below + QPointF(kMarkRadius, 0.0));
}

void drawArrowHead(QPainter& painter, QPointF tip, QPointF direction, const QColor& color) {
  const QPointF side(-direction.y(), direction.x());
  const QPointF back = tip - direction * kHead * 1.4;
  painter.setPen(Qt::NoPen);
  painter.setBrush(color);
  painter.drawPolygon(QPolygonF{tip, back + side * kHead * 0.7, back - side * kHead * 0.7});
}

void drawBound(QPainter& painter, QPointF at, bool up, const QColor& color) {
  const QPointF direction(0.0, up ? -1.0 : 1.0);
  const QPointF tip = at + direction * kArrowLength;
  painter.setPen(inkPen(color, look::kThick));
  painter.drawLine(at - QPointF(kMarkRadius, 0.0), at + QPointF(kMarkRadius, 0.0));
  painter.setPen(inkPen(color, look::kThin));
  painter.drawLine(at, tip - direction * kHead);
  drawArrowHead(painter, tip, direction, color);
}

void drawAxisBreak(QPainter& painter, QPointF at, const QColor& color, const QColor& ground) {
  constexpr double half = 2.5, height = 5.0, lean = 2.0;
  painter.setPen(Qt::NoPen);
  painter.setBrush(ground);
  painter.drawRect(QRectF(at.x() - half, at.y() - 1.5, 2.0 * half, 3.0));
  painter.setPen(inkPen(color, look::kThin));
  for (const double x : {at.x() - half, at.x() + half})
    painter.drawLine(QPointF(x - lean, at.y() + height), QPointF(x + lean, at.y() - height));
}

} // namespace chronodrome::ui::answer
