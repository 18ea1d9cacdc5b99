// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <vector>

#include "ui/answer/legend.h"

namespace chronodrome::ui::answer {

/// Draws the curves of a panel over the axes of a plot: band, lines, points, the EC50 on the axis, the axis
/// break and the legend in the margin above. The same on the screen and on paper.
class CurveLayer : public QCPLayerable {
  Q_OBJECT
public:
  explicit CurveLayer(QCustomPlot* plot);

  void setView(const session::CurveView* view, const look::Theme& theme, const QColor& color);
  void setLegend(std::vector<LegendEntry> legend) { legend_ = std::move(legend); }
  /// The chosen step, drawn in accent; points of the chosen curve by index.
  void setChosen(std::optional<std::size_t> point) { chosen_ = point; }
  /// A frame in accent around the plot: it has the keyboard.
  void setFramed(bool framed) { framed_ = framed; }
  /// Where a point of the chosen curve is drawn, in pixels; the bottom edge for one without a value.
  [[nodiscard]] QPointF centreOf(const session::PlottedPoint& point) const;

protected:
  void applyDefaultAntialiasingHint(QCPPainter* painter) const override;
  void draw(QCPPainter* painter) override;

private:
  [[nodiscard]] QPointF at(double position, double response) const;
  [[nodiscard]] QRectF inner() const;
  void drawBand(QPainter& painter) const;
  void drawLines(QPainter& painter, const session::CurveSeries& series, const QColor& color,
                 double width) const;
  void drawPoints(QPainter& painter, const session::CurveSeries& series, Outline outline,
                  const QColor& color) const;
  void drawMissing(QPainter& painter, const session::PlottedPoint& point, Outline outline) const;
  void drawChosen(QPainter& painter) const;
  void drawEc50(QPainter& painter) const;

  const session::CurveView* view_ = nullptr;
  const look::Theme* theme_ = nullptr;
  QColor color_;
  std::vector<LegendEntry> legend_;
  std::optional<std::size_t> chosen_;
  bool framed_ = false;
};

} // namespace chronodrome::ui::answer
