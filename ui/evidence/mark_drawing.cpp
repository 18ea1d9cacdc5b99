// Chronodrome, GPL-3.0-or-later.
#include "ui/evidence/mark_drawing.h"

#include <algorithm>
#include <cmath>
#include <limits>

#include "ui/look/plot_style.h"

namespace chronodrome::ui::evidence {
namespace {

using activation::Activation;
using activation::Origin;

constexpr double kTick = 6.0;
constexpr double kShortTick = 3.0; // where ticks melt into a band, whose holes are what it tells
constexpr double kBand = 3.0;      // ... nearer than this, in pixels

QPolygonF shapeOf(const QPointF& top, Origin origin) {
  const double h = kGlyph;
  if (origin == Origin::moved)
    return QPolygonF({top, top + QPointF(h / 2, h / 2), top + QPointF(0.0, h), top + QPointF(-h / 2, h / 2)});
  return QPolygonF({top + QPointF(-h / 2, 0.0), top + QPointF(h / 2, 0.0), top + QPointF(0.0, h - 1.0)});
}

} // namespace

std::pair<std::size_t, std::size_t> marksWithin(std::span<const Activation> marks, const TimeFrame& time) {
  const auto first = std::partition_point(marks.begin(), marks.end(),
                                          [&](const Activation& m) { return m.time < time.start; });
  const auto end =
      std::partition_point(first, marks.end(), [&](const Activation& m) { return m.time <= time.end; });
  return {static_cast<std::size_t>(first - marks.begin()), static_cast<std::size_t>(end - marks.begin())};
}

double marksApart(std::span<const Activation> marks, const TimeFrame& time) {
  const auto [first, end] = marksWithin(marks, time);
  if (end < first + 2) return std::numeric_limits<double>::infinity();
  return (marks[end - 1].time - marks[first].time) / time.perPixel() / static_cast<double>(end - first - 1);
}

void drawGlyph(QCPPainter& painter, const QPointF& top, Origin origin, const QColor& color) {
  painter.save();
  painter.setAntialiasing(true);
  painter.setPen(Qt::NoPen);
  painter.setBrush(color);
  if (origin == Origin::added) {
    painter.drawEllipse(top + QPointF(0.0, kGlyph / 2), kGlyph / 2, kGlyph / 2);
  } else {
    painter.drawPolygon(shapeOf(top, origin));
  }
  painter.restore();
}

void drawMarkLines(QCPPainter& painter, const RowFrame& row, std::span<const Activation> marks,
                   const QColor& color, const look::Theme& theme) {
  if (marksApart(marks, row.time) < kMarksApart) return;
  const auto [first, end] = marksWithin(marks, row.time);
  QVector<QLineF> lines;
  for (std::size_t i = first; i < end; ++i) {
    const double x = std::round(row.time.xOf(marks[i].time));
    lines.append(QLineF(x, row.rect.top(), x, row.rect.bottom()));
  }
  painter.setPen(look::thinPen(look::blended(color, theme.surface, 0.6)));
  painter.drawLines(lines);
}

void drawMarks(QCPPainter& painter, const RowFrame& row, std::span<const Activation> marks,
               const QColor& color, const look::Theme& theme) {
  const auto [first, end] = marksWithin(marks, row.time);
  const double apart = marksApart(marks, row.time);
  const bool is_dense = apart < kMarksApart;
  const double tick = !is_dense ? 0.0 : apart < kBand ? kShortTick : kTick;
  if (is_dense) {
    QVector<QLineF> lines;
    double drawn = -1e9;
    for (std::size_t i = first; i < end; ++i) {
      const double x = std::floor(row.time.xOf(marks[i].time));
      // Hours of beats fall on few pixels: each is drawn once.
      if (x == drawn) continue;
      drawn = x;
      lines.append(QLineF(x, row.rect.top(), x, row.rect.top() + tick - 1.0));
    }
    painter.setPen(look::thinPen(color));
    painter.drawLines(lines);
  }
  for (std::size_t i = first; i < end; ++i) {
    if (is_dense && marks[i].origin == Origin::detected) continue;
    // Below the ticks, on a ground of its own, so that its shape is told over ticks and trace.
    const QPointF top(std::round(row.time.xOf(marks[i].time)) + 0.5, row.rect.top() + tick);
    if (is_dense)
      painter.fillRect(QRectF(top.x() - kGlyph / 2 - 1.5, top.y(), kGlyph + 3.0, kGlyph + 2.0),
                       theme.surface);
    drawGlyph(painter, top + QPointF(0.0, is_dense ? 1.0 : 0.0), marks[i].origin, color);
  }
}

void drawPending(QCPPainter& painter, const RowFrame& row, const Pending& pending, const QColor& color) {
  const auto top_at = [&](Seconds time) {
    return QPointF(std::round(row.time.xOf(time)) + 0.5, row.rect.top() + 0.5);
  };
  const auto inside = [&](Seconds time) { return time >= row.time.start && time <= row.time.end; };
  painter.save();
  painter.setAntialiasing(true);
  painter.setPen(look::thinPen(color));
  painter.setBrush(Qt::NoBrush);
  using document::CorrectionKind;
  if (pending.what != CorrectionKind::add && inside(pending.time)) {
    const QPointF top = top_at(pending.time);
    const double h = kGlyph;
    painter.drawLine(top + QPointF(-h / 2, 0.0), top + QPointF(h / 2, h));
    painter.drawLine(top + QPointF(-h / 2, h), top + QPointF(h / 2, 0.0));
  }
  const Seconds place = pending.what == CorrectionKind::move ? pending.to_time : pending.time;
  if (pending.what != CorrectionKind::remove && inside(place)) {
    const QPointF top = top_at(place);
    painter.drawLine(top + QPointF(0.0, kGlyph), QPointF(top.x(), row.rect.bottom()));
    if (pending.what == CorrectionKind::add) {
      painter.drawEllipse(top + QPointF(0.0, kGlyph / 2), kGlyph / 2, kGlyph / 2);
    } else {
      painter.drawPolygon(shapeOf(top, Origin::moved));
    }
  }
  painter.restore();
}

} // namespace chronodrome::ui::evidence
