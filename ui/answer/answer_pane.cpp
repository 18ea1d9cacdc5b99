// Chronodrome, GPL-3.0-or-later.
#include "ui/answer/answer_pane.h"

#include <algorithm>

#include <QAction>
#include <QComboBox>
#include <QHeaderView>
#include <QLabel>
#include <QScopedValueRollback>
#include <QStackedWidget>
#include <QTableView>

#include "ui/answer/leave_out_bar.h"
#include "ui/answer/parameter_model.h"
#include "ui/answer/weak_list.h"
#include "ui/answer/words.h"
#include "ui/look/number_text.h"

namespace chronodrome::ui::answer {
namespace {

using look::TextSize;
using session::ResponseForm;

constexpr int kShortAnswer = 36;

} // namespace

AnswerPane::AnswerPane(SessionDocument& document, Focus& focus, QWidget* parent)
    : QWidget(parent), document_(document), focus_(focus), theme_(look::Theme::of(look::Mode::light)) {
  setObjectName(QStringLiteral("answerPane"));
  setAccessibleName(tr("Concentration-response"));
  makeChoosers();
  layOut();
  makeActions();
  connectParts();
  setTheme(theme_);
}

AnswerPane::~AnswerPane() = default;

void AnswerPane::connectParts() {
  connect(&document_, &SessionDocument::opened, this, [this] {
    preview_.reset();
    refresh();
  });
  for (const auto signal : {&SessionDocument::closed, &SessionDocument::resultChanged})
    connect(&document_, signal, this, &AnswerPane::refresh);
  connect(&document_, &SessionDocument::failed, this, &AnswerPane::refresh);
  connect(&document_, &SessionDocument::staleChanged, this, &AnswerPane::updateState);
  connect(&document_, &SessionDocument::workChanged, this, &AnswerPane::updateState);
  connect(&focus_, &Focus::curveChanged, this, &AnswerPane::refresh);
  connect(&focus_, &Focus::stepChanged, this, &AnswerPane::followStep);
  for (QComboBox* combo : {measure_, curve_})
    connect(combo, &QComboBox::currentIndexChanged, this, &AnswerPane::chooseFromCombos);
  connect(form_chooser_, &QComboBox::currentIndexChanged, this, [this] {
    if (!filling_) setForm(static_cast<ResponseForm>(form_chooser_->currentData().toInt()));
  });
  connect(figure_, &AnswerFigure::pointChosen, this, &AnswerPane::goToPoint);
  connect(figure_, &AnswerFigure::menuRequested, this, &AnswerPane::showMenu);
  connect(weak_, &WeakList::placeChosen, this,
          [this](const session::CurvePlace& place) { goTo(place, true); });
  connect(leave_out_, &LeaveOutBar::leftOut, this, &AnswerPane::leaveOut);
  connect(leave_out_, &LeaveOutBar::closed, this, [this] { figure_->setFocus(Qt::OtherFocusReason); });
}

void AnswerPane::setTheme(const look::Theme& theme) {
  theme_ = theme;
  setPalette(theme.palette());
  empty_->setFont(theme.font(TextSize::normal));
  for (QLabel* label : {state_, caption_, message_})
    label->setFont(theme.font(TextSize::small));
  censored_->setFont(theme.font(TextSize::normal));
  QPalette quiet = theme.palette();
  quiet.setColor(QPalette::WindowText, theme.text_quiet);
  for (QLabel* label : {state_, caption_, empty_})
    label->setPalette(quiet);
  QPalette fault = theme.palette();
  fault.setColor(QPalette::WindowText, theme.fault);
  message_->setPalette(fault);
  table_->setFont(theme.font(TextSize::small));
  table_->horizontalHeader()->setFont(theme.font(TextSize::small));
  parameters_->setTheme(theme);
  weak_->setTheme(theme);
  leave_out_->setTheme(theme);
  refresh();
}

void AnswerPane::showPreview(std::shared_ptr<const session::SessionResult> preview) {
  preview_ = std::move(preview);
  refresh();
}

void AnswerPane::setForm(ResponseForm form) {
  form_ = form;
  refresh();
}

std::shared_ptr<const session::SessionResult> AnswerPane::shown() const {
  return preview_ ? preview_ : document_.result();
}

QString AnswerPane::emptyText() const {
  if (!document_.isOpen() && document_.work() == SessionDocument::Work::none)
    return tr("No session is open.");
  const auto result = shown();
  if (!result) {
    if (document_.work() != SessionDocument::Work::none) return document_.workText();
    if (const auto error = document_.lastError()) return look::messageText(*error);
    return tr("Not analysed yet.");
  }
  if (result->session.measures.empty())
    return tr("The session lists no measures, so there is nothing to draw a curve of. Choose them where "
              "channels and pathways are described.");
  if (result->plan.curves.empty())
    return tr("No additions are logged, so there is no curve. Enter the additions with their bath "
              "concentrations.");
  return tr("No responses of this measure.");
}

QString AnswerPane::stateText() const {
  if (preview_) return tr("Preview while the plateau is dragged.");
  if (document_.isStale() && document_.work() != SessionDocument::Work::none)
    return tr("Older than the last edit: %1 …").arg(document_.workText());
  if (document_.isStale()) return tr("Older than the last edit.");
  return {};
}

void AnswerPane::updateState() {
  if (!shown()) return refresh();
  const QString words = stateText();
  state_->setText(words);
  state_->setVisible(!words.isEmpty());
}

void AnswerPane::refresh() {
  const auto result = shown();
  if (!document_.isOpen() || !result || result->responses.rows.empty()) return showEmpty(emptyText());
  // A pane alone, and a session whose curve is gone, show the first one.
  const auto& first = result->responses.rows.front();
  std::string measure = focus_.measure();
  int curve = focus_.curve();
  std::vector<int> curves = session::curves_with(*result, measure);
  if (curves.empty()) {
    measure = first.measure;
    curves = session::curves_with(*result, measure);
  }
  if (std::find(curves.begin(), curves.end(), curve) == curves.end()) curve = curves.front();
  if (curve != focus_.curve() || measure != focus_.measure())
    return focus_.chooseCurve(curve, measure); // comes back here
  fillChoosers(*result);
  const auto view = session::curve_view(*result, curve, measure, form_);
  if (!view) return showEmpty(emptyText());
  showView(*result, *view);
}

void AnswerPane::showEmpty(const QString& words) {
  empty_->setText(words);
  figure_->clearView();
  parameters_->setRows({}, {});
  weak_->setPoints({});
  leave_out_->hide();
  stack_->setCurrentWidget(empty_);
  for (QAction* action : actions_)
    action->setEnabled(false);
}

void AnswerPane::fillChoosers(const session::SessionResult& result) {
  const QScopedValueRollback<bool> filling(filling_, true);
  measure_->clear();
  for (const std::string& measure : result.session.measures) {
    if (session::curves_with(result, measure).empty()) continue;
    measure_->addItem(look::measureText(measure), QString::fromStdString(measure));
  }
  measure_->setCurrentIndex(measure_->findData(QString::fromStdString(focus_.measure())));
  curve_->clear();
  const std::vector<int> curves = session::curves_with(result, focus_.measure());
  for (const int curve : curves) {
    curve_->addItem(tr("curve %1: %2").arg(curve).arg(curveText(result, curve)), curve);
  }
  curve_->setCurrentIndex(curve_->findData(focus_.curve()));
  curve_->setVisible(curves.size() > 1);
}

void AnswerPane::showView(const session::SessionResult& result, const session::CurveView& view) {
  stack_->setCurrentIndex(0);
  {
    const QScopedValueRollback<bool> filling(filling_, true);
    form_chooser_->setCurrentIndex(form_chooser_->findData(static_cast<int>(view.form)));
  }
  form_chooser_->setToolTip(view.form == form_
                                ? tr("How responses are expressed")
                                : tr("Shown as measured: this curve has no control to compare with"));
  const QString words = answerText(view);
  answer_->setFont(words.size() <= kShortAnswer ? theme_.font(TextSize::large, true)
                                                : theme_.font(TextSize::normal, true));
  answer_->setText(words);
  const QString limits = censoredText(view);
  censored_->setText(limits);
  censored_->setVisible(!limits.isEmpty());
  caption_->setText(captionText(view));
  figure_->setView(view, theme_, curveColor(result, view.measure, theme_));
  parameters_->setRows(view.parameters, view.unit);
  fitTable();
  weak_->setPoints(view.weak_points);
  updateState();
  followStep();
  for (QAction* action : actions_)
    action->setEnabled(true);
  const auto* point = chosenPoint();
  leave_out_action_->setEnabled(point != nullptr && !document_.isReadOnly());
  take_in_action_->setEnabled(point != nullptr && point->status == response::Status::excluded &&
                              !document_.isReadOnly());
}

void AnswerPane::fitTable() {
  table_->setVisible(parameters_->rowCount() > 0);
  table_->setFixedHeight(table_->horizontalHeader()->sizeHint().height() +
                         parameters_->rowCount() * kParameterRowHeight + 2);
}

void AnswerPane::chooseFromCombos() {
  if (filling_ || measure_->currentIndex() < 0) return;
  const std::string measure = measure_->currentData().toString().toStdString();
  focus_.chooseCurve(curve_->currentIndex() < 0 ? focus_.curve() : curve_->currentData().toInt(), measure);
}

void AnswerPane::followStep() {
  const auto step = focus_.step();
  const auto& view = figure_->view();
  if (step && view &&
      (step->curve != focus_.curve() || (!step->measure.empty() && step->measure != focus_.measure()))) {
    const auto result = shown();
    const std::string measure = step->measure.empty() ? focus_.measure() : step->measure;
    const std::vector<int> curves = result ? session::curves_with(*result, measure) : std::vector<int>{};
    if (std::find(curves.begin(), curves.end(), step->curve) != curves.end())
      return focus_.chooseCurve(step->curve, measure); // comes back here
  }
  const bool is_its = step && view && step->curve == focus_.curve();
  figure_->setChosen(is_its ? std::optional(step->concentration) : std::nullopt);
  const auto* point = chosenPoint();
  leave_out_action_->setEnabled(point != nullptr && !document_.isReadOnly());
  take_in_action_->setEnabled(point != nullptr && point->status == response::Status::excluded &&
                              !document_.isReadOnly());
}

} // namespace chronodrome::ui::answer
