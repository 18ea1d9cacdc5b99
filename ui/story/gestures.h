// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>

#include <QObject>
#include <QPoint>

#include "ui/document/focus.h"
#include "ui/story/story_figure.h"
#include "ui/story/window_editing.h"

class QHelpEvent;
class QMouseEvent;
class QWheelEvent;

namespace chronodrome::ui::story {

/// What the mouse does in the story: click to go, drag frame and plateaus, choose a stretch, zoom.
class Gestures : public QObject {
  Q_OBJECT
public:
  Gestures(QCustomPlot& plot, StoryFigure& figure, Focus& focus, WindowEditing& editing,
           QObject* parent = nullptr);

  /// The next drag chooses a stretch, as a drag with Alt does.
  void armSelection();
  /// Ends what is being dragged and puts it back. False: nothing was.
  bool abort();
  [[nodiscard]] bool isDragging() const { return doing_ != Doing::nothing && doing_ != Doing::pressed; }

Q_SIGNALS:
  void pointerMoved(const QPointF& place); ///< to read out; not while dragging
  void pointerLeft();
  void clicked(const chronodrome::ui::story::Hit& hit);
  void stretchChosen(chronodrome::Seconds start, chronodrome::Seconds end);
  void menuWanted(const chronodrome::ui::story::Hit& hit, const QPoint& globalPlace);
  void rowsScrolled(int by);
  void viewWanted(chronodrome::Seconds start, chronodrome::Seconds end); ///< of the story itself

protected:
  bool eventFilter(QObject* watched, QEvent* event) override;

private:
  enum class Doing { nothing, pressed, frame, window, selection };
  void press(const QMouseEvent& event);
  void move(const QMouseEvent& event);
  void release(const QMouseEvent& event);
  void wheel(const QWheelEvent& event);
  void startDrag();
  void dragFrame(Seconds by);
  void showCursor(QPointF place);

  QCustomPlot& plot_;
  StoryFigure& figure_;
  Focus& focus_;
  WindowEditing& editing_;
  Doing doing_ = Doing::nothing;
  bool is_armed_ = false;
  Hit pressed_;
  QPointF press_place_;
  Qt::KeyboardModifiers press_keys_;
  recording::Span frame_at_press_;
};

} // namespace chronodrome::ui::story
