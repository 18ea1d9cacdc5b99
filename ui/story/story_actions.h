// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <functional>
#include <optional>

#include <QAction>
#include <QKeySequence>
#include <QList>
#include <QObject>

#include "ui/document/session_document.h"
#include "ui/story/gestures.h"
#include "ui/story/travel.h"
#include "ui/story/window_editing.h"

namespace chronodrome::ui::story {

/// Everything that the story can do, as actions with their keys. The keys work while the story has the focus.
class StoryActions : public QObject {
  Q_OBJECT
public:
  struct Parts {
    SessionDocument& document;
    StoryFigure& figure;
    Travel& travel;
    WindowEditing& editing;
    Gestures& gestures;
  };
  StoryActions(const Parts& parts, QWidget& keysOn);

  [[nodiscard]] const QList<QAction*>& all() const { return all_; }
  [[nodiscard]] QAction* wholeRecording() const { return whole_; }
  [[nodiscard]] QAction* release() const { return release_; }
  [[nodiscard]] QAction* leaveStepOut() const { return leave_step_out_; }
  [[nodiscard]] QAction* leaveStretchOut() const { return leave_stretch_out_; }
  /// Enables what can be done now.
  void refresh();

Q_SIGNALS:
  void viewWanted(chronodrome::Seconds start, chronodrome::Seconds end);
  /// Asks for the reason to leave this out.
  void exclusionWanted(chronodrome::Seconds start, chronodrome::Seconds end);

private:
  struct Words {
    const char* name;
    const char* text;
    const char* toolTip;
    QKeySequence key;
  };
  QAction* add(const Words& words, std::function<void()> run);
  void addTravel();
  void addZoom();
  void addWindow();
  void nudge(Grip grip, double seconds);
  void releaseChosen();
  void leaveChosenOut();
  void zoomView(double factor);

  Parts parts_;
  QWidget& keys_on_;
  QList<QAction*> all_;
  QList<QAction*> of_chosen_; ///< need a chosen plateau that may be edited
  QAction* whole_ = nullptr;
  QAction* release_ = nullptr;
  QAction* leave_step_out_ = nullptr;
  QAction* leave_stretch_out_ = nullptr;
};

} // namespace chronodrome::ui::story
