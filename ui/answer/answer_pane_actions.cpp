// Chronodrome, GPL-3.0-or-later.
// What the user does in the answer: going to places, leaving steps out, copying, exporting.
#include "ui/answer/answer_pane.h"

#include <algorithm>

#include <QAction>
#include <QClipboard>
#include <QDir>
#include <QFileDialog>
#include <QFileInfo>
#include <QGuiApplication>
#include <QLabel>
#include <QMenu>
#include <QTableView>

#include "document/measure.h"
#include "session/exclusions.h"
#include "ui/answer/leave_out_bar.h"
#include "ui/answer/parameter_model.h"
#include "ui/answer/words.h"
#include "ui/look/number_text.h"

namespace chronodrome::ui::answer {
namespace {

constexpr double kBeside = 0.05; // of a window that the evidence shows on either side of it

} // namespace

void AnswerPane::makeActions() {
  const auto add = [this](const char* name, const QString& text, const QString& tip, const char* menu) {
    auto* action = new QAction(text, this);
    action->setObjectName(QLatin1String(name));
    action->setToolTip(tip);
    action->setProperty("menu", QLatin1String(menu));
    actions_.push_back(action);
    return action;
  };
  leave_out_action_ = add("actionLeaveStepOut", tr("&Leave this step out…"),
                          tr("Take the chosen step out of the curve, with a reason"), "Edit");
  leave_out_action_->setShortcut(QKeySequence(QStringLiteral("Ctrl+Shift+X")));
  take_in_action_ = add("actionTakeStepIn", tr("Take this step &in again"),
                        tr("Undo that the chosen step was left out"), "Edit");
  copy_action_ = add("actionCopyParameters", tr("Copy the &parameter table"),
                     tr("As text, cells parted by tabs"), "Edit");
  copy_action_->setShortcut(QKeySequence::Copy);
  copy_action_->setShortcutContext(Qt::WidgetShortcut);
  export_action_ = add("actionExportCurve", tr("E&xport the curve…"),
                       tr("As PDF, SVG, PNG or as a table of its points"), "Session");
  export_action_->setShortcut(QKeySequence(QStringLiteral("Ctrl+Shift+E")));
  table_->addAction(copy_action_);
  table_->setContextMenuPolicy(Qt::ActionsContextMenu);
  addActions({leave_out_action_, take_in_action_, export_action_});
  connect(leave_out_action_, &QAction::triggered, this, &AnswerPane::askToLeaveOut);
  connect(take_in_action_, &QAction::triggered, this, &AnswerPane::takeInAgain);
  connect(copy_action_, &QAction::triggered, this, &AnswerPane::copyTable);
  connect(export_action_, &QAction::triggered, this, &AnswerPane::exportShown);
}

const session::PlottedPoint* AnswerPane::chosenPoint() const {
  const auto& view = figure_->view();
  if (!view || !figure_->chosen()) return nullptr;
  return &view->chosen.points[*figure_->chosen()];
}

void AnswerPane::goTo(const session::CurvePlace& place, bool jumps) {
  if (place.concentration) {
    focus_.chooseStep(StepRef{focus_.curve(), *place.concentration, focus_.measure()});
  }
  if (!(place.start < place.end)) return;
  const Seconds beside = kBeside * (place.end - place.start);
  if (jumps) {
    focus_.goTo(place.start - beside, place.end + beside);
  } else {
    focus_.show(place.start - beside, place.end + beside);
  }
}

void AnswerPane::goToPoint(std::size_t point, bool jumps) {
  const session::PlottedPoint& chosen = figure_->view()->chosen.points[point];
  goTo({chosen.window_start, chosen.window_end, chosen.concentration}, jumps);
}

void AnswerPane::showMenu(std::size_t point, const QPoint& at) {
  goToPoint(point, false);
  QMenu menu(this);
  menu.setObjectName(QStringLiteral("pointMenu"));
  menu.addAction(leave_out_action_);
  if (take_in_action_->isEnabled()) menu.addAction(take_in_action_);
  menu.addSeparator();
  menu.addAction(export_action_);
  menu.exec(at);
}

std::vector<std::string> AnswerPane::channelsOfMeasure() const {
  const auto measure = document::measure_named(focus_.measure());
  if (!measure) return {};
  if (!document::is_of_pathway(measure->kind)) return {measure->label};
  for (const document::PathwayEntry& pathway : document_.session().pathways) {
    if (pathway.label == measure->label) return {pathway.from, pathway.to};
  }
  return {};
}

void AnswerPane::askToLeaveOut() {
  const auto* point = chosenPoint();
  if (!point) return;
  QStringList channels;
  for (const std::string& channel : channelsOfMeasure())
    channels << QString::fromStdString(channel);
  leave_out_->ask(stepText(*point) +
                      QStringLiteral(" (%1 to %2)")
                          .arg(look::timeText(point->window_start, 0), look::timeText(point->window_end, 0)),
                  channels);
}

void AnswerPane::leaveOut(const QString& channel, const QString& why) {
  if (const auto* point = chosenPoint())
    document_.exclude(channel.toStdString(), point->window_start, point->window_end, why);
  figure_->setFocus(Qt::OtherFocusReason);
}

void AnswerPane::takeInAgain() {
  const auto* point = chosenPoint();
  if (!point) return;
  bool any = false;
  // Not more than this step of what may have been left out in one stroke.
  const protocol::Stretch step = stepAround(*point);
  for (const response::Exclusion& one : session::exclusions_of(document_.session().review)) {
    const Seconds start = std::max(one.span.start, step.start), end = std::min(one.span.end, step.end);
    if (!(start < end)) continue;
    document_.include(one.channel, start, end);
    any = true;
  }
  tell(any ? QString() : tr("The drug log leaves this step out; change it in the additions"));
}

protocol::Stretch AnswerPane::stepAround(const session::PlottedPoint& point) const {
  const auto result = shown();
  for (const protocol::Curve& curve : result->plan.curves) {
    if (curve.number != focus_.curve()) continue;
    for (const protocol::Step& step : curve.steps) {
      if (step.concentration == point.concentration && step.start <= point.window_start &&
          point.window_end <= step.end)
        return {step.start, step.end};
    }
  }
  return {point.window_start, point.window_end};
}

void AnswerPane::tell(const QString& message) {
  message_->setText(message);
  message_->setVisible(!message.isEmpty());
}

void AnswerPane::copyTable() {
  QGuiApplication::clipboard()->setText(parameters_->tabSeparated());
}

void AnswerPane::exportShown() {
  const auto result = shown();
  const auto& view = figure_->view();
  if (!result || !view) return;
  QStringList filters;
  for (const ExportChoice& choice : exportChoices())
    filters << filterText(choice);
  const QString folder = document_.path().isEmpty() ? QDir::homePath() : QFileInfo(document_.path()).path();
  const QString proposed = folder + QLatin1Char('/') +
                           QString::fromStdString(view->measure).replace(QLatin1Char(':'), QLatin1Char('-')) +
                           QStringLiteral("-curve-%1").arg(view->chosen.curve);
  QString filter = filters.front();
  QString path = ask_for_file_ ? ask_for_file_(proposed, filters, filter)
                               : QFileDialog::getSaveFileName(this, tr("Export the curve"), proposed,
                                                              filters.join(QStringLiteral(";;")), &filter);
  if (path.isEmpty()) return;
  const auto index = std::max<qsizetype>(0, filters.indexOf(filter));
  const ExportChoice choice = exportChoices()[static_cast<std::size_t>(index)];
  const QString suffix = filter.section(QStringLiteral("*"), -1).chopped(1);
  if (QFileInfo(path).suffix().isEmpty()) path += suffix;
  const Done written =
      exportCurve(path, {result.get(), view->chosen.curve, view->measure, view->form}, choice);
  tell(written ? QString() : look::messageText(written.error()));
}

} // namespace chronodrome::ui::answer
