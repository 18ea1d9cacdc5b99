// Chronodrome, GPL-3.0-or-later.
#include "ui/evidence/delay_drawing.h"

#include <algorithm>
#include <cmath>
#include <utility>

#include "ui/look/number_text.h"
#include "ui/look/plot_style.h"

namespace chronodrome::ui::evidence {
namespace {

constexpr double kRowsApart = 12.0; // pixels between rows of the pathway, below which lines are a blur
constexpr double kBar = 9.0;        // width of the bar of a blocked beat
constexpr double kNumberHeight = 13.0;
constexpr double kAir = 3.0; // between a line and its number

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

/// Right of `right`, or else left of `left`: whichever side is free. `y`: top of the text.
void writeBeside(QCPPainter& painter, const DelayPlace& place, const QString& text, double left, double right,
                 double y, const look::Theme& theme, TextRoom& room) {
  const double width = QFontMetricsF(painter.font()).horizontalAdvance(text) + 1.0;
  for (const double x : {right + kAir, left - kAir - width}) {
    if (x < place.time.left || x + width > place.time.right()) continue;
    if (!room.take(x - 1.0, x + width + 1.0)) continue;
    painter.save();
    painter.setPen(theme.text_quiet);
    painter.drawText(QRectF(x, y, width, kNumberHeight), Qt::AlignLeft | Qt::AlignVCenter, text);
    painter.restore();
    return;
  }
}

/// Where a line stands within the strip: from its upper to its lower edge.
std::pair<double, double> reachOf(const DelayPlace& place, const DelayRow& row) {
  const double from = place.time.xOf(*row.from_time);
  if (!row.delay || !row.to_time) return {from - kBar / 2, from + kBar / 2};
  const auto at = [&](double y) {
    const double share = std::clamp((y - place.from_edge) / (place.to_edge - place.from_edge), 0.0, 1.0);
    return from + share * (place.time.xOf(*row.to_time) - from);
  };
  const double upper = at(place.strip_top);
  const double lower = at(place.strip_top + place.strip_height);
  return {std::min(upper, lower), std::max(upper, lower)};
}

bool isBlocked(const DelayRow& row) {
  // What could not be seen is no block.
  return row.state == DelayState::blocked && row.from_time && !row.answer_unseen;
}

} // namespace

void drawDelays(QCPPainter& painter, const DelayPlace& place, const conduction::PathwayDelays& pathway,
                const look::Theme& theme, StripRoom& room) {
  const auto [first, end] = rowsWithin(pathway.rows, place.time);
  if (end == first) return;
  const double apart = place.time.width / static_cast<double>(end - first);
  if (apart < kRowsApart) return;
  painter.save();
  painter.setAntialiasing(true);
  painter.setFont(theme.font(look::TextSize::small));
  painter.setClipRect(QRectF(place.time.left, std::min(place.from_edge, place.to_edge), place.time.width,
                             std::abs(place.to_edge - place.from_edge)));
  const bool has_two_lines = place.strip_height >= 2.0 * kNumberHeight + 2.0;
  // Lines and bars first, so that no number stands on one.
  for (std::size_t i = first; i < end; ++i) {
    const DelayRow& row = pathway.rows[i];
    painter.setPen(look::thinPen(theme.text_quiet, row.ambiguous ? Qt::DashLine : Qt::SolidLine));
    if (row.delay && row.from_time && row.to_time) {
      painter.drawLine(QPointF(place.time.xOf(*row.from_time), place.from_edge),
                       QPointF(place.time.xOf(*row.to_time), place.to_edge));
    } else if (isBlocked(row)) {
      drawBlocked(painter, place, place.time.xOf(*row.from_time));
    } else {
      continue;
    }
    const auto [left, right] = reachOf(place, row);
    // A bar ends above the lower line of text.
    room.upper.occupy(left, right);
    if (row.delay || !has_two_lines) room.lower.occupy(left, right);
  }
  if (place.strip_height < kNumberHeight) {
    painter.restore();
    return;
  }
  const double bottom = place.strip_top + place.strip_height;
  const double lower = has_two_lines ? bottom - kNumberHeight - 1.0
                                     : place.strip_top + (place.strip_height - kNumberHeight) / 2.0;
  for (std::size_t i = first; i < end; ++i) {
    const DelayRow& row = pathway.rows[i];
    if (!row.from_time || (!isBlocked(row) && !(row.delay && row.to_time))) continue;
    const auto [left, right] = reachOf(place, row);
    if (row.delay) {
      QString text = look::plainText(in_milliseconds(*row.delay), 1.0);
      if (row.ambiguous) text += QStringLiteral(" ?");
      writeBeside(painter, place, text, left, right, lower, theme, room.lower);
    } else {
      writeBeside(painter, place, QStringLiteral("blocked"), left, right,
                  has_two_lines ? place.strip_top + 3.0 : lower, theme,
                  has_two_lines ? room.upper : room.lower);
    }
  }
  painter.restore();
}

} // namespace chronodrome::ui::evidence
