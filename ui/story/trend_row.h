// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <vector>

#include "ui/story/figure_part.h"

namespace chronodrome::ui::story {

/// One measure over time: from afar a line through the true extremes of every pixel column, from near each
/// beat as a dot (open: flagged). Beats beyond the axis leave a small triangle at the edge, activations
/// without an answer a tick at the top, marks that were edited by hand a tick at the bottom.
class TrendRow : public FigurePart {
public:
  TrendRow(QCustomPlot& plot, const FigureState& state, QCPAxisRect* rect, std::size_t trend)
      : FigurePart(plot, kDataLayer, state, rect), trend_(trend) {}

protected:
  [[nodiscard]] QRect clipRect() const override;
  void draw(QCPPainter* painter) override;

private:
  [[nodiscard]] double yOf(double value) const;
  void drawLabel(QCPPainter& painter, const session::Trend& trend) const;
  void drawColumns(QCPPainter& painter, const session::Trend& trend);
  void drawPoints(QCPPainter& painter, const session::Trend& trend) const;
  void drawEdgeMark(QCPPainter& painter, double x, bool isAbove) const;
  void drawTicks(QCPPainter& painter, const session::Trend& trend, const std::vector<char>& blocked) const;
  [[nodiscard]] std::size_t columnCount(const QCPPainter& painter) const;

  std::size_t trend_;
  /// Of the last drawing: moving the frame or the pointer changes none of it.
  struct Columns {
    const session::Trend* of = nullptr;
    Seconds start, end;
    std::vector<session::TrendColumn> columns;
  } cache_;
};

} // namespace chronodrome::ui::story
