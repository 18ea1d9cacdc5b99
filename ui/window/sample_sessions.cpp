// Chronodrome, GPL-3.0-or-later.
#include "ui/window/sample_sessions.h"

#include <QCoreApplication>
#include <QDir>
#include <QFile>
#include <QStandardPaths>

namespace chronodrome::ui::window {
namespace {

struct Known {
  const char* name;
  const char* about;
};

constexpr Known kKnown[] = {
    {"guinea-pig-heart",
     "Perfused guinea-pig heart, acetylcholine: AV delay rises into Wenckebach and 2:1 block"},
    {"atrial-strip", "Right-atrial strip, cumulative carbachol: rate and developed force"},
    {"rabbit-heart", "Perfused rabbit heart, isoprenaline: rate and ventricular pressure"},
};

QString foundFolder() {
  const QDir program(QCoreApplication::applicationDirPath());
  for (const char* place :
       {"../../../sample-sessions", "../share/chronodrome/sample-sessions", "sample-sessions"}) {
    const QString folder = QDir::cleanPath(program.filePath(QLatin1String(place)));
    if (QDir(folder).exists()) return folder;
  }
  return {};
}

QString sessionFileName(const QString& name) {
  return name + QStringLiteral(".session.json");
}

Error notWritten(const QString& path) {
  return Error{ErrorCode::cannot_write,
               path.toStdString(),
               {},
               "the sample session could not be copied here",
               "free some space or make the folder writable, or open the session from where it lies"};
}

} // namespace

std::vector<SampleSession> sampleSessions() {
  std::vector<SampleSession> found;
  const QString folder = foundFolder();
  if (folder.isEmpty()) return found;
  for (const auto& known : kKnown) {
    const QString name = QLatin1String(known.name);
    const QString own = QDir(folder).filePath(name);
    if (QFile::exists(QDir(own).filePath(sessionFileName(name))))
      found.push_back({name, own, QLatin1String(known.about)});
  }
  return found;
}

Result<QString> ownCopyOf(const SampleSession& sample) {
  const QString base = QStandardPaths::writableLocation(QStandardPaths::GenericDataLocation);
  const QDir target(QDir(base).filePath(QStringLiteral("chronodrome/sample-sessions/") + sample.name));
  const QString session = target.filePath(sessionFileName(sample.name));
  if (!target.mkpath(QStringLiteral("."))) return notWritten(target.path());
  const QDir source(sample.folder);
  for (const QString& file : source.entryList(QDir::Files)) {
    // The session goes last: where it stands, the copy is whole.
    if (file == sessionFileName(sample.name) || QFile::exists(target.filePath(file))) continue;
    const QString half = target.filePath(file + QStringLiteral(".part"));
    QFile::remove(half);
    if (!QFile::copy(source.filePath(file), half) || !QFile::rename(half, target.filePath(file)))
      return notWritten(target.path());
  }
  if (!QFile::exists(session) && !QFile::copy(source.filePath(sessionFileName(sample.name)), session))
    return notWritten(target.path());
  QFile::setPermissions(session, QFile::ReadOwner | QFile::WriteOwner | QFile::ReadGroup | QFile::ReadOther);
  return session;
}

} // namespace chronodrome::ui::window
