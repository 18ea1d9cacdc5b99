// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>

#include <QString>

class QLockFile;

namespace chronodrome::ui {

/// Tells two programs apart that open one session: the first holds an advisory lock file beside it
/// (`.NAME.session.json.lock`), the second learns who that is. The lock of a process that has ended is
/// removed. In Qt's test mode the lock file lies in the state folder, so that tests leave the samples alone.
class SessionLock {
public:
  SessionLock();
  ~SessionLock();
  SessionLock(const SessionLock&) = delete;
  SessionLock& operator=(const SessionLock&) = delete;

  /// Gives up the lock that is held and takes that of the session; false if another holds it, or if no file
  /// can be made in the folder.
  bool take(const QString& session);
  void release();
  [[nodiscard]] bool isHeld() const;
  /// After take() was refused: `anna on bench-3 (process 4711)`. Empty: nobody, the folder cannot be written.
  [[nodiscard]] const QString& holder() const { return holder_; }

private:
  std::unique_ptr<QLockFile> file_;
  QString holder_;
};

} // namespace chronodrome::ui
