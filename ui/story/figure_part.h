// Chronodrome, GPL-3.0-or-later.
#pragma once

#include "ui/look/custom_plot.h"

#include <memory>
#include <optional>

#include <QPointer>

#include "ui/look/theme.h"
#include "ui/story/story_content.h"

namespace chronodrome::ui::story {

/// What all parts of the figure draw from. Owned by the figure.
struct FigureState {
  look::Theme theme;
  std::shared_ptr<const StoryContent> content; ///< null: nothing to draw
  /// Whose responses the bands show: the content's, or those of a preview.
  std::shared_ptr<const session::SessionResult> bands;
  std::optional<StepRef> chosen;
  bool isStale = false;
  int gutter = 0; ///< width left of the rows, for their labels
};

/// Layers of the figure, from the back to the front.
inline constexpr const char* kGroundLayer = "ground"; ///< plateaus, hatching
inline constexpr const char* kDataLayer = "data";     ///< trends, bath, rhythm
inline constexpr const char* kValueLayer = "values";  ///< value lines, labels
inline constexpr const char* kTouchLayer = "touch";   ///< evidence frame, selection: redrawn on its own

/// A part that is drawn at drawing time by plain painter code, so that it follows any size and device.
class FigurePart : public QCPLayerable {
public:
  FigurePart(QCustomPlot& plot, const char* layer, const FigureState& state, QCPAxisRect* rect)
      : QCPLayerable(&plot, QString::fromLatin1(layer)), state_(state), rect_(rect) {}

protected:
  [[nodiscard]] QRect clipRect() const override {
    return rect_ ? rect_->rect().adjusted(0, 0, 1, 2) : QRect();
  }
  void applyDefaultAntialiasingHint(QCPPainter* painter) const override { painter->setAntialiasing(false); }

  [[nodiscard]] double xOf(Seconds time) const {
    return rect_->axis(QCPAxis::atBottom)->coordToPixel(time.value());
  }
  [[nodiscard]] Seconds viewStart() const { return Seconds(rect_->axis(QCPAxis::atBottom)->range().lower); }
  [[nodiscard]] Seconds viewEnd() const { return Seconds(rect_->axis(QCPAxis::atBottom)->range().upper); }
  [[nodiscard]] double opacity() const { return state_.isStale ? 0.4 : 1.0; }

  const FigureState& state_;
  QPointer<QCPAxisRect> rect_;
};

/// Text on a plate of the surface's colour, so that it is read over lines and hatching.
void drawPlate(QPainter& painter, const QRectF& rect, const QString& text, const look::Theme& theme,
               const QColor& color);

} // namespace chronodrome::ui::story
