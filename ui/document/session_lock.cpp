// Chronodrome, GPL-3.0-or-later.
#include "ui/document/session_lock.h"

#include <QCryptographicHash>
#include <QDir>
#include <QFileInfo>
#include <QLockFile>
#include <QStandardPaths>
#include <unistd.h>

#include "ui/document/places.h"

namespace chronodrome::ui {
namespace {

QString lockPathOf(const QString& session) {
  const QFileInfo file(session);
  // Two names of one file are one session.
  const QString real = file.exists() ? file.canonicalFilePath() : file.absoluteFilePath();
  const QFileInfo target(real);
  if (!QStandardPaths::isTestModeEnabled())
    return target.path() + QStringLiteral("/.") + target.fileName() + QStringLiteral(".lock");
  const QByteArray hash = QCryptographicHash::hash(real.toUtf8(), QCryptographicHash::Sha256).toHex();
  const QString folder = stateFolder() + QStringLiteral("/locks-%1").arg(qint64(::getpid()));
  QDir().mkpath(folder);
  return folder + u'/' + QString::fromLatin1(hash.left(32));
}

QString holderOf(QLockFile& file) {
  qint64 pid = 0;
  QString host, program;
  if (!file.getLockInfo(&pid, &host, &program)) return {};
  const QString owner = QFileInfo(file.fileName()).owner();
  return QStringLiteral("%1 on %2 (process %3)")
      .arg(owner.isEmpty() ? QStringLiteral("somebody") : owner, host)
      .arg(pid);
}

} // namespace

SessionLock::SessionLock() = default;

SessionLock::~SessionLock() {
  release();
}

bool SessionLock::take(const QString& session) {
  release();
  auto file = std::make_unique<QLockFile>(lockPathOf(session));
  // Old age alone makes no lock stale: people leave a session open over night. A dead process does.
  file->setStaleLockTime(0);
  if (file->tryLock(0)) {
    file_ = std::move(file);
    return true;
  }
  if (file->error() == QLockFile::LockFailedError) {
    holder_ = holderOf(*file);
    if (holder_.isEmpty()) holder_ = QStringLiteral("another program");
  }
  return false;
}

void SessionLock::release() {
  if (file_) file_->unlock();
  file_.reset();
  holder_.clear();
}

bool SessionLock::isHeld() const {
  return file_ != nullptr;
}

} // namespace chronodrome::ui
