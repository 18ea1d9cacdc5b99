// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <QStringList>

#include "ui/story/figure_part.h"

namespace chronodrome::ui::story {

/// What the user moves.
struct TouchState {
  std::optional<recording::Span> frame;     ///< what the evidence shows
  std::optional<recording::Span> selection; ///< a stretch being chosen
  std::optional<Seconds> pointer;
  /// Of a plateau being dragged, and the row it lies in.
  struct Words {
    QStringList lines;
    QRectF band;
  };
  std::optional<Words> words;
  bool hasFocus = false;
};

/// The touch state, above the drawing and redrawn without it.
class TouchLayer : public FigurePart {
public:
  /// `top`, `bottom`: the first and the last row.
  TouchLayer(QCustomPlot& plot, const FigureState& state, const TouchState& touch, QCPAxisRect* top,
             QCPAxisRect* bottom)
      : FigurePart(plot, kTouchLayer, state, top), touch_(touch), bottom_(bottom) {}

  /// Where the frame's tab lies.
  [[nodiscard]] QRectF tabRect() const;
  /// The frame, from the tab to the last row.
  [[nodiscard]] QRectF frameRect() const;

protected:
  [[nodiscard]] QRect clipRect() const override { return parentPlot()->viewport(); }
  void draw(QCPPainter* painter) override;

private:
  void drawFrame(QCPPainter& painter) const;
  void drawSelection(QCPPainter& painter) const;
  void drawWords(QCPPainter& painter) const;

  const TouchState& touch_;
  QPointer<QCPAxisRect> bottom_;
};

/// Height above the first row that belongs to the frame's tab.
inline constexpr int kTabStrip = 12;

} // namespace chronodrome::ui::story
