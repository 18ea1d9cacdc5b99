// Chronodrome, GPL-3.0-or-later.
#pragma once

#include "ui/story/figure_part.h"

namespace chronodrome::ui::story {

/// The plateaus of one measure: where each response is read. Steady: solid edges and a full value line; not
/// steady: dashed edges and an open line; without a value: hatched, with a short word. The chosen step in
/// accent.
class PlateauBands : public FigurePart {
public:
  enum class Part { ground, values };
  PlateauBands(QCustomPlot& plot, const FigureState& state, QCPAxisRect* rect, std::string measure, Part part)
      : FigurePart(plot, part == Part::ground ? kGroundLayer : kValueLayer, state, rect),
        measure_(std::move(measure)), part_(part) {}

  [[nodiscard]] QRectF bandOf(const response::Response& response) const;

protected:
  void draw(QCPPainter* painter) override;

private:
  void drawGround(QCPPainter& painter, const response::Response& response, const QRectF& band) const;
  void drawValue(QCPPainter& painter, const response::Response& response, const QRectF& band) const;
  void drawWord(QCPPainter& painter, const response::Response& response, const QRectF& band) const;
  [[nodiscard]] bool isChosen(const response::Response& response) const;

  std::string measure_;
  Part part_;
};

} // namespace chronodrome::ui::story
