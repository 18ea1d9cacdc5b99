// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>
#include <optional>

#include <QObject>

#include "session/session_result.h"
#include "ui/document/session_document.h"
#include "ui/story/story_figure.h"
#include "ui/story/window_drag.h"

namespace chronodrome::ui::story {

/// Moving plateaus, by mouse or by keys: shows what the document would make of each place, and places the
/// window or leaves it.
class WindowEditing : public QObject {
  Q_OBJECT
public:
  WindowEditing(SessionDocument& document, StoryFigure& figure, QObject* parent = nullptr);

  [[nodiscard]] bool isActive() const { return drag_.has_value(); }
  /// `response`: index into the responses that the figure shows. Nothing happens in a read-only session.
  void begin(std::size_t response, Grip grip, bool ofAllMeasures);
  void moveTo(Seconds by);
  /// As begin() and moveTo(), one key press after the other.
  void nudge(std::size_t response, Grip grip, Seconds by);
  /// Places the window where it is now.
  void place();
  /// Leaves it where it was.
  void abort();

Q_SIGNALS:
  /// What the answer should show meanwhile; null: the document's own result again.
  void previewChanged(std::shared_ptr<const chronodrome::session::SessionResult> result);

private:
  void showPreview();
  void finish();

  SessionDocument& document_;
  StoryFigure& figure_;
  std::optional<WindowDrag> drag_;
  std::size_t response_ = 0;
};

} // namespace chronodrome::ui::story
