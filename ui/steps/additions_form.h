// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <QWidget>

#include "session/protocol_guess.h"
#include "ui/document/focus.h"
#include "ui/document/session_document.h"
#include "ui/look/theme.h"
#include "ui/steps/event_cells.h"

class QComboBox;
class QLabel;
class QListWidget;
class QTableView;
class QTableWidget;
class QToolButton;

namespace chronodrome::ui::steps {

class EventTableModel;
class ProposedEvents;

/// The drug log beside the story: typed, pasted, or taken from annotations. Each complete row is one undoable
/// edit as soon as it is complete; half-typed rows stay here until they are, and say what they lack.
class AdditionsForm : public QWidget {
  Q_OBJECT
public:
  AdditionsForm(SessionDocument& document, Focus& focus, QWidget* parent = nullptr);
  ~AdditionsForm() override;
  void setTheme(const look::Theme& theme);
  /// Rows that are not in the log because something is missing.
  [[nodiscard]] int halfTypedRows() const;

public Q_SLOTS:
  /// A row at the middle of what the evidence shows, ready to be typed on.
  void addRow();
  void duplicateRow();
  void deleteRow();
  void paste();
  void proposeAnnotations();

Q_SIGNALS:
  void finished();

protected:
  void keyPressEvent(QKeyEvent* event) override;
  bool eventFilter(QObject* watched, QEvent* event) override;
  void resizeEvent(QResizeEvent* event) override;

private:
  void build();
  QWidget* buildButtons();
  QWidget* buildChecks();
  void begin();
  void showLog();
  void noteChange(const QString& step);
  void commit();
  void takeProposed(const std::vector<EventCells>& rows);
  void check();
  void showProblems(const session::ProtocolCheck& found);
  void showSteps(const protocol::CurvePlan& plan);
  void followState();
  void say(const QString& text);
  void fitChecks();
  [[nodiscard]] EventCells freshCells() const;
  [[nodiscard]] int currentRow() const;
  void goToRow(int row);

  SessionDocument& document_;
  Focus& focus_;
  EventTableModel* model_ = nullptr;
  QString pending_step_; ///< of the log change that is about to be made
  bool pending_ = false;

  QLabel* hint_ = nullptr;
  QComboBox* clock_ = nullptr;
  QTableView* table_ = nullptr;
  QToolButton* add_ = nullptr;
  QToolButton* duplicate_ = nullptr;
  QToolButton* delete_ = nullptr;
  QToolButton* paste_ = nullptr;
  QToolButton* annotations_ = nullptr;
  QToolButton* more_ = nullptr;
  ProposedEvents* proposed_ = nullptr;
  QLabel* checks_title_ = nullptr;
  QListWidget* checks_ = nullptr;
  QTableWidget* steps_ = nullptr;
};

} // namespace chronodrome::ui::steps
