// Chronodrome, GPL-3.0-or-later.
#include "ui/evidence/delay_drawing.h"

#include <algorithm>
#include <cmath>

#include "ui/look/number_text.h"
#include "ui/look/plot_style.h"

namespace chronodrome::ui::evidence {
namespace {

constexpr double kRowsApart = 12.0; // pixels between rows of the pathway, below which lines are a blur
constexpr double kBar = 9.0;        // width of the bar of a blocked beat
constexpr double kNumberHeight = 13.0;

using conduction::DelayRow;
using conduction::DelayState;

Seconds earliest(const DelayRow& row) {
  if (row.from_time && row.to_time) return std::min(*row.from_time, *row.to_time);
  return row.from_time ? *row.from_time : row.to_time.value_or(Seconds(0.0));
}

/// Rows that may show within the frame: a delay reaches no farther than 2 s.
std::pair<std::size_t, std::size_t> rowsWithin(const std::vector<DelayRow>& rows, const TimeFrame& time) {
  const auto first = std::partition_point(rows.begin(), rows.end(), [&](const DelayRow& row) {
    return earliest(row) < time.start - Seconds(2.0);
  });
  const auto end =
      std::partition_point(first, rows.end(), [&](const DelayRow& row) { return earliest(row) <= time.end; });
  return {static_cast<std::size_t>(first - rows.begin()), static_cast<std::size_t>(end - rows.begin())};
}

void drawBlocked(QCPPainter& painter, const DelayPlace& place, double x) {
  const double towards = place.to_edge > place.from_edge ? 1.0 : -1.0;
  const double end = place.from_edge + towards * std::min(place.strip_height, 24.0) * 0.45;
  painter.drawLine(QPointF(x, place.from_edge), QPointF(x, end));
  painter.save();
  painter.setPen(look::thickPen(painter.pen().color()));
  painter.drawLine(QPointF(x - kBar / 2, end), QPointF(x + kBar / 2, end));
  painter.restore();
}

void writeBeside(QCPPainter& painter, const DelayPlace& place, const QString& text, double x,
                 const look::Theme& theme, TextRoom& room) {
  if (place.strip_height < kNumberHeight) return;
  const double width = QFontMetricsF(painter.font()).horizontalAdvance(text);
  const QRectF box(x + 4.0, place.strip_top + (place.strip_height - kNumberHeight) / 2.0, width,
                   kNumberHeight);
  if (box.left() < place.time.left || box.right() > place.time.right()) return;
  if (!room.take(box.left() - 2.0, box.right() + 4.0)) return;
  painter.save();
  painter.setPen(theme.text_quiet);
  painter.drawText(box, Qt::AlignLeft | Qt::AlignVCenter, text);
  painter.restore();
}

} // namespace

void drawDelays(QCPPainter& painter, const DelayPlace& place, const conduction::PathwayDelays& pathway,
                const look::Theme& theme, TextRoom& room) {
  const auto [first, end] = rowsWithin(pathway.rows, place.time);
  if (end == first) return;
  const double apart = place.time.width / static_cast<double>(end - first);
  if (apart < kRowsApart) return;
  painter.save();
  painter.setAntialiasing(true);
  painter.setFont(theme.font(look::TextSize::small));
  painter.setClipRect(QRectF(place.time.left, std::min(place.from_edge, place.to_edge), place.time.width,
                             std::abs(place.to_edge - place.from_edge)));
  for (std::size_t i = first; i < end; ++i) {
    const DelayRow& row = pathway.rows[i];
    // What could not be seen is no block.
    painter.setPen(look::thinPen(theme.text_quiet, row.ambiguous ? Qt::DashLine : Qt::SolidLine));
    if (row.delay && row.from_time && row.to_time) {
      const QPointF from(place.time.xOf(*row.from_time), place.from_edge);
      const QPointF to(place.time.xOf(*row.to_time), place.to_edge);
      painter.drawLine(from, to);
      // Beside the line where it leaves the strip.
      const double share = std::clamp((place.strip_top + place.strip_height - place.from_edge) /
                                          (place.to_edge - place.from_edge),
                                      0.0, 1.0);
      QString text = look::plainText(in_milliseconds(*row.delay), 1.0);
      if (row.ambiguous) text += QStringLiteral(" ?");
      writeBeside(painter, place, text, std::max(from.x(), from.x() + share * (to.x() - from.x())), theme,
                  room);
    } else if (row.state == DelayState::blocked && row.from_time && !row.answer_unseen) {
      const double x = place.time.xOf(*row.from_time);
      drawBlocked(painter, place, x);
      writeBeside(painter, place, QStringLiteral("blocked"), x + kBar / 2, theme, room);
    }
  }
  painter.restore();
}

} // namespace chronodrome::ui::evidence
