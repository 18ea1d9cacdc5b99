// Chronodrome, GPL-3.0-or-later.
#pragma once

#include "ui/story/figure_part.h"

namespace chronodrome::ui::story {

/// What was in the bath: one lane an agent, a staircase of its concentrations as the tissue met them; beneath
/// it when the heart was paced. A thin line leads from the logged time of an addition to its arrival.
class BathRibbon : public FigurePart {
public:
  using FigurePart::FigurePart;

  /// Height that the content needs.
  static int heightFor(const StoryContent* content);
  /// Index of the lane at a height, -1 for none.
  [[nodiscard]] int laneAt(double y) const;

protected:
  [[nodiscard]] QRect clipRect() const override;
  void draw(QCPPainter* painter) override;

private:
  [[nodiscard]] QRectF laneRect(std::size_t lane) const;
  [[nodiscard]] QRectF pacingRect() const;
  void drawLane(QCPPainter& painter, const session::BathLane& lane, const QRectF& rect) const;
  void drawLabels(QCPPainter& painter, const session::BathLane& lane, const QRectF& rect) const;
  void drawMarks(QCPPainter& painter, const QRectF& rect) const;
  void drawPacing(QCPPainter& painter, const QRectF& rect) const;
  void drawGutterText(QCPPainter& painter, const QRectF& lane, const QString& text) const;
  [[nodiscard]] QRectF barOf(const session::BathStep& step, const QRectF& lane) const;
};

} // namespace chronodrome::ui::story
