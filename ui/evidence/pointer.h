// Chronodrome, GPL-3.0-or-later.
#pragma once

#include "ui/look/custom_plot.h"

#include <optional>

#include "base/quantity.h"

namespace chronodrome::ui::evidence {

class EvidenceFigure;

/// Makes gestures out of what the mouse does on a figure. Changes nothing itself.
class Pointer : public QObject {
  Q_OBJECT
public:
  explicit Pointer(EvidenceFigure& figure);

  /// Where the pointer is on the traces; nothing: elsewhere.
  [[nodiscard]] std::optional<QPointF> position() const { return position_; }
  [[nodiscard]] bool isDraggingMark() const { return hand_ == Hand::mark; }
  /// Lets go of what is being dragged; it counts as not done.
  void abort();

Q_SIGNALS:
  void pointed(int row, double x); ///< moved over a row, no button held
  void left();
  void zoomed(double factor, double x); ///< factor below 1: closer
  void panned(double pixels);           ///< to the right: earlier times come into view
  void clicked(int row, double x);      ///< beside a mark
  void markChosen(int row, std::size_t index);
  void markDragged(int row, std::size_t index, double x);
  void markDropped(int row, std::size_t index, double x);
  void rowDoubleClicked(int row, double x);
  void stretchDragged(int row, double x1, double x2); ///< row -1: all
  void axisDragged(int row, double pixels);           ///< upwards: positive
  void axisZoomed(int row, double factor, double y);
  void axisDoubleClicked(int row);
  void aborted();

protected:
  bool eventFilter(QObject* watched, QEvent* event) override;

private:
  enum class Hand { free, pressed, panning, mark, stretch, axis };
  bool press(const QMouseEvent& event);
  bool move(const QMouseEvent& event);
  bool release(const QMouseEvent& event);
  bool doubleClick(const QMouseEvent& event);
  bool wheel(const QWheelEvent& event);
  void drag(const QPointF& at, const QPointF& step);
  void begin(const QPointF& at);
  void showShape(const QPointF& at);

  EvidenceFigure& figure_;
  Hand hand_ = Hand::free;
  std::optional<QPointF> position_;
  QPointF pressed_, last_;
  Qt::KeyboardModifiers modifiers_;
  Qt::MouseButton button_ = Qt::NoButton;
  int row_ = -1;
  std::optional<std::size_t> mark_;
};

} // namespace chronodrome::ui::evidence
