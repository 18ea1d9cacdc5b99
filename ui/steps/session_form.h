// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <QWidget>

#include "ui/document/session_document.h"
#include "ui/look/theme.h"

class QLabel;
class QSortFilterProxyModel;
class QStackedWidget;
class QTableView;
class QToolButton;
class QVBoxLayout;

namespace chronodrome::ui::steps {

class ChannelTable;
class SessionDraft;
class SettingTableModel;

/// What the open session says: channels, pathways, measures; the preparation; the settings of the analysis.
/// Each change is one undoable edit, made at once.
class SessionForm : public QWidget {
  Q_OBJECT
public:
  enum Page { kChannels, kPreparation, kSettings };

  explicit SessionForm(SessionDocument& document, QWidget* parent = nullptr);
  ~SessionForm() override;
  void setTheme(const look::Theme& theme);
  void showPage(Page page);

Q_SIGNALS:
  void finished();

protected:
  void keyPressEvent(QKeyEvent* event) override;

private:
  QWidget* buildHead();
  QWidget* buildChannels();
  QWidget* buildPreparation();
  QWidget* buildSettings();
  void begin();
  void say(const QString& text, const QString& tone);
  void followSetting();

  SessionDocument& document_;
  SessionDraft* draft_ = nullptr;
  SettingTableModel* settings_ = nullptr;
  ChannelTable* channels_ = nullptr;
  QStackedWidget* pages_ = nullptr;
  std::vector<QToolButton*> tabs_;
  QTableView* settings_view_ = nullptr;
  QSortFilterProxyModel* settings_filter_ = nullptr;
  QLabel* setting_text_ = nullptr;
  QToolButton* reset_ = nullptr;
  QLabel* message_ = nullptr;
};

} // namespace chronodrome::ui::steps
