// Chronodrome, GPL-3.0-or-later.
// Where everything stands on the form of additions.
#include <QComboBox>
#include <QHBoxLayout>
#include <QHeaderView>
#include <QLabel>
#include <QListWidget>
#include <QPointF>
#include <QPushButton>
#include <QTableView>
#include <QTableWidget>
#include <QToolButton>
#include <QVBoxLayout>

#include "ui/steps/additions_form.h"
#include "ui/steps/cell_delegates.h"
#include "ui/steps/event_table_model.h"
#include "ui/steps/intake_pages.h"
#include "ui/steps/proposed_events.h"
#include "ui/steps/session_tables.h"

namespace chronodrome::ui::steps {
namespace {

using look::kUnit;

QToolButton* button(const QString& name, const QString& text, const QString& tip, QWidget* parent) {
  auto* made = new QToolButton(parent);
  made->setObjectName(name);
  made->setText(text);
  made->setToolTip(tip);
  made->setAccessibleName(tip);
  made->setFocusPolicy(Qt::StrongFocus);
  return made;
}

} // namespace

void AdditionsForm::build() {
  setMinimumWidth(380);
  auto* title = new QLabel(QStringLiteral("Additions"), this);
  title->setProperty("textSize", QStringLiteral("large"));
  auto* done = new QPushButton(QStringLiteral("Done"), this);
  done->setObjectName(QStringLiteral("donePushButton"));
  done->setAccessibleName(QStringLiteral("Back to the curves"));
  done->setToolTip(QStringLiteral("Back to the curves (Escape)"));
  done->setAutoDefault(false);
  connect(done, &QPushButton::clicked, this, &AdditionsForm::finished);
  auto* head = new QHBoxLayout;
  head->addWidget(title, 1);
  head->addWidget(done);

  clock_ = new QComboBox(this);
  clock_->setObjectName(QStringLiteral("clockComboBox"));
  clock_->setAccessibleName(QStringLiteral("How times are shown and typed"));
  clock_->addItems({QStringLiteral("Times from the start"), QStringLiteral("Times of day")});
  connect(clock_, &QComboBox::activated, this, [this](int index) {
    EventClock clock = model_->clock();
    clock.of_day = index == 1;
    model_->setClock(clock);
  });

  table_ = new QTableView(this);
  table_->setObjectName(QStringLiteral("eventsTableView"));
  table_->setAccessibleName(QStringLiteral("Events of the drug log"));
  dressTable(*table_);
  table_->setModel(model_);
  table_->setItemDelegate(new ChoiceDelegate(table_));
  table_->setTabKeyNavigation(true); // a row is typed from cell to cell; Ctrl+Tab leaves the table
  table_->verticalHeader()->show();
  table_->verticalHeader()->setDefaultSectionSize(4 * kUnit - 4);
  table_->horizontalHeader()->setStretchLastSection(true);
  const std::pair<int, int> widths[] = {{kTime, 7},    {kEvent, 9}, {kAgent, 11}, {kConcentration, 6},
                                        {kUnitOf, 5},  {kNote, 10}, {kStock, 11}, {kVolume, 10},
                                        {kArrival, 9}, {kCurve, 6}};
  for (const auto& [column, units] : widths)
    table_->setColumnWidth(column, units * kUnit);
  for (int column = kFirstOptionalColumn; column < kEventColumns; ++column)
    table_->setColumnHidden(column, true);
  table_->installEventFilter(this);
  connect(table_->selectionModel(), &QItemSelectionModel::currentChanged, this, &AdditionsForm::followState);
  connect(table_->verticalHeader(), &QHeaderView::sectionClicked, this, &AdditionsForm::goToRow);

  hint_ = new QLabel(this);
  hint_->setObjectName(QStringLiteral("additionsHintLabel"));
  hint_->setWordWrap(true);
  proposed_ = new ProposedEvents(this);

  auto* all = new QVBoxLayout(this);
  all->setContentsMargins(2 * kUnit, 2 * kUnit, 2 * kUnit, 2 * kUnit);
  all->setSpacing(kUnit);
  all->addLayout(head);
  all->addWidget(buildButtons());
  all->addWidget(table_, 3);
  all->addWidget(hint_);
  all->addWidget(proposed_);
  all->addWidget(buildChecks(), 2);
}

QWidget* AdditionsForm::buildButtons() {
  auto* bar = new QWidget(this);
  add_ = button(QStringLiteral("addRowToolButton"), QStringLiteral("Add"),
                QStringLiteral("Add a row at the middle of the traces (Insert)"), bar);
  duplicate_ = button(QStringLiteral("duplicateRowToolButton"), QStringLiteral("Repeat"),
                      QStringLiteral("The chosen row again, at the middle of the traces"), bar);
  delete_ = button(QStringLiteral("deleteRowToolButton"), QStringLiteral("Delete"),
                   QStringLiteral("Delete the chosen row (Delete)"), bar);
  paste_ = button(QStringLiteral("pasteToolButton"), QStringLiteral("Paste"),
                  QStringLiteral("Rows copied in a spreadsheet (Ctrl+V)"), bar);
  annotations_ = button(QStringLiteral("annotationsToolButton"), QStringLiteral("Annotations"),
                        QStringLiteral("Propose the recording's annotations as events"), bar);
  more_ = button(QStringLiteral("moreColumnsToolButton"), QStringLiteral("More columns"),
                 QStringLiteral("Show stock, volume, arrival and curve"), bar);
  more_->setCheckable(true);
  connect(add_, &QToolButton::clicked, this, &AdditionsForm::addRow);
  connect(duplicate_, &QToolButton::clicked, this, &AdditionsForm::duplicateRow);
  connect(delete_, &QToolButton::clicked, this, &AdditionsForm::deleteRow);
  connect(paste_, &QToolButton::clicked, this, &AdditionsForm::paste);
  connect(annotations_, &QToolButton::clicked, this, &AdditionsForm::proposeAnnotations);
  connect(more_, &QToolButton::toggled, this, [this](bool wanted) {
    for (int column = kFirstOptionalColumn; column < kEventColumns; ++column)
      table_->setColumnHidden(column, !wanted);
  });
  auto* rows = new QVBoxLayout(bar);
  rows->setContentsMargins(0, 0, 0, 0);
  rows->setSpacing(kUnit / 2);
  auto* first = new QHBoxLayout;
  first->setSpacing(kUnit / 2);
  for (QToolButton* one : {add_, duplicate_, delete_, paste_, annotations_})
    first->addWidget(one);
  first->addStretch();
  auto* second = new QHBoxLayout;
  second->addWidget(clock_);
  second->addStretch();
  second->addWidget(more_);
  rows->addLayout(first);
  rows->addLayout(second);
  return bar;
}

QWidget* AdditionsForm::buildChecks() {
  auto* part = new QWidget(this);
  auto* column = new QVBoxLayout(part);
  column->setContentsMargins(0, 0, 0, 0);
  column->setSpacing(kUnit);
  checks_title_ = headingLabel({}, part);
  checks_title_->setObjectName(QStringLiteral("checksTitleLabel"));
  checks_ = new QListWidget(part);
  checks_->setObjectName(QStringLiteral("checksListWidget"));
  checks_->setAccessibleName(QStringLiteral("Doubts about the log"));
  checks_->setWordWrap(true);
  checks_->setMaximumHeight(14 * kUnit);
  connect(checks_, &QListWidget::itemActivated, this,
          [this](const QListWidgetItem* item) { goToRow(item->data(Qt::UserRole).toInt()); });
  connect(checks_, &QListWidget::itemClicked, this,
          [this](const QListWidgetItem* item) { goToRow(item->data(Qt::UserRole).toInt()); });

  steps_ = new QTableWidget(0, 4, part);
  steps_->setObjectName(QStringLiteral("stepsTableWidget"));
  steps_->setAccessibleName(QStringLiteral("Curves and steps that the log leads to"));
  dressTable(*steps_);
  steps_->setEditTriggers(QAbstractItemView::NoEditTriggers);
  steps_->verticalHeader()->setDefaultSectionSize(3 * kUnit);
  steps_->setHorizontalHeaderLabels(
      {QStringLiteral("Curve"), QStringLiteral("Step"), QStringLiteral("From"), QStringLiteral("Length")});
  steps_->horizontalHeader()->setSectionResizeMode(QHeaderView::ResizeToContents);
  steps_->horizontalHeader()->setSectionResizeMode(0, QHeaderView::Stretch);
  connect(steps_, &QTableWidget::itemClicked, this, [this](const QTableWidgetItem* item) {
    const QPointF span = item->data(Qt::UserRole).toPointF();
    if (span.y() > span.x()) focus_.goTo(Seconds(span.x()), Seconds(span.y()));
  });
  column->addWidget(checks_title_);
  column->addWidget(checks_);
  column->addWidget(headingLabel(QStringLiteral("Curves and steps"), part));
  column->addWidget(steps_, 1);
  return part;
}

/// As tall as its words need, up to a limit; the rest scrolls.
void AdditionsForm::fitChecks() {
  constexpr int kPadding = 4;
  const int wide = std::max(20 * kUnit, width() - 4 * kUnit - 4 * kPadding);
  int height = 2 * checks_->frameWidth() + kPadding;
  for (int i = 0; i < checks_->count(); ++i)
    height += checks_->fontMetrics()
                  .boundingRect(0, 0, wide, 100 * kUnit, Qt::TextWordWrap, checks_->item(i)->text())
                  .height() +
              2;
  checks_->setFixedHeight(std::min(height, 14 * kUnit));
}

void AdditionsForm::resizeEvent(QResizeEvent* event) {
  QWidget::resizeEvent(event);
  fitChecks();
}

void AdditionsForm::setTheme(const look::Theme& theme) {
  model_->setTheme(theme);
  table_->viewport()->update();
}

} // namespace chronodrome::ui::steps
