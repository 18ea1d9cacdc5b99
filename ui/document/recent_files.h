// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <vector>

#include <QObject>
#include <QString>
#include <QStringList>

#include "ui/document/places.h"

namespace chronodrome::ui {

/// A file that was open once.
struct RecentFile {
  QString path;         ///< absolute
  QString name;         ///< without its folders
  bool isThere = false; ///< false: to be shown greyed
};

/// The files that were opened last, the latest first. They are kept in `recent.ini` in the configuration
/// folder; where that cannot be written they are kept until the program ends.
class RecentFiles : public QObject {
  Q_OBJECT
public:
  static constexpr int kMost = 12;

  explicit RecentFiles(QObject* parent = nullptr, const QString& folder = configFolder());

  [[nodiscard]] std::vector<RecentFile> files() const;
  [[nodiscard]] const QStringList& paths() const { return paths_; }

public Q_SLOTS:
  /// Puts a file at the head of the list.
  void add(const QString& path);
  void remove(const QString& path);
  void clear();

Q_SIGNALS:
  void changed();

private:
  void keep(const QStringList& paths);

  QString file_;
  QStringList paths_;
};

} // namespace chronodrome::ui
