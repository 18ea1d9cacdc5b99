// Chronodrome, GPL-3.0-or-later.
#pragma once

#include "ui/look/custom_plot.h"

#include <utility>
#include <vector>

#include "base/quantity.h"
#include "recording/envelope.h"
#include "ui/look/theme.h"

namespace chronodrome::ui::evidence {

/// The stretch of time on show, over a width of pixels.
struct TimeFrame {
  Seconds start, end;
  double left = 0.0;
  double width = 1.0;

  [[nodiscard]] double xOf(Seconds time) const { return left + (time - start) / (end - start) * width; }
  [[nodiscard]] Seconds timeOf(double x) const { return start + (end - start) * ((x - left) / width); }
  [[nodiscard]] Seconds perPixel() const { return (end - start) / width; }
  [[nodiscard]] double right() const { return left + width; }
};

/// One row: its place, the values at its edges.
struct RowFrame {
  TimeFrame time;
  QRectF rect;
  recording::MinMax limits{-1.0, 1.0};

  [[nodiscard]] double yOf(double value) const {
    return rect.bottom() - (value - limits.min) / (limits.max - limits.min) * rect.height();
  }
  [[nodiscard]] double valueOf(double y) const {
    return limits.min + (rect.bottom() - y) / rect.height() * (limits.max - limits.min);
  }
};

/// Diagonal lines, 8 pixels apart, that join those of the neighbours.
void drawHatching(QCPPainter& painter, const QRectF& rect, const QColor& color);

/// Text on a chip of `ground`, if it fits into `room`; true if it was drawn.
bool drawChip(QCPPainter& painter, const QRectF& room, const QString& text, const QColor& ink,
              const QColor& ground);

/// Keeps texts of one line apart.
class TextRoom {
public:
  /// True, and taken, if nothing lies between `left` and `right` yet.
  bool take(double left, double right);
  /// Taken whatever lies there.
  void occupy(double left, double right) { taken_.emplace_back(left, right); }

private:
  std::vector<std::pair<double, double>> taken_;
};

/// The two lines of text of a strip between rows.
struct StripRoom {
  TextRoom upper, lower;
};

} // namespace chronodrome::ui::evidence
