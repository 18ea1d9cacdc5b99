// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <vector>

#include <QDateTime>
#include <QString>
#include <QStringList>

#include "base/result.h"
#include "ui/document/places.h"

namespace chronodrome::ui {

class SessionDocument;

/// The journal of a program that ended without saving.
struct LeftOver {
  QString journal;             ///< its file
  QString title;               ///< as SessionDocument::title() was
  QString session_path;        ///< empty: never saved
  QStringList recording_paths; ///< absolute
  QDateTime written;           ///< of the last edit that is kept, UTC
  int edits = 0;               ///< that were not saved
  bool is_recording_there = false;
};

/// What a crash left behind: to be looked for when the program starts.
class Recovery {
public:
  explicit Recovery(const QString& folder = recoveryFolder());

  /// Journals of programs that do not run any more, the latest first. A journal of a running program, or of
  /// one on another machine, is left alone; one that says the same as the session on the disk is removed.
  [[nodiscard]] std::vector<LeftOver> leftOver() const;
  /// Reads the session in the background and puts its unsaved edits in place as one step that can be undone:
  /// so both versions can be compared. SessionDocument::opened() or failed() follows. The journal is removed
  /// as soon as the document keeps the edits itself.
  void restore(const LeftOver& what, SessionDocument& document) const;
  Done discard(const LeftOver& what) const;

private:
  QString folder_;
};

} // namespace chronodrome::ui
