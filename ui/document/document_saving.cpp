// Chronodrome, GPL-3.0-or-later.
// Saving, and keeping unsaved edits for the case of a crash.
#include <filesystem>
#include <utility>

#include <QDateTime>
#include <QFile>

#include "base/digest.h"
#include "intake/protocol_reader.h"
#include "results/protocol_writer.h"
#include "results/session_writer.h"
#include "ui/document/places.h"
#include "ui/document/saving.h"
#include "ui/document/session_document.h"
#include "ui/document/session_document_private.h"

namespace fs = std::filesystem;

namespace chronodrome::ui {
namespace {

Error cannotSave(const QString& path, const QString& what, const QString& remedy) {
  return {ErrorCode::cannot_write, path.toStdString(), {}, what.toStdString(), remedy.toStdString()};
}

/// Nobody else's changes are written over: neither a colleague's, on a shared folder, nor one's own in an
/// editor.
Done stillAsRead(const document::SessionFile& session) {
  QFile file(QString::fromStdString(session.path));
  if (!file.open(QIODevice::ReadOnly)) return done(); // it is gone, and comes back
  QByteArray text = file.readAll();
  if (text.startsWith("\xEF\xBB\xBF")) text.remove(0, 3);
  if (text == QByteArrayView(session.as_read.data(), static_cast<qsizetype>(session.as_read.size())))
    return done();
  return cannotSave(
      file.fileName(), QStringLiteral("another program has changed the session file since it was opened"),
      QStringLiteral("save under another name and compare the two, or save under this name again to "
                     "replace it"));
}

Done stillAsRead(const std::string& log, const std::shared_ptr<const protocol::Protocol>& saved) {
  const auto on_disk = intake::read_protocol(log);
  if (!on_disk || !saved || logChange(saved, *on_disk).isNothing()) return done();
  return cannotSave(
      QString::fromStdString(log),
      QStringLiteral("another program has changed the drug log since it was opened"),
      QStringLiteral("save the session under another name: it then gets a drug log of its own"));
}

/// The drug log's file as a session at `folder` names it; nothing if it lies outside.
std::optional<std::string> logFrom(const document::SessionFile& session, const fs::path& folder) {
  std::error_code fault;
  const fs::path log = fs::weakly_canonical(fs::path(session.folder) / *session.protocol_file, fault);
  const fs::path way = log.lexically_relative(fs::weakly_canonical(folder, fault));
  if (way.empty() || *way.begin() == "..") return std::nullopt;
  return way.generic_string();
}

} // namespace

Done SessionDocument::save() {
  const auto& session = d_->content.session;
  if (!session.path.empty()) {
    if (Done same = stillAsRead(session); !same) return same;
  }
  return d_->saveTo(path());
}

Done SessionDocument::saveAs(const QString& path) {
  return d_->saveTo(absolutePath(path));
}

bool SessionDocument::Private::isLogEdited() const {
  if (saved_log == content.log) return false;
  return !saved_log || !logChange(saved_log, *content.log).isNothing();
}

Done SessionDocument::Private::saveTo(const QString& path) {
  if (!is_open)
    return cannotSave(path, QStringLiteral("no session is open"), QStringLiteral("open one first"));
  if (path.isEmpty()) {
    return cannotSave(path, QStringLiteral("the session has no name yet"),
                      QStringLiteral("save it under a name, in the folder of its recording"));
  }
  const bool at_home = path == q->path();
  if (at_home && !read_only_reason.isEmpty())
    return cannotSave(path, QStringLiteral("the session cannot be saved here"), read_only_reason);
  auto planned = sessionAt(path, content.session, *recording);
  if (!planned) return planned.error();

  // The session's own lock is kept until the copy stands.
  std::unique_ptr<SessionLock> its_lock;
  if (!at_home) {
    its_lock = std::make_unique<SessionLock>();
    if (!its_lock->take(path) && !its_lock->holder().isEmpty()) {
      return cannotSave(path, QStringLiteral("the session is open elsewhere, by ") + its_lock->holder(),
                        QStringLiteral("close it there, or choose another name"));
    }
  }
  // The log first: a session must not name a log that is not there.
  const auto log = saveLog(*planned, at_home);
  if (!log) return log.error();
  if (Done written = results::write_session(*planned, planned->path); !written) return written;
  QFile file(path);
  if (file.open(QIODevice::ReadOnly)) planned->as_read = file.readAll().toStdString();
  if (its_lock) {
    lock = std::move(its_lock);
    read_only_reason.clear();
  }
  takeSaved(*planned, *log);
  if (!at_home) Q_EMIT q->pathChanged();
  return done();
}

Result<std::shared_ptr<const protocol::Protocol>>
SessionDocument::Private::saveLog(document::SessionFile& planned, bool at_home) const {
  const auto& own = content.session.protocol_file;
  if (!isLogEdited()) {
    if (!own) return content.log;
    if (const auto way = logFrom(content.session, planned.folder)) {
      planned.protocol_file = *way;
      return content.log;
    }
  }
  planned.protocol_file = logFileAt(QString::fromStdString(planned.path), content.session);
  const std::string file = (fs::path(planned.folder) / *planned.protocol_file).string();
  if (at_home && planned.protocol_file == own) {
    if (Done same = stillAsRead(file, saved_log); !same) return same.error();
  }
  if (Done kept = results::write_protocol(*content.log, file); !kept) return kept.error();
  // From now on the log is what the file says, down to its lines and the spelling of units.
  auto on_disk = intake::parse_protocol(results::protocol_text(*content.log), file);
  if (!on_disk) return on_disk.error();
  return std::make_shared<const protocol::Protocol>(std::move(on_disk).value());
}

void SessionDocument::Private::takeSaved(const document::SessionFile& saved,
                                         const std::shared_ptr<const protocol::Protocol>& log) {
  keepPlace(content.session, saved);
  content.log = log;
  saved_log = log;
  inputs_state = kNoState;
  if (result && result_state == state) {
    // The same numbers, now of the file as it is.
    auto same = *result;
    same.session = content.session;
    same.session_sha256 = sha256_of(content.session.as_read);
    same.protocol = *log;
    result = std::make_shared<const session::SessionResult>(std::move(same));
    result_inputs = currentInputs();
  }
  stack.setClean();
  dropJournal();
  tellChanges();
}

void SessionDocument::Private::keepJournal() {
  journal_timer.stop();
  if (!isModified()) return;
  edits_not_kept = 0;
  JournalEntry entry;
  entry.writer = thisProcess();
  entry.written = QDateTime::currentDateTimeUtc();
  entry.title = q->title();
  entry.session_path = q->path();
  entry.edits = unsaved_edits;
  for (const auto& path : recordingPaths(content.session, *recording))
    entry.recording_paths << QString::fromStdString(path);
  const bool with_log = isLogEdited() || content.session.path.empty();
  // Copies, so that the other thread makes the texts while the user goes on.
  journal.write(
      [entry = std::move(entry), content = content, recording = recording, with_log]() mutable {
        const QString place = entry.session_path.isEmpty()
                                  ? QString::fromStdString(content.session.folder + "/unsaved.session.json")
                                  : entry.session_path;
        const auto placed = sessionAt(place, content.session, *recording);
        entry.session = results::session_text(placed ? *placed : content.session);
        if (with_log) entry.log = results::protocol_text(*content.log);
        return entry;
      },
      std::exchange(recovered_journal, {}));
}

void SessionDocument::Private::dropJournal() {
  journal_timer.stop();
  unsaved_edits = 0;
  edits_not_kept = 0;
  journal.remove();
}

} // namespace chronodrome::ui
