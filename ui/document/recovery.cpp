// Chronodrome, GPL-3.0-or-later.
#include "ui/document/recovery.h"

#include <algorithm>

#include <QDir>
#include <QFile>
#include <QFileInfo>

#include "ui/document/journal_entry.h"
#include "ui/document/session_document.h"

namespace chronodrome::ui {
namespace {

/// True if a crash came between saving the session and removing its journal.
bool saysNothingNew(const JournalEntry& entry) {
  if (entry.session_path.isEmpty() || entry.log) return false;
  QFile file(entry.session_path);
  return file.open(QIODevice::ReadOnly) && file.readAll() == QByteArray::fromStdString(entry.session);
}

} // namespace

Recovery::Recovery(const QString& folder) : folder_(folder) {}

std::vector<LeftOver> Recovery::leftOver() const {
  std::vector<LeftOver> found;
  const QDir folder(folder_);
  for (const QFileInfo& info : folder.entryInfoList({QStringLiteral("*.journal")}, QDir::Files)) {
    const auto entry = readJournal(info.filePath());
    if (!entry || lifeOf(entry->writer) != Life::dead) continue;
    if (saysNothingNew(*entry)) {
      QFile::remove(info.filePath());
      continue;
    }
    LeftOver left;
    left.journal = info.filePath();
    left.title = entry->title;
    left.session_path = entry->session_path;
    left.recording_paths = entry->recording_paths;
    left.written = entry->written;
    left.edits = entry->edits;
    left.is_recording_there = std::all_of(entry->recording_paths.begin(), entry->recording_paths.end(),
                                          [](const QString& path) { return QFile::exists(path); });
    found.push_back(std::move(left));
  }
  std::sort(found.begin(), found.end(),
            [](const LeftOver& a, const LeftOver& b) { return a.written > b.written; });
  return found;
}

void Recovery::restore(const LeftOver& what, SessionDocument& document) const {
  document.recover(what.journal);
}

Done Recovery::discard(const LeftOver& what) const {
  if (QFile::remove(what.journal) || !QFile::exists(what.journal)) return done();
  return Error{ErrorCode::cannot_write,
               what.journal.toStdString(),
               {},
               "the journal of unsaved edits cannot be removed",
               "look whether its folder may be written"};
}

} // namespace chronodrome::ui
