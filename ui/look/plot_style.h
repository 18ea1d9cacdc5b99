// Chronodrome, GPL-3.0-or-later.
#pragma once

#include "ui/look/custom_plot.h"

#include "ui/look/theme.h"

namespace chronodrome::ui::look {

/// Fast defaults for a plot: no antialiasing, cosmetic pens, no caching that costs memory at scale 2, the
/// theme's ground. Call once, and again when the theme changes.
void dress(QCustomPlot& plot, const Theme& theme);

/// Axes of one rectangle: thin base lines, quiet numbers, the theme's fonts, faint grid lines, ticks outside.
void dress(QCPAxisRect& rect, const Theme& theme);

/// Thin cosmetic pen.
QPen thinPen(const QColor& color, Qt::PenStyle style = Qt::SolidLine);
/// For emphasis: two pixels. Never for traces.
QPen thickPen(const QColor& color, Qt::PenStyle style = Qt::SolidLine);

/// Time axis in minutes and seconds of the recording: `12:30`, `12:30.25`; ticks at round steps of 1, 2, 5,
/// 10, 15, 30 s and so on.
class TimeTicker : public QCPAxisTicker {
protected:
  double getTickStep(const QCPRange& range) override;
  int getSubTickCount(double tickStep) override;
  QString getTickLabel(double tick, const QLocale& locale, QChar formatChar, int precision) override;

private:
  double step_ = 1.0;
};

/// Numbers at an axis as look::plainText would write them: a point, a real minus sign, no trailing exponents.
class NumberTicker : public QCPAxisTicker {
protected:
  double getTickStep(const QCPRange& range) override;
  QString getTickLabel(double tick, const QLocale& locale, QChar formatChar, int precision) override;

private:
  double step_ = 1.0;
};

} // namespace chronodrome::ui::look
