// Chronodrome, GPL-3.0-or-later.
#include "ui/document/saving.h"

#include <algorithm>
#include <filesystem>

#include "intake/annotation_protocol.h"
#include "intake/protocol_reader.h"
#include "intake/session_reader.h"

namespace fs = std::filesystem;

namespace chronodrome::ui {
namespace {

/// With links followed, so that two ways to one folder are one.
fs::path realPath(const fs::path& path) {
  std::error_code fault;
  const fs::path real = fs::weakly_canonical(fs::absolute(path, fault), fault);
  return fault ? path : real;
}

bool liesBelow(const fs::path& folder, const fs::path& file) {
  return std::mismatch(folder.begin(), folder.end(), file.begin(), file.end()).first == folder.end();
}

std::string nameOf(const fs::path& path) {
  std::string name = path.filename().string();
  for (const std::string end : {".session.json", ".json"}) {
    if (name.size() > end.size() && name.ends_with(end)) return name.substr(0, name.size() - end.size());
  }
  return name;
}

/// True if another session of the folder names the same drug log: writing it would change that one too.
bool isShared(const fs::path& session, const fs::path& log) {
  std::error_code fault;
  for (fs::directory_iterator at(session.parent_path(), fault), end; !fault && at != end;
       at.increment(fault)) {
    const fs::path& other = at->path();
    if (!other.filename().string().ends_with(".session.json") || realPath(other) == session) continue;
    const auto read = intake::read_session(other.string(), intake::NewerSession::open_read_only);
    if (read && read->protocol_file && realPath(other.parent_path() / *read->protocol_file) == log)
      return true;
  }
  return false;
}

} // namespace

std::vector<std::string> recordingPaths(const document::SessionFile& session,
                                        const recording::Recording& recording) {
  std::vector<std::string> paths;
  for (const auto& file : recording.files) {
    // Files of a recording that was read through a session bear the session's folder, which may be relative.
    std::error_code fault;
    paths.push_back(fs::absolute(file.path, fault).lexically_normal().string());
  }
  if (paths.empty()) {
    for (const auto& file : session.files)
      paths.push_back(fs::absolute(fs::path(session.folder) / file.path).lexically_normal().string());
  }
  return paths;
}

std::string commonFolder(const std::vector<std::string>& files) {
  fs::path folder = fs::path(files.front()).parent_path();
  for (const auto& file : files) {
    while (!liesBelow(folder, file) && folder.has_relative_path())
      folder = folder.parent_path();
  }
  return folder.string();
}

Result<document::SessionFile> sessionAt(const QString& path, const document::SessionFile& session,
                                        const recording::Recording& recording) {
  const fs::path target = fs::absolute(path.toStdString());
  const fs::path folder = realPath(target.parent_path());
  document::SessionFile moved = session;
  moved.path = target.string();
  moved.folder = target.parent_path().string();
  moved.name = nameOf(target);
  const auto paths = recordingPaths(session, recording);
  moved.files.resize(paths.size());
  for (std::size_t i = 0; i < paths.size(); ++i) {
    const fs::path file = realPath(paths[i]);
    if (!liesBelow(folder, file)) {
      return Error{ErrorCode::cannot_write,
                   path.toStdString(),
                   {},
                   "the recording " + paths[i] +
                       " does not lie in the folder of this session file or below it",
                   "save the session in " + commonFolder(paths) + ", or copy the recording to " +
                       folder.string() + " and take it in there"};
    }
    moved.files[i].path = file.lexically_relative(folder).generic_string();
    if (i < recording.files.size()) moved.files[i].sha256 = recording.files[i].sha256;
  }
  return moved;
}

bool settleUnsaved(Content& content, const recording::Recording& recording) {
  document::SessionFile& session = content.session;
  const auto paths = recordingPaths(session, recording);
  const fs::path folder = paths.empty() ? fs::current_path() : fs::path(commonFolder(paths));
  const fs::path stated = session.folder.empty() ? folder : fs::path(session.folder);
  const auto placed =
      sessionAt(QString::fromStdString((folder / "unsaved.session.json").string()), session, recording);
  if (placed) session.files = placed->files;
  session.path.clear();
  session.name.clear();
  session.folder = folder.string();
  Result<protocol::Protocol> on_disk = protocol::Protocol{};
  if (session.protocol_file) {
    const fs::path log = realPath(stated / *session.protocol_file);
    on_disk = intake::read_protocol(log.string());
    const bool usable = on_disk.ok() && liesBelow(realPath(folder), log);
    session.protocol_file.reset();
    if (!usable) return false;
    session.protocol_file = log.lexically_relative(realPath(folder)).generic_string();
  } else {
    on_disk = intake::protocol_from_annotations(recording.annotations, {});
  }
  return logChange(std::make_shared<const protocol::Protocol>(*on_disk), *content.log).isNothing();
}

std::string logFileAt(const QString& path, const document::SessionFile& session) {
  const fs::path target = realPath(path.toStdString());
  const bool is_at_home = !session.path.empty() && realPath(session.path) == target;
  if (is_at_home && session.protocol_file) {
    const fs::path log = realPath(fs::path(session.folder) / *session.protocol_file);
    if (!isShared(target, log)) return *session.protocol_file;
  }
  // Another log that happens to bear the name is left alone.
  const std::string name = nameOf(target) + ".protocol";
  for (int number = 1;; ++number) {
    const std::string file = name + (number > 1 ? "-" + std::to_string(number) : std::string()) + ".csv";
    if (!fs::exists(target.parent_path() / file)) return file;
  }
}

} // namespace chronodrome::ui
