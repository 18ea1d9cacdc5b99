// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <QAction>
#include <QPushButton>
#include <QVBoxLayout>
#include <QWidget>

#include "ui/look/theme.h"

namespace chronodrome::ui::window {

/// What an empty window shows: what can be done, the sample sessions and the recent ones.
class WelcomePage : public QWidget {
  Q_OBJECT
public:
  /// The actions become the two large buttons.
  WelcomePage(QAction* takeIn, QAction* open, QWidget* parent = nullptr);
  void setTheme(const look::Theme& theme);
  /// Paths of recent sessions, newest first; a missing one is shown greyed.
  void setRecent(const QStringList& paths);

Q_SIGNALS:
  void sampleChosen(const QString& name);
  void recentChosen(const QString& path);

private:
  QPushButton* entry(const QString& head, const QString& about, const QString& objectName);

  QVBoxLayout* recent_;
  QWidget* recent_box_;
};

} // namespace chronodrome::ui::window
