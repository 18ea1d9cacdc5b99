// Chronodrome, GPL-3.0-or-later.
#include "ui/document/loading.h"

#include <filesystem>
#include <utility>

#include "base/number_text.h"
#include "intake/annotation_protocol.h"
#include "intake/protocol_reader.h"
#include "intake/recording_reader.h"
#include "intake/session_reader.h"
#include "ui/document/journal_entry.h"
#include "ui/document/saving.h"
#include "ui/document/watched_reading.h"

namespace fs = std::filesystem;

namespace chronodrome::ui {
namespace {

using document::SessionFile;

Result<recording::Recording> readFiles(const SessionFile& session, const std::vector<std::string>& paths,
                                       const session::Watch& watch) {
  intake::ReadSettings settings;
  if (session.csv.rate_hz) settings.rate = Hertz(*session.csv.rate_hz);
  settings.delimiter = session.csv.delimiter;
  settings.decimal = session.csv.decimal;
  settings.time_column = session.csv.time_column;
  auto recording = readWatched(paths, settings, watch);
  if (!recording) return recording;
  for (std::size_t i = 0; i < session.files.size() && i < recording->files.size(); ++i) {
    const auto& expected = session.files[i].sha256;
    const auto& file = recording->files[i];
    if (!expected || lower_case(*expected) == file.sha256) continue;
    return Error{ErrorCode::digest_mismatch, file.path, Place::at_byte(0),
                 "the file is not the one the session was made from: SHA-256 is " + file.sha256 +
                     ", the session says " + *expected,
                 "bring back the original file, or remove sha256 from the session if the change is intended"};
  }
  return recording;
}

/// The session with all that it names, as session::load_session does it, but watched, for sessions of newer
/// programs too, and with the recording's files and the drug log from elsewhere if need be.
Result<ReadSession> assemble(SessionFile session, const std::vector<std::string>& paths,
                             const std::optional<std::string>& log_text, const session::Watch& watch) {
  // Settings are looked at before a long recording is read in vain.
  if (const auto settings = session::settings_of(session); !settings) return settings.error();
  auto recording = readFiles(session, paths, watch);
  if (!recording) return recording.error();
  Result<protocol::Protocol> log = protocol::Protocol{};
  const std::string log_path =
      session.protocol_file ? (fs::path(session.folder) / *session.protocol_file).string() : std::string();
  if (log_text) {
    log = intake::parse_protocol(*log_text, log_path);
  } else if (session.protocol_file) {
    log = intake::read_protocol(log_path);
  } else {
    log = intake::protocol_from_annotations(recording->annotations, paths.front());
  }
  if (!log) return log.error();
  ReadSession read;
  read.recording = std::make_shared<const recording::Recording>(std::move(recording).value());
  read.content = {std::move(session), std::make_shared<const protocol::Protocol>(std::move(log).value())};
  return read;
}

Result<ReadSession> readFile(const std::string& path, const session::Watch& watch) {
  auto session = intake::read_session(path, intake::NewerSession::open_read_only);
  if (!session) return session.error();
  std::vector<std::string> paths;
  for (const auto& file : session->files)
    paths.push_back((fs::path(session->folder) / file.path).string());
  return assemble(std::move(session).value(), paths, std::nullopt, watch);
}

/// A session that is on no disk but in the journal: it has no path, and its files are found from the journal.
Result<ReadSession> readUnsaved(const JournalEntry& entry, const session::Watch& watch) {
  std::vector<std::string> paths;
  for (const QString& path : entry.recording_paths)
    paths.push_back(path.toStdString());
  if (paths.empty()) {
    return Error{ErrorCode::wrong_format,
                 entry.session_path.toStdString(),
                 {},
                 "the journal of unsaved edits names no recording",
                 "discard it"};
  }
  const fs::path place = entry.session_path.isEmpty() ? fs::path(commonFolder(paths)) / "unsaved.session.json"
                                                      : fs::path(entry.session_path.toStdString());
  auto session = intake::parse_session(entry.session, place.string());
  if (!session) return session.error();
  auto read = assemble(std::move(session).value(), paths, entry.log, watch);
  if (!read) return read;
  read->is_saved = false;
  read->content.session.path.clear();
  read->content.session.name.clear();
  return read;
}

Result<ReadSession> readRecovered(const QString& journal, const session::Watch& watch) {
  const auto entry = readJournal(journal);
  if (!entry) return entry.error();
  const std::string path = entry->session_path.toStdString();
  if (path.empty() || !intake::read_session(path)) return readUnsaved(*entry, watch);
  auto read = readFile(path, watch);
  if (!read) return read;
  auto session = intake::parse_session(entry->session, path);
  if (!session) return session.error();
  Content recovered{std::move(session).value(), read->content.log};
  keepPlace(recovered.session, read->content.session);
  if (entry->log) {
    auto log = intake::parse_protocol(*entry->log, read->content.log->file);
    if (!log) return log.error();
    recovered.log = std::make_shared<const protocol::Protocol>(std::move(log).value());
  }
  read->recovered = std::move(recovered);
  return read;
}

} // namespace

Result<ReadSession> readSession(const ReadRequest& request, const session::Watch& watch) {
  if (!request.journal.isEmpty()) {
    auto read = readRecovered(request.journal, watch);
    if (read || !read.error().file.empty()) return read;
    Error error = read.error();
    error.file = request.journal.toStdString(); // what has no file of its own stands there
    return error;
  }
  return readFile(request.session.toStdString(), watch);
}

} // namespace chronodrome::ui
