// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>

#include "ui/answer/curve_panel.h"

namespace chronodrome::ui::answer {

/// The concentration-response panel as a widget: points answer to the mouse (click, right click, resting) and
/// to the keys (left and right, Home, End, Enter, menu).
class AnswerFigure : public QCustomPlot {
  Q_OBJECT
public:
  explicit AnswerFigure(QWidget* parent = nullptr);

  /// Shows a view; the chosen step stays chosen if it is there.
  void setView(const session::CurveView& view, const look::Theme& theme, const QColor& color);
  void clearView();
  [[nodiscard]] const std::optional<session::CurveView>& view() const { return panel_.view(); }

  /// Marks the step; nothing: none.
  void setChosen(std::optional<Molar> concentration);
  [[nodiscard]] std::optional<std::size_t> chosen() const { return chosen_; }

  /// Where a point of the chosen curve stands, and which one stands there; for the mouse within 10 pixels.
  [[nodiscard]] QPointF pixelOf(std::size_t point) const;
  [[nodiscard]] std::optional<std::size_t> pointAt(const QPointF& pixel) const;

Q_SIGNALS:
  /// The user went to the point; `jumps`: with a click or Enter, else along the curve with the keys.
  void pointChosen(std::size_t point, bool jumps);
  void menuRequested(std::size_t point, const QPoint& globalPosition);

protected:
  bool event(QEvent* event) override;
  void mousePressEvent(QMouseEvent* event) override;
  void mouseMoveEvent(QMouseEvent* event) override;
  void keyPressEvent(QKeyEvent* event) override;
  void contextMenuEvent(QContextMenuEvent* event) override;
  void resizeEvent(QResizeEvent* event) override;
  void focusInEvent(QFocusEvent* event) override;
  void focusOutEvent(QFocusEvent* event) override;

private:
  void move(int steps);
  void choose(std::size_t point, bool jumps);
  void tell();

  CurvePanel panel_;
  std::optional<std::size_t> chosen_;
};

} // namespace chronodrome::ui::answer
