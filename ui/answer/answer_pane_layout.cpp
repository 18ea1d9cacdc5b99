// Chronodrome, GPL-3.0-or-later.
// How the answer is laid out.
#include "ui/answer/answer_pane.h"

#include <QComboBox>
#include <QGridLayout>
#include <QHeaderView>
#include <QLabel>
#include <QStackedWidget>
#include <QTableView>
#include <QVBoxLayout>

#include "ui/answer/leave_out_bar.h"
#include "ui/answer/parameter_model.h"
#include "ui/answer/weak_list.h"
#include "ui/answer/words.h"

namespace chronodrome::ui::answer {
namespace {

using look::kUnit;
using session::ResponseForm;

QLabel* wordLabel(const char* name, QWidget* parent) {
  auto* label = new QLabel(parent);
  label->setObjectName(QLatin1String(name));
  label->setWordWrap(true);
  label->setTextInteractionFlags(Qt::TextSelectableByMouse);
  label->setFocusPolicy(Qt::NoFocus);
  return label;
}

} // namespace

void AnswerPane::makeChoosers() {
  const auto chooser = [this](const char* name, const QString& accessible) {
    auto* combo = new QComboBox(this);
    combo->setObjectName(QLatin1String(name));
    combo->setAccessibleName(accessible);
    combo->setToolTip(accessible);
    combo->setSizeAdjustPolicy(QComboBox::AdjustToMinimumContentsLengthWithIcon);
    combo->setMinimumContentsLength(8);
    return combo;
  };
  measure_ = chooser("measureComboBox", tr("Measure that the curve is of"));
  curve_ = chooser("curveComboBox", tr("Curve"));
  form_chooser_ = chooser("responseFormComboBox", tr("How responses are expressed"));
  form_chooser_->setSizeAdjustPolicy(QComboBox::AdjustToContents);
  for (const auto form :
       {ResponseForm::absolute, ResponseForm::change_from_control, ResponseForm::percent_of_control})
    form_chooser_->addItem(formText(form), static_cast<int>(form));
}

void AnswerPane::makeTable() {
  parameters_ = new ParameterModel(this);
  table_ = new QTableView(this);
  table_->setObjectName(QStringLiteral("parameterTableView"));
  table_->setAccessibleName(tr("Parameters of the curve"));
  table_->setModel(parameters_);
  table_->setFrameShape(QFrame::NoFrame);
  table_->setShowGrid(false);
  table_->setWordWrap(false);
  table_->setTabKeyNavigation(false);
  // Five columns in a narrow pane.
  table_->setStyleSheet(
      QStringLiteral("QHeaderView::section { padding: 2px 3px; } QTableView::item { padding: 0 3px; }"));
  table_->setSelectionBehavior(QAbstractItemView::SelectRows);
  table_->setVerticalScrollBarPolicy(Qt::ScrollBarAlwaysOff);
  table_->setHorizontalScrollBarPolicy(Qt::ScrollBarAlwaysOff);
  table_->verticalHeader()->hide();
  table_->verticalHeader()->setDefaultSectionSize(kParameterRowHeight);
  table_->verticalHeader()->setMinimumSectionSize(kParameterRowHeight);
  table_->horizontalHeader()->setSectionResizeMode(QHeaderView::ResizeToContents);
  table_->horizontalHeader()->setSectionResizeMode(ParameterModel::kDetermined, QHeaderView::Stretch);
  table_->horizontalHeader()->setMinimumSectionSize(3 * kUnit);
  table_->horizontalHeader()->setHighlightSections(false);
}

void AnswerPane::layOut() {
  empty_ = wordLabel("emptyAnswerLabel", this);
  empty_->setAlignment(Qt::AlignCenter);
  empty_->setMargin(4 * kUnit);
  state_ = wordLabel("answerStateLabel", this);
  answer_ = wordLabel("answerLabel", this);
  censored_ = wordLabel("censoredAnswerLabel", this);
  caption_ = wordLabel("curveCaptionLabel", this);
  message_ = wordLabel("answerMessageLabel", this);
  message_->hide();
  figure_ = new AnswerFigure(this);
  leave_out_ = new LeaveOutBar(this);
  weak_ = new WeakList(this);
  makeTable();

  auto* page = new QWidget(this);
  auto* column = new QVBoxLayout(page);
  column->setContentsMargins(kUnit, kUnit, kUnit, kUnit);
  column->setSpacing(kUnit / 2);
  auto* choosers = new QGridLayout;
  choosers->setSpacing(kUnit / 2);
  choosers->addWidget(measure_, 0, 0);
  choosers->addWidget(form_chooser_, 0, 1);
  choosers->addWidget(curve_, 1, 0, 1, 2);
  choosers->setColumnStretch(0, 1);
  column->addLayout(choosers);
  column->addWidget(answer_);
  column->addWidget(censored_);
  column->addWidget(state_);
  column->addWidget(figure_, 1);
  column->addWidget(caption_);
  column->addWidget(leave_out_);
  column->addWidget(message_);
  column->addWidget(table_);
  column->addWidget(weak_);

  stack_ = new QStackedWidget(this);
  stack_->addWidget(page);
  stack_->addWidget(empty_);
  auto* all = new QVBoxLayout(this);
  all->setContentsMargins(0, 0, 0, 0);
  all->addWidget(stack_);
  setFocusProxy(figure_);
}

} // namespace chronodrome::ui::answer
