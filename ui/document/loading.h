// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>
#include <optional>
#include <string>
#include <vector>

#include <QString>

#include "base/result.h"
#include "session/analysis.h"
#include "ui/document/content.h"

namespace chronodrome::ui {

/// What is to be opened.
struct ReadRequest {
  QString session; ///< the session file
  QString journal; ///< instead: a journal of unsaved edits
};

/// What was read, ready to be put in place.
struct ReadSession {
  Content content; ///< as the files say
  std::shared_ptr<const recording::Recording> recording;
  std::optional<Content> recovered; ///< from a journal: `content` with the edits that were not saved
  bool is_saved = true;             ///< false: from a journal of a session that has no file (any more)
};

/// Reads a session with all that it names. A session of a newer program is read too. Runs on any thread.
/// Requires: watch.cancelled is set. Errors: those of session::load_session and readJournal; cancelled.
Result<ReadSession> readSession(const ReadRequest& request, const session::Watch& watch);

} // namespace chronodrome::ui
