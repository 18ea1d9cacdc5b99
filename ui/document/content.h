// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>
#include <optional>
#include <vector>

#include "document/session_file.h"
#include "protocol/protocol.h"

namespace chronodrome::ui {

/// What a user can edit: the session and the drug log.
struct Content {
  document::SessionFile session;
  std::shared_ptr<const protocol::Protocol> log; ///< never null
};

/// The parts of a Content that an edit exchanged. A part that the edit did not touch is null in both states,
/// so that ten thousand marks do not cost ten thousand sessions.
struct ContentParts {
  /// The session without its review and windows, and without what says where it lies (see keepPlace()).
  std::shared_ptr<const document::SessionFile> body;
  std::shared_ptr<const std::vector<document::Correction>> review;
  std::shared_ptr<const std::vector<document::WindowChoice>> windows;
  std::shared_ptr<const protocol::Protocol> log;
};

/// One edit, forward and back.
struct ContentChange {
  ContentParts before, after;
  std::optional<document::Correction> appended; ///< put at the end of the review
  [[nodiscard]] bool isNothing() const;
};

/// Puts the states `after` in place. Requires: the content is as it was when the change was made.
void applyChange(Content& content, const ContentChange& change);
/// Puts the states `before` in place.
void revertChange(Content& content, const ContentChange& change);

/// What leads from one session or drug log to another; nothing where both say the same.
ContentChange sessionChange(const document::SessionFile& before, const document::SessionFile& after);
ContentChange logChange(const std::shared_ptr<const protocol::Protocol>& before,
                        const protocol::Protocol& after);
ContentChange windowsChange(const document::SessionFile& before, std::vector<document::WindowChoice> after);

/// Takes over from `place` what says where the session and its files lie and how they were read: paths,
/// digests and choices for CSV files, the drug log's path, the text as read. Edits and undo leave that alone.
void keepPlace(document::SessionFile& session, const document::SessionFile& place);

} // namespace chronodrome::ui
