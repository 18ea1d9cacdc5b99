// Chronodrome, GPL-3.0-or-later.
#include "ui/document/recent_files.h"

#include <QFileInfo>
#include <QSettings>

namespace chronodrome::ui {
namespace {

const char* const kKey = "files/opened";

QStringList storedIn(const QString& file) {
  const QSettings settings(file, QSettings::IniFormat);
  return settings.value(QLatin1String(kKey)).toStringList();
}

} // namespace

RecentFiles::RecentFiles(QObject* parent, const QString& folder)
    : QObject(parent), file_(folder + QStringLiteral("/recent.ini")), paths_(storedIn(file_)) {}

std::vector<RecentFile> RecentFiles::files() const {
  std::vector<RecentFile> files;
  for (const QString& path : paths_) {
    const QFileInfo info(path);
    files.push_back({path, info.fileName(), info.isFile()});
  }
  return files;
}

void RecentFiles::add(const QString& path) {
  if (path.isEmpty()) return;
  const QString absolute = absolutePath(path);
  // Another window may have opened files since.
  QStringList paths = QFileInfo::exists(file_) ? storedIn(file_) : paths_;
  paths.removeAll(absolute);
  paths.prepend(absolute);
  keep(paths.mid(0, kMost));
}

void RecentFiles::remove(const QString& path) {
  QStringList paths = paths_;
  if (paths.removeAll(absolutePath(path)) > 0) keep(paths);
}

void RecentFiles::clear() {
  if (!paths_.isEmpty()) keep({});
}

void RecentFiles::keep(const QStringList& paths) {
  paths_ = paths;
  QSettings settings(file_, QSettings::IniFormat);
  settings.setValue(QLatin1String(kKey), paths_);
  settings.sync();
  Q_EMIT changed();
}

} // namespace chronodrome::ui
