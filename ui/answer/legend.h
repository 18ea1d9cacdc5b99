// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <vector>

#include "ui/answer/point_marks.h"

namespace chronodrome::ui::answer {

/// What one kind of mark stands for.
struct LegendEntry {
  enum class Kind { mark, bound, placed };
  Kind kind = Kind::mark;
  Outline outline = Outline::circle;
  Filling filling = Filling::full;
  QColor color;
  QString words;
  bool is_curve = false; ///< with a stroke of its line
};

/// The legend of a panel in words: the curves if there are several, and the ways of reading that occur. Empty
/// where all points are steady points of one curve.
std::vector<LegendEntry> legendOf(const session::CurveView& view, const look::Theme& theme,
                                  const QColor& chosen);

/// Height that the entries take in lines of this width.
int legendHeight(const std::vector<LegendEntry>& entries, const QFont& font, int width);

void drawLegend(QPainter& painter, const std::vector<LegendEntry>& entries, const QRect& place,
                const look::Theme& theme);

} // namespace chronodrome::ui::answer
