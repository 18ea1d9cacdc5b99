// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <vector>

#include <QString>

#include "base/result.h"

namespace chronodrome::ui::window {

/// A session that comes with the program, with invented data.
struct SampleSession {
  QString name;   ///< of its folder
  QString folder; ///< where it was found
  QString about;  ///< one sentence
};

/// The sample sessions beside the program, or none.
std::vector<SampleSession> sampleSessions();

/// A copy in the user's data folder, so that trying the program changes nothing of it; an older copy with
/// edits is kept and opened again. Returns the path of its session file. Errors: cannot_write.
Result<QString> ownCopyOf(const SampleSession& sample);

} // namespace chronodrome::ui::window
