// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>

#include <QByteArray>
#include <QDateTime>
#include <QString>
#include <QStringList>

#include "base/result.h"
#include "ui/document/process_identity.h"

namespace chronodrome::ui {

/// What a crash must not lose: a session with its unsaved edits, and whose it is.
struct JournalEntry {
  ProcessIdentity writer;
  QDateTime written; ///< UTC
  QString title;
  QString session_path;           ///< absolute; empty: never saved
  QStringList recording_paths;    ///< absolute, in the session's order
  int edits = 0;                  ///< that were not saved
  std::string session;            ///< text of the session file
  std::optional<std::string> log; ///< text of the drug log; nothing: not edited
};

/// A journal is one JSON object (`"format": "chronodrome-journal"`), for this program alone.
QByteArray textOf(const JournalEntry& entry);
/// Errors: file_missing, wrong_format (no journal, or one of a newer program).
Result<JournalEntry> readJournal(const QString& file);

} // namespace chronodrome::ui
