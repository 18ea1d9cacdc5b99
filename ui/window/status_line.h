// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <QLabel>
#include <QProgressBar>
#include <QStatusBar>
#include <QToolButton>

#include "ui/document/session_document.h"
#include "ui/look/theme.h"

namespace chronodrome::ui::window {

/// The line below the panes: preparation, quality of the channels, what runs and how far it is, edits that
/// are not saved.
class StatusLine : public QStatusBar {
  Q_OBJECT
public:
  explicit StatusLine(SessionDocument& document, QWidget* parent = nullptr);
  void setTheme(const look::Theme& theme);
  /// Work that is not the document's, such as writing results; empty: none.
  void setOtherWork(const QString& text);

Q_SIGNALS:
  void cancelOtherWork();

private:
  void showSession();
  void showWork();

  SessionDocument& document_;
  const look::Theme* theme_;
  QLabel* preparation_;
  QLabel* quality_;
  QLabel* work_;
  QProgressBar* bar_;
  QToolButton* cancel_;
  QLabel* saved_;
  QString other_;
};

} // namespace chronodrome::ui::window
