// Chronodrome, GPL-3.0-or-later.
#include "ui/story/gestures.h"

#include <algorithm>
#include <cmath>

#include <QApplication>
#include <QHelpEvent>
#include <QMouseEvent>
#include <QWheelEvent>

namespace chronodrome::ui::story {
namespace {

constexpr double kZoomStep = 1.25; // a notch of the wheel

bool isBand(Hit::Part part) {
  return part == Hit::Part::band || part == Hit::Part::bandStart || part == Hit::Part::bandEnd;
}

bool isFrame(Hit::Part part) {
  return part == Hit::Part::frameTab || part == Hit::Part::frameBody || part == Hit::Part::frameStart ||
         part == Hit::Part::frameEnd;
}

} // namespace

Gestures::Gestures(QCustomPlot& plot, StoryFigure& figure, Focus& focus, WindowEditing& editing,
                   QObject* parent)
    : QObject(parent), plot_(plot), figure_(figure), focus_(focus), editing_(editing) {
  plot_.setMouseTracking(true);
  plot_.installEventFilter(this);
}

void Gestures::armSelection() {
  is_armed_ = true;
  plot_.setCursor(Qt::CrossCursor);
}

bool Gestures::abort() {
  const bool wasArmed = std::exchange(is_armed_, false);
  const Doing was = std::exchange(doing_, Doing::nothing);
  if (was == Doing::frame) focus_.show(frame_at_press_.start, frame_at_press_.end);
  if (was == Doing::selection) {
    figure_.touch().selection.reset();
    figure_.replotTouch();
  }
  const bool wasEditing = editing_.isActive();
  editing_.abort();
  plot_.unsetCursor();
  return wasArmed || wasEditing || (was != Doing::nothing && was != Doing::pressed);
}

bool Gestures::eventFilter(QObject* watched, QEvent* event) {
  switch (event->type()) {
  case QEvent::MouseButtonPress:
    press(*static_cast<QMouseEvent*>(event));
    return true;
  case QEvent::MouseMove:
    move(*static_cast<QMouseEvent*>(event));
    return true;
  case QEvent::MouseButtonRelease:
    release(*static_cast<QMouseEvent*>(event));
    return true;
  case QEvent::MouseButtonDblClick:
    return true; // the first click has gone there
  case QEvent::Wheel:
    wheel(*static_cast<QWheelEvent*>(event));
    return true;
  case QEvent::ContextMenu: {
    const auto* menu = static_cast<QContextMenuEvent*>(event);
    if (menu->reason() == QContextMenuEvent::Mouse)
      Q_EMIT menuWanted(figure_.hitAt(menu->pos()), menu->globalPos());
    return menu->reason() == QContextMenuEvent::Mouse;
  }
  case QEvent::Leave:
    Q_EMIT pointerLeft();
    return false;
  default:
    return QObject::eventFilter(watched, event);
  }
}

void Gestures::press(const QMouseEvent& event) {
  if (event.button() != Qt::LeftButton) return;
  plot_.setFocus(Qt::MouseFocusReason);
  editing_.abort(); // of a move by keys that was not placed
  doing_ = Doing::pressed;
  press_place_ = event.position();
  press_keys_ = event.modifiers();
  pressed_ = figure_.hitAt(press_place_);
  frame_at_press_ = {focus_.start(), focus_.end()};
}

void Gestures::startDrag() {
  const bool isChoosing = is_armed_ || press_keys_.testFlag(Qt::AltModifier);
  if (isChoosing && pressed_.part != Hit::Part::gutter && pressed_.part != Hit::Part::nothing) {
    doing_ = Doing::selection;
  } else if (isBand(pressed_.part)) {
    const Grip grip = pressed_.part == Hit::Part::bandStart ? Grip::start
                      : pressed_.part == Hit::Part::bandEnd ? Grip::end
                                                            : Grip::body;
    editing_.begin(pressed_.response, grip, press_keys_.testFlag(Qt::ShiftModifier));
    if (editing_.isActive()) doing_ = Doing::window;
  } else if (isFrame(pressed_.part)) {
    doing_ = Doing::frame;
  }
}

void Gestures::dragFrame(Seconds by) {
  recording::Span to = frame_at_press_;
  if (pressed_.part == Hit::Part::frameStart) to.start = std::min(to.start + by, to.end);
  if (pressed_.part == Hit::Part::frameEnd) to.end = std::max(to.end + by, to.start);
  if (pressed_.part == Hit::Part::frameTab || pressed_.part == Hit::Part::frameBody)
    to = {to.start + by, to.end + by};
  focus_.show(to.start, to.end);
}

void Gestures::move(const QMouseEvent& event) {
  const QPointF place = event.position();
  if (doing_ == Doing::nothing) {
    showCursor(place);
    Q_EMIT pointerMoved(place);
    return;
  }
  if (doing_ == Doing::pressed &&
      (place - press_place_).manhattanLength() >= QApplication::startDragDistance() / 2.0)
    startDrag();
  const Seconds by = figure_.timeAt(place.x()) - figure_.timeAt(press_place_.x());
  if (doing_ == Doing::frame) dragFrame(by);
  if (doing_ == Doing::window) editing_.moveTo(by);
  if (doing_ == Doing::selection) {
    const Seconds end = focus_.recordingEnd();
    const Seconds from = std::clamp(figure_.timeAt(press_place_.x()), Seconds(0.0), end);
    const Seconds to = std::clamp(figure_.timeAt(place.x()), Seconds(0.0), end);
    figure_.touch().selection = recording::Span{std::min(from, to), std::max(from, to)};
    figure_.replotTouch();
  }
}

void Gestures::release(const QMouseEvent& event) {
  if (event.button() != Qt::LeftButton) return;
  const Doing was = std::exchange(doing_, Doing::nothing);
  if (was == Doing::pressed &&
      (event.position() - press_place_).manhattanLength() < QApplication::startDragDistance()) {
    Q_EMIT clicked(pressed_);
  } else if (was == Doing::window) {
    editing_.place();
  } else if (was == Doing::selection && figure_.touch().selection) {
    is_armed_ = false;
    const auto chosen = *figure_.touch().selection;
    Q_EMIT stretchChosen(chosen.start, chosen.end);
  }
  showCursor(event.position());
}

void Gestures::wheel(const QWheelEvent& event) {
  const QPointF place = event.position();
  const QPoint turn = event.angleDelta();
  const Hit hit = figure_.hitAt(place);
  if (hit.part == Hit::Part::gutter) {
    Q_EMIT rowsScrolled(turn.y() > 0 ? -1 : 1);
    return;
  }
  if (hit.part == Hit::Part::nothing) return;
  const bool isSideways = turn.x() != 0 && turn.y() == 0;
  if (isSideways || event.modifiers().testFlag(Qt::ShiftModifier)) {
    const double notches = double(isSideways ? turn.x() : turn.y()) / 120.0;
    const Seconds by = -0.1 * notches * (focus_.end() - focus_.start());
    focus_.show(focus_.start() + by, focus_.end() + by);
    return;
  }
  const double factor = std::pow(kZoomStep, -double(turn.y()) / 120.0);
  // The pointer may stand beside the frame; the zoom is about its nearest time inside.
  if (event.modifiers().testFlag(Qt::ControlModifier)) {
    const auto view = figure_.view();
    Q_EMIT viewWanted(hit.time - (hit.time - view.start) * factor, hit.time + (view.end - hit.time) * factor);
  } else {
    const Seconds about = std::clamp(hit.time, focus_.start(), focus_.end());
    focus_.show(about - (about - focus_.start()) * factor, about + (focus_.end() - about) * factor);
  }
}

void Gestures::showCursor(QPointF place) {
  if (is_armed_) {
    plot_.setCursor(Qt::CrossCursor);
    return;
  }
  switch (figure_.hitAt(place).part) {
  case Hit::Part::bandStart:
  case Hit::Part::bandEnd:
  case Hit::Part::frameStart:
  case Hit::Part::frameEnd:
    plot_.setCursor(Qt::SizeHorCursor);
    break;
  case Hit::Part::band:
  case Hit::Part::frameTab:
    plot_.setCursor(Qt::OpenHandCursor);
    break;
  default:
    plot_.unsetCursor();
  }
}

} // namespace chronodrome::ui::story
