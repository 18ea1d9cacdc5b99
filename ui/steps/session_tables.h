// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <QTableView>
#include <QWidget>

#include "ui/look/theme.h"
#include "ui/steps/session_draft.h"

class QCheckBox;
class QGridLayout;
class QToolButton;

namespace chronodrome::ui::steps {

class ChannelTableModel;
class PathwayTableModel;
class TraceDelegate;

/// Lines and headings that every table of a form has.
void dressTable(QTableView& view);

/// Signals and channels. With traces: wide, for taking in; without: beside the story.
class ChannelTable : public QTableView {
  Q_OBJECT
public:
  ChannelTable(SessionDraft& draft, bool traces, QWidget* parent = nullptr);
  void setTheme(const look::Theme& theme);
  [[nodiscard]] ChannelTableModel& channels() { return *model_; }

protected:
  void resizeEvent(QResizeEvent* event) override;

private:
  ChannelTableModel* model_ = nullptr;
  TraceDelegate* traces_ = nullptr;
};

/// Pathways, with the ways to add one and to take one out.
class PathwayTable : public QWidget {
  Q_OBJECT
public:
  explicit PathwayTable(SessionDraft& draft, QWidget* parent = nullptr);

private:
  void followSelection();

  PathwayTableModel* model_ = nullptr;
  QTableView* view_ = nullptr;
  QToolButton* remove_ = nullptr;
};

/// A tick for each measure that the session's channels and pathways allow.
class MeasureChecks : public QWidget {
  Q_OBJECT
public:
  explicit MeasureChecks(SessionDraft& draft, int columns, QWidget* parent = nullptr);

private:
  void show();

  SessionDraft& draft_;
  int columns_;
  QGridLayout* grid_ = nullptr;
  std::vector<std::string> shown_;
  std::vector<QCheckBox*> boxes_;
  QWidget* hint_ = nullptr;
};

} // namespace chronodrome::ui::steps
