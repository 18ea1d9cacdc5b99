// Chronodrome, GPL-3.0-or-later.
#include "ui/answer/legend.h"

#include <QFontMetrics>

#include "ui/answer/words.h"

namespace chronodrome::ui::answer {
namespace {

constexpr int kKey = 3 * look::kUnit; ///< room for the mark
constexpr int kGap = 2 * look::kUnit; ///< between entries
constexpr int kLine = 2 * look::kUnit;

/// Top left corners of the entries; the last is below them all.
std::vector<QPoint> corners(const std::vector<LegendEntry>& entries, const QFont& font, int width) {
  const QFontMetrics metrics(font);
  std::vector<QPoint> places;
  int x = 0, y = 0;
  for (const LegendEntry& entry : entries) {
    const int needed = kKey + metrics.horizontalAdvance(entry.words);
    if (x > 0 && x + needed > width) {
      x = 0;
      y += kLine;
    }
    places.emplace_back(x, y);
    x += needed + kGap;
  }
  places.emplace_back(0, entries.empty() ? 0 : y + kLine);
  return places;
}

bool any(const session::CurveView& view, bool (*wanted)(const session::PlottedPoint&)) {
  const auto in = [&](const session::CurveSeries& series) {
    return std::any_of(series.points.begin(), series.points.end(), wanted);
  };
  return in(view.chosen) || std::any_of(view.others.begin(), view.others.end(), in);
}

} // namespace

std::vector<LegendEntry> legendOf(const session::CurveView& view, const look::Theme& theme,
                                  const QColor& chosen) {
  using session::PlottedPoint;
  std::vector<LegendEntry> entries;
  const auto add = [&](LegendEntry::Kind kind, Filling filling, const QString& words) {
    entries.push_back({kind, Outline::circle, filling, chosen, words, false});
  };
  if (!view.others.empty()) {
    entries.push_back(
        {LegendEntry::Kind::mark, Outline::circle, Filling::full, chosen, curveText(view.chosen), true});
    for (std::size_t i = 0; i < view.others.size(); ++i)
      entries.push_back({LegendEntry::Kind::mark, outlineOf(i), Filling::full, theme.text_quiet,
                         curveText(view.others[i]), true});
  }
  const bool open = any(view, [](const PlottedPoint& p) { return fillingOf(p) == Filling::open; });
  const bool half = any(view, [](const PlottedPoint& p) { return fillingOf(p) == Filling::half; });
  const bool bound = any(view, [](const PlottedPoint& p) { return p.bound.has_value(); });
  const bool placed = any(view, [](const PlottedPoint& p) { return p.is_placed; });
  if ((open || half || bound) && view.others.empty())
    add(LegendEntry::Kind::mark, Filling::full, QStringLiteral("steady"));
  if (open) add(LegendEntry::Kind::mark, Filling::open, QStringLiteral("not steady"));
  if (half) add(LegendEntry::Kind::mark, Filling::half, QStringLiteral("from selected beats"));
  if (bound) add(LegendEntry::Kind::bound, Filling::full, QStringLiteral("only a bound"));
  if (placed) add(LegendEntry::Kind::placed, Filling::full, QStringLiteral("window placed by hand"));
  return entries;
}

int legendHeight(const std::vector<LegendEntry>& entries, const QFont& font, int width) {
  return corners(entries, font, width).back().y();
}

void drawLegend(QPainter& painter, const std::vector<LegendEntry>& entries, const QRect& place,
                const look::Theme& theme) {
  const QFont font = theme.font(look::TextSize::small);
  painter.setFont(font);
  const std::vector<QPoint> at = corners(entries, font, place.width());
  for (std::size_t i = 0; i < entries.size(); ++i) {
    const LegendEntry& entry = entries[i];
    const QPointF corner = place.topLeft() + at[i];
    const QPointF centre = corner + QPointF(kKey / 2.0 - 2.0, kLine / 2.0);
    if (entry.is_curve) {
      painter.setPen(inkPen(entry.color, 1.5));
      painter.drawLine(centre - QPointF(10.0, 0.0), centre + QPointF(10.0, 0.0));
    }
    if (entry.kind == LegendEntry::Kind::bound) {
      drawBound(painter, centre + QPointF(0.0, 6.0), true, entry.color);
    } else {
      drawMark(painter, centre, entry.outline, entry.filling, entry.color, theme.surface);
    }
    if (entry.kind == LegendEntry::Kind::placed) drawPlaced(painter, centre, entry.color);
    painter.setPen(theme.text);
    painter.drawText(QRectF(corner + QPointF(kKey, 0.0), QSizeF(place.width(), kLine)),
                     Qt::AlignLeft | Qt::AlignVCenter, entry.words);
  }
}

} // namespace chronodrome::ui::answer
