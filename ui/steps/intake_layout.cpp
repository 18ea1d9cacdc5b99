// Chronodrome, GPL-3.0-or-later.
// Where everything stands on the form of taking in.
#include <QComboBox>
#include <QHBoxLayout>
#include <QHeaderView>
#include <QLabel>
#include <QPlainTextEdit>
#include <QProgressBar>
#include <QPushButton>
#include <QScrollArea>
#include <QStackedWidget>
#include <QTableWidget>
#include <QVBoxLayout>

#include "ui/steps/intake_form.h"
#include "ui/steps/intake_pages.h"
#include "ui/steps/preparation_fields.h"
#include "ui/steps/session_draft.h"
#include "ui/steps/session_tables.h"
#include "ui/steps/table_choices.h"

namespace chronodrome::ui::steps {
namespace {

using look::kUnit;

QVBoxLayout* columnIn(QWidget* widget, int spacing = kUnit) {
  auto* column = new QVBoxLayout(widget);
  column->setContentsMargins(0, 0, 0, 0);
  column->setSpacing(spacing);
  return column;
}

/// Text in the middle of an empty page.
QWidget* middlePage(std::initializer_list<QWidget*> parts, QWidget* parent) {
  auto* page = new QWidget(parent);
  auto* column = columnIn(page, 2 * kUnit);
  column->setContentsMargins(6 * kUnit, 0, 6 * kUnit, 0);
  column->addStretch(2);
  for (QWidget* part : parts)
    column->addWidget(part);
  column->addStretch(3);
  return page;
}

} // namespace

void IntakeForm::build() {
  setMinimumSize(1000, 600);
  title_ = new QLabel(this);
  title_->setProperty("textSize", QStringLiteral("large"));
  facts_ = new QLabel(this);
  facts_->setProperty("quiet", true);
  facts_->setTextInteractionFlags(Qt::TextSelectableByMouse);

  auto* parts = new QHBoxLayout;
  parts->setSpacing(3 * kUnit);
  parts->addWidget(buildLeft());
  parts->addWidget(buildRight(), 1);

  auto* all = new QVBoxLayout(this);
  all->setContentsMargins(3 * kUnit, 2 * kUnit, 3 * kUnit, 2 * kUnit);
  all->setSpacing(kUnit);
  all->addWidget(title_);
  all->addWidget(facts_);
  all->addSpacing(kUnit);
  all->addLayout(parts, 1);
  all->addSpacing(kUnit);
  all->addWidget(buildFoot());
}

QWidget* IntakeForm::buildLeft() {
  auto* content = new QWidget(this);
  auto* column = columnIn(content);
  column->setContentsMargins(0, 0, kUnit, 0);

  table_part_ = new QWidget(content);
  auto* table = columnIn(table_part_);
  table->addWidget(headingLabel(QStringLiteral("How the table is read"), table_part_));
  choices_ = new TableChoices(table_part_);
  table->addWidget(choices_);
  column->addWidget(table_part_);

  file_part_ = new QWidget(content);
  auto* file = columnIn(file_part_);
  file->addWidget(headingLabel(QStringLiteral("File"), file_part_));
  file_facts_ = new QLabel(file_part_);
  file_facts_->setObjectName(QStringLiteral("fileFactsLabel"));
  file_facts_->setWordWrap(true);
  file_facts_->setTextInteractionFlags(Qt::TextSelectableByMouse);
  file->addWidget(file_facts_);
  column->addWidget(file_part_);

  column->addSpacing(kUnit);
  column->addWidget(headingLabel(QStringLiteral("Preparation"), content));
  column->addWidget(new PreparationFields(*draft_, false, content));

  column->addSpacing(kUnit);
  column->addWidget(headingLabel(QStringLiteral("Drug log"), content));
  log_ = new QComboBox(content);
  log_->setObjectName(QStringLiteral("drugLogComboBox"));
  log_->setAccessibleName(QStringLiteral("Drug log"));
  log_->setSizeAdjustPolicy(QComboBox::AdjustToMinimumContentsLengthWithIcon);
  connect(log_, &QComboBox::activated, this, &IntakeForm::showLog);
  column->addWidget(log_);
  log_hint_ = new QLabel(content);
  log_hint_->setWordWrap(true);
  setTone(*log_hint_, QStringLiteral("caution"));
  column->addWidget(log_hint_);
  log_events_ = new QTableWidget(0, 4, content);
  log_events_->setObjectName(QStringLiteral("drugLogTableWidget"));
  log_events_->setAccessibleName(QStringLiteral("Events of the drug log"));
  dressTable(*log_events_);
  log_events_->setEditTriggers(QAbstractItemView::NoEditTriggers);
  log_events_->setHorizontalHeaderLabels(
      {QStringLiteral("Time"), QStringLiteral("Event"), QStringLiteral("Agent"), QStringLiteral("Bath")});
  log_events_->verticalHeader()->setDefaultSectionSize(3 * kUnit);
  log_events_->horizontalHeader()->setSectionResizeMode(QHeaderView::ResizeToContents);
  log_events_->horizontalHeader()->setSectionResizeMode(2, QHeaderView::Stretch);
  log_events_->setFixedHeight(20 * kUnit);
  column->addWidget(log_events_);
  column->addStretch();

  auto* scroll = new QScrollArea(this);
  scroll->setObjectName(QStringLiteral("intakeScrollArea"));
  scroll->setFrameShape(QFrame::NoFrame);
  scroll->setWidgetResizable(true);
  scroll->setHorizontalScrollBarPolicy(Qt::ScrollBarAlwaysOff);
  scroll->setWidget(content);
  left_ = scroll;
  return scroll;
}

QWidget* IntakeForm::buildRight() {
  middle_ = new QStackedWidget(this);

  progress_text_ = new QLabel(middle_);
  progress_ = new QProgressBar(middle_);
  progress_->setObjectName(QStringLiteral("readingProgressBar"));
  progress_->setAccessibleName(QStringLiteral("Share of the file that is read"));
  progress_->setTextVisible(false);
  progress_->setFixedHeight(kUnit);
  middle_->insertWidget(kProgressPage, middlePage({progress_text_, progress_}, middle_));

  question_ = new QLabel(middle_);
  question_->setObjectName(QStringLiteral("questionLabel"));
  question_->setProperty("textSize", QStringLiteral("large"));
  question_->setWordWrap(true);
  question_->setTextInteractionFlags(Qt::TextSelectableByMouse);
  question_hint_ = new QLabel(middle_);
  question_hint_->setObjectName(QStringLiteral("questionHintLabel"));
  question_hint_->setWordWrap(true);
  question_hint_->setTextInteractionFlags(Qt::TextSelectableByMouse);
  middle_->insertWidget(kQuestionPage, middlePage({question_, question_hint_}, middle_));

  auto* page = new QWidget(middle_);
  auto* column = columnIn(page);
  column->addWidget(headingLabel(QStringLiteral("Signals and channels"), page));
  channels_ = new ChannelTable(*draft_, true, page);
  channels_->setMinimumHeight(17 * kUnit);
  column->addWidget(channels_, 3);
  doubts_ = new QWidget(page);
  doubts_->setObjectName(QStringLiteral("roleDoubts"));
  doubts_layout_ = columnIn(doubts_);
  column->addWidget(doubts_);

  auto* lower = new QHBoxLayout;
  lower->setSpacing(3 * kUnit);
  auto* pathways = new QVBoxLayout;
  pathways->setSpacing(kUnit);
  pathways->addWidget(headingLabel(QStringLiteral("Pathways"), page));
  pathways->addWidget(new PathwayTable(*draft_, page), 1);
  lower->addLayout(pathways, 3);
  auto* measures = new QVBoxLayout;
  measures->setSpacing(kUnit);
  measures->addWidget(headingLabel(QStringLiteral("Measures"), page));
  measures->addWidget(new MeasureChecks(*draft_, 2, page));
  measures->addStretch(1);
  lower->addLayout(measures, 2);
  column->addLayout(lower, 1);

  warnings_title_ = headingLabel({}, page);
  column->addWidget(warnings_title_);
  warnings_ = new QPlainTextEdit(page);
  warnings_->setObjectName(QStringLiteral("fileWarningsPlainTextEdit"));
  warnings_->setAccessibleName(QStringLiteral("What the file says, and warnings"));
  warnings_->setReadOnly(true);
  warnings_->setTabChangesFocus(true);
  warnings_->setFixedHeight(7 * kUnit);
  column->addWidget(warnings_);
  middle_->insertWidget(kTablesPage, page);
  return middle_;
}

QWidget* IntakeForm::buildFoot() {
  auto* foot = new QWidget(this);
  auto* row = new QHBoxLayout(foot);
  row->setContentsMargins(0, 0, 0, 0);
  row->setSpacing(kUnit);
  layout_button_ = new QPushButton(QStringLiteral("As in another session…"), foot);
  layout_button_->setObjectName(QStringLiteral("layoutPushButton"));
  layout_button_->setAccessibleName(
      QStringLiteral("Take channels, pathways, measures and settings from a session"));
  layout_button_->setToolTip(layout_button_->accessibleName());
  layout_button_->setAutoDefault(false);
  message_ = new QLabel(foot);
  message_->setObjectName(QStringLiteral("intakeMessageLabel"));
  message_->setWordWrap(true);
  auto* cancel_button = new QPushButton(QStringLiteral("Cancel"), foot);
  cancel_button->setObjectName(QStringLiteral("cancelPushButton"));
  cancel_button->setAccessibleName(QStringLiteral("Cancel taking in"));
  cancel_button->setAutoDefault(false);
  take_in_ = new QPushButton(QStringLiteral("Take in"), foot);
  take_in_->setObjectName(QStringLiteral("takeInPushButton"));
  take_in_->setAccessibleName(QStringLiteral("Take the recording in"));
  take_in_->setToolTip(QStringLiteral("Make a session of this recording (Ctrl+Return)"));
  take_in_->setShortcut(QKeySequence(QStringLiteral("Ctrl+Return")));
  take_in_->setDefault(true);
  row->addWidget(layout_button_);
  row->addWidget(message_, 1);
  row->addWidget(cancel_button);
  row->addWidget(take_in_);
  connect(layout_button_, &QPushButton::clicked, this, &IntakeForm::askForLayout);
  connect(cancel_button, &QPushButton::clicked, this, &IntakeForm::cancel);
  connect(take_in_, &QPushButton::clicked, this, &IntakeForm::takeIn);
  return foot;
}

/// The left part grows a little with the window; the traces take the rest.
void IntakeForm::resizeEvent(QResizeEvent* event) {
  QWidget::resizeEvent(event);
  left_->setFixedWidth(width() < 1100 ? 37 * kUnit : width() < 1900 ? 42 * kUnit : 54 * kUnit);
}

void IntakeForm::setTheme(const look::Theme& theme) {
  theme_ = theme;
  channels_->setTheme(theme);
  choices_->setTheme(theme);
  update();
}

} // namespace chronodrome::ui::steps
