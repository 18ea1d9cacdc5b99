// Chronodrome, GPL-3.0-or-later.
#pragma once

#include "document/session_file.h"
#include "recording/time_base.h"
#include "response/response.h"

namespace chronodrome::ui::story {

enum class Grip { start, end, body };

/// A plateau's window on its way to another place. It stays in its step, and at least kLeastWindow long (or
/// as long as the step, if that is shorter).
class WindowDrag {
public:
  /// `step`: where it may lie. `ofAllMeasures`: the windows of all measures of the step move together.
  WindowDrag(const response::Response& response, recording::Span step, Grip grip, bool ofAllMeasures);

  /// Moves what is held by `by`, seen from where it was at first.
  void moveTo(Seconds by);
  /// Holds something else from now on, at the place reached.
  void hold(Grip grip);

  [[nodiscard]] bool isMoved() const;
  [[nodiscard]] recording::Span window() const { return now_; }
  [[nodiscard]] document::WindowChoice choice() const;

  static constexpr Seconds kLeastWindow{1.0};

private:
  document::WindowChoice choice_;
  recording::Span step_, first_, now_, held_;
  Grip grip_;
};

} // namespace chronodrome::ui::story
