// Chronodrome, GPL-3.0-or-later.
#include "ui/document/places.h"

#include <QDir>
#include <QFileInfo>
#include <QStandardPaths>

namespace chronodrome::ui {
namespace {

QString folderOf(const char* variable, const QString& in_home) {
  const QString stated = qEnvironmentVariable(variable);
  QString root = QDir::isAbsolutePath(stated) ? stated : QDir::homePath() + u'/' + in_home;
  if (stated.isEmpty() && QStandardPaths::isTestModeEnabled())
    root = QDir::homePath() + QStringLiteral("/.qttest/") + in_home;
  return QDir::cleanPath(root) + QStringLiteral("/chronodrome");
}

} // namespace

QString stateFolder() {
  return folderOf("XDG_STATE_HOME", QStringLiteral(".local/state"));
}

QString configFolder() {
  return folderOf("XDG_CONFIG_HOME", QStringLiteral(".config"));
}

QString recoveryFolder() {
  return stateFolder() + QStringLiteral("/recovery");
}

QString absolutePath(const QString& path) {
  return path.isEmpty() ? path : QDir::cleanPath(QFileInfo(path).absoluteFilePath());
}

} // namespace chronodrome::ui
