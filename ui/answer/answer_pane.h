// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <functional>
#include <memory>
#include <optional>

#include <QWidget>

#include "protocol/curve_plan.h"
#include "ui/answer/answer_figure.h"
#include "ui/answer/export_curve.h"
#include "ui/document/focus.h"
#include "ui/document/session_document.h"
#include "ui/look/theme.h"

class QAction;
class QComboBox;
class QLabel;
class QStackedWidget;
class QTableView;

namespace chronodrome::ui::answer {

class LeaveOutBar;
class ParameterModel;
class WeakList;

/// The answer: the concentration-response curve of a measure, its parameters with their intervals, and what
/// weakens them, each point and flag a way to its place in the recording.
class AnswerPane : public QWidget {
  Q_OBJECT
public:
  AnswerPane(SessionDocument& document, Focus& focus, QWidget* parent = nullptr);
  ~AnswerPane() override;

  void setTheme(const look::Theme& theme);
  [[nodiscard]] QList<QAction*> actions() const { return actions_; }
  [[nodiscard]] session::ResponseForm form() const { return form_; }

  /// Asks for a file to write; `filter` is the one chosen. For tests; else a file dialog.
  using FileAsker =
      std::function<QString(const QString& proposed, const QStringList& filters, QString& filter)>;
  void setFileAsker(FileAsker asker) { ask_for_file_ = std::move(asker); }

public Q_SLOTS:
  /// While a plateau is dragged: what the answer would be. Null: the preview is over.
  void showPreview(std::shared_ptr<const chronodrome::session::SessionResult> preview);
  void setForm(chronodrome::session::ResponseForm form);

private:
  void makeChoosers();
  void makeTable();
  void layOut();
  void makeActions();
  void connectParts();

  [[nodiscard]] std::shared_ptr<const session::SessionResult> shown() const;
  [[nodiscard]] QString emptyText() const;
  [[nodiscard]] QString stateText() const;
  void refresh();
  void fillChoosers(const session::SessionResult& result);
  void showView(const session::SessionResult& result, const session::CurveView& view);
  void showEmpty(const QString& words);
  void fitTable();
  void updateState();
  void followStep();
  void chooseFromCombos();

  void goTo(const session::CurvePlace& place, bool jumps);
  void goToPoint(std::size_t point, bool jumps);
  void showMenu(std::size_t point, const QPoint& at);
  void askToLeaveOut();
  void leaveOut(const QString& channel, const QString& why);
  void takeInAgain();
  [[nodiscard]] protocol::Stretch stepAround(const session::PlottedPoint& point) const;
  /// One line below the figure; empty: none.
  void tell(const QString& message);
  void copyTable();
  void exportShown();
  [[nodiscard]] const session::PlottedPoint* chosenPoint() const;
  [[nodiscard]] std::vector<std::string> channelsOfMeasure() const;

  SessionDocument& document_;
  Focus& focus_;
  look::Theme theme_;
  session::ResponseForm form_ = session::ResponseForm::absolute;
  std::shared_ptr<const session::SessionResult> preview_;
  FileAsker ask_for_file_;
  bool filling_ = false;

  QStackedWidget* stack_ = nullptr;
  QLabel* empty_ = nullptr;
  QComboBox* measure_ = nullptr;
  QComboBox* curve_ = nullptr;
  QComboBox* form_chooser_ = nullptr;
  QLabel* state_ = nullptr;
  QLabel* answer_ = nullptr;
  QLabel* censored_ = nullptr;
  QLabel* caption_ = nullptr;
  QLabel* message_ = nullptr;
  AnswerFigure* figure_ = nullptr;
  LeaveOutBar* leave_out_ = nullptr;
  QTableView* table_ = nullptr;
  ParameterModel* parameters_ = nullptr;
  WeakList* weak_ = nullptr;
  QList<QAction*> actions_;
  QAction* leave_out_action_ = nullptr;
  QAction* take_in_action_ = nullptr;
  QAction* copy_action_ = nullptr;
  QAction* export_action_ = nullptr;
};

} // namespace chronodrome::ui::answer
