// Chronodrome, GPL-3.0-or-later.
#include "ui/evidence/pointer.h"

#include <algorithm>
#include <cmath>
#include <utility>

#include <QApplication>
#include <QMouseEvent>
#include <QWheelEvent>

#include "ui/evidence/evidence_figure.h"

namespace chronodrome::ui::evidence {
namespace {

constexpr double kMarkReach = 5.0;  // pixels
constexpr double kZoomStep = 1.25;  // of one notch of a wheel
constexpr double kNotch = 120.0;    // Qt's units of one
constexpr double kPanOfNotch = 0.1; // of the width

} // namespace

Pointer::Pointer(EvidenceFigure& figure) : QObject(&figure), figure_(figure) {
  figure.installEventFilter(this);
}

bool Pointer::eventFilter(QObject*, QEvent* event) {
  if (figure_.scene().rows() == 0) return false;
  switch (event->type()) {
  case QEvent::MouseButtonPress:
    return press(*static_cast<QMouseEvent*>(event));
  case QEvent::MouseMove:
    return move(*static_cast<QMouseEvent*>(event));
  case QEvent::MouseButtonRelease:
    return release(*static_cast<QMouseEvent*>(event));
  case QEvent::MouseButtonDblClick:
    return doubleClick(*static_cast<QMouseEvent*>(event));
  case QEvent::Wheel:
    return wheel(*static_cast<QWheelEvent*>(event));
  case QEvent::Leave:
    position_.reset();
    Q_EMIT left();
    return false;
  default:
    return false;
  }
}

void Pointer::abort() {
  if (hand_ == Hand::free) return;
  hand_ = Hand::free;
  figure_.unsetCursor();
  Q_EMIT aborted();
}

bool Pointer::press(const QMouseEvent& event) {
  figure_.setFocus(Qt::MouseFocusReason);
  if (event.button() != Qt::LeftButton && event.button() != Qt::RightButton) return false;
  button_ = event.button();
  pressed_ = last_ = event.position();
  modifiers_ = event.modifiers();
  row_ = figure_.rowAt(pressed_.y());
  mark_.reset();
  if (row_ >= 0 && figure_.marksAreDistinct(row_)) mark_ = figure_.markAt(row_, pressed_.x(), kMarkReach);
  hand_ = Hand::pressed;
  return true;
}

/// The first step away from where the button went down decides what is being dragged.
void Pointer::begin(const QPointF& at) {
  if (std::hypot(at.x() - pressed_.x(), at.y() - pressed_.y()) < QApplication::startDragDistance() / 2.0)
    return;
  if (figure_.isOnAxis(pressed_)) {
    hand_ = Hand::axis;
  } else if ((modifiers_ & Qt::AltModifier) || button_ == Qt::RightButton) {
    // Some desktops keep Alt and drag for themselves.
    hand_ = Hand::stretch;
  } else if (mark_) {
    hand_ = Hand::mark;
  } else {
    hand_ = Hand::panning;
    figure_.setCursor(Qt::ClosedHandCursor);
  }
}

void Pointer::drag(const QPointF& at, const QPointF& step) {
  switch (hand_) {
  case Hand::panning:
    Q_EMIT panned(step.x());
    break;
  case Hand::mark:
    Q_EMIT markDragged(row_, *mark_, at.x());
    break;
  case Hand::stretch:
    Q_EMIT stretchDragged(modifiers_ & Qt::ShiftModifier ? -1 : row_, std::min(pressed_.x(), at.x()),
                          std::max(pressed_.x(), at.x()));
    break;
  case Hand::axis:
    if (row_ >= 0) Q_EMIT axisDragged(row_, -step.y());
    break;
  case Hand::free:
  case Hand::pressed:
    break;
  }
}

bool Pointer::move(const QMouseEvent& event) {
  const QPointF at = event.position();
  const bool is_inside = at.x() >= figure_.timeFrame().left && at.x() <= figure_.timeFrame().right();
  position_ = is_inside ? std::optional(at) : std::nullopt;
  if (event.buttons() == Qt::NoButton) {
    hand_ = Hand::free;
    showShape(at);
    if (is_inside) Q_EMIT pointed(figure_.rowAt(at.y()), at.x());
    return true;
  }
  if (hand_ == Hand::pressed) begin(at);
  const QPointF step = at - last_;
  if (hand_ != Hand::pressed) last_ = at;
  drag(at, step);
  return true;
}

void Pointer::showShape(const QPointF& at) {
  const int row = figure_.rowAt(at.y());
  if (figure_.isOnAxis(at)) {
    figure_.setCursor(Qt::SizeVerCursor);
  } else if (row >= 0 && figure_.marksAreDistinct(row) && figure_.markAt(row, at.x(), kMarkReach)) {
    figure_.setCursor(Qt::SizeHorCursor);
  } else {
    figure_.unsetCursor();
  }
}

bool Pointer::release(const QMouseEvent& event) {
  if (event.button() != button_) return false;
  const Hand hand = std::exchange(hand_, Hand::free);
  const QPointF at = event.position();
  if (hand == Hand::panning) figure_.unsetCursor();
  if (hand == Hand::mark) Q_EMIT markDropped(row_, *mark_, at.x());
  if (hand == Hand::pressed && button_ == Qt::LeftButton && !figure_.isOnAxis(at)) {
    if (mark_) {
      Q_EMIT markChosen(row_, *mark_);
    } else if (at.x() >= figure_.timeFrame().left) {
      Q_EMIT clicked(row_, at.x());
    }
  }
  return true;
}

bool Pointer::doubleClick(const QMouseEvent& event) {
  if (event.button() != Qt::LeftButton) return false;
  const QPointF at = event.position();
  const int row = figure_.rowAt(at.y());
  hand_ = Hand::free;
  if (row < 0) return true;
  if (figure_.isOnAxis(at)) {
    Q_EMIT axisDoubleClicked(row);
  } else {
    Q_EMIT rowDoubleClicked(row, at.x());
  }
  return true;
}

bool Pointer::wheel(const QWheelEvent& event) {
  // With Alt, some platforms turn the wheel's direction by a quarter.
  const double notches =
      (event.angleDelta().y() != 0 ? event.angleDelta().y() : event.angleDelta().x()) / kNotch;
  if (notches == 0.0) return true;
  const QPointF at = event.position();
  const bool sideways = (event.modifiers() & Qt::ShiftModifier) || event.angleDelta().y() == 0;
  const double factor = std::pow(kZoomStep, -notches);
  if (figure_.isOnAxis(at)) {
    Q_EMIT axisZoomed(figure_.rowAt(at.y()), factor, at.y());
  } else if (sideways) {
    Q_EMIT panned(notches * kPanOfNotch * figure_.timeFrame().width);
  } else {
    Q_EMIT zoomed(factor, at.x());
  }
  return true;
}

} // namespace chronodrome::ui::evidence
