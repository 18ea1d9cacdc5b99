// Chronodrome, GPL-3.0-or-later.
#include "ui/steps/proposed_events.h"

#include <QHBoxLayout>
#include <QHeaderView>
#include <QLabel>
#include <QPushButton>
#include <QSignalBlocker>
#include <QTableWidget>
#include <QVBoxLayout>

#include "ui/look/number_text.h"
#include "ui/look/theme.h"
#include "ui/steps/intake_pages.h"
#include "ui/steps/session_tables.h"

namespace chronodrome::ui::steps {

ProposedEvents::ProposedEvents(QWidget* parent) : QWidget(parent) {
  title_ = headingLabel({}, this);
  table_ = new QTableWidget(0, 4, this);
  table_->setObjectName(QStringLiteral("proposedEventsTableWidget"));
  table_->setAccessibleName(QStringLiteral("Proposed events: tick what is to be taken"));
  dressTable(*table_);
  table_->setEditTriggers(QAbstractItemView::NoEditTriggers);
  table_->setHorizontalHeaderLabels({QStringLiteral("Time"), QStringLiteral("Event"),
                                     QStringLiteral("Agent or note"), QStringLiteral("Bath")});
  table_->verticalHeader()->setDefaultSectionSize(3 * look::kUnit);
  table_->horizontalHeader()->setSectionResizeMode(QHeaderView::ResizeToContents);
  table_->horizontalHeader()->setSectionResizeMode(2, QHeaderView::Stretch);
  table_->setFixedHeight(20 * look::kUnit);
  connect(table_, &QTableWidget::itemChanged, this, &ProposedEvents::followTicks);

  auto* all = new QPushButton(QStringLiteral("Tick all"), this);
  all->setObjectName(QStringLiteral("tickAllPushButton"));
  all->setAccessibleName(QStringLiteral("Tick all proposed events"));
  take_ = new QPushButton(QStringLiteral("Add ticked"), this);
  take_->setObjectName(QStringLiteral("addTickedPushButton"));
  take_->setAccessibleName(QStringLiteral("Add the ticked events to the log"));
  auto* dismiss = new QPushButton(QStringLiteral("Dismiss"), this);
  dismiss->setObjectName(QStringLiteral("dismissPushButton"));
  dismiss->setAccessibleName(QStringLiteral("Dismiss the proposed events"));
  for (auto* button : {all, take_, dismiss})
    button->setAutoDefault(false);
  connect(all, &QPushButton::clicked, this, &ProposedEvents::tickAll);
  connect(take_, &QPushButton::clicked, this, &ProposedEvents::take);
  connect(dismiss, &QPushButton::clicked, this, &ProposedEvents::clear);

  auto* buttons = new QHBoxLayout;
  buttons->setSpacing(look::kUnit);
  buttons->addWidget(all);
  buttons->addStretch();
  buttons->addWidget(dismiss);
  buttons->addWidget(take_);
  auto* column = new QVBoxLayout(this);
  column->setContentsMargins(0, 0, 0, 0);
  column->setSpacing(look::kUnit);
  column->addWidget(title_);
  column->addWidget(table_);
  column->addLayout(buttons);
  hide();
}

void ProposedEvents::propose(const QString& from, const std::vector<EventCells>& rows,
                             const EventClock& clock) {
  rows_ = rows;
  title_->setText(QStringLiteral("Proposed from %1: tick what to take").arg(from));
  const QSignalBlocker quiet(table_);
  table_->setRowCount(count());
  for (int row = 0; row < count(); ++row) {
    const auto& cells = rows_[static_cast<std::size_t>(row)];
    const auto reading = readCells(cells, clock);
    const QString bath = reading.event && reading.event->concentration
                             ? look::concentrationText(*reading.event->concentration)
                             : cells[kConcentration];
    const QString texts[] = {cells[kTime], cells[kEvent],
                             cells[kAgent].isEmpty() ? cells[kNote] : cells[kAgent],
                             reading.event ? bath : QStringLiteral("? %1").arg(bath)};
    for (int column = 0; column < 4; ++column) {
      auto* item = new QTableWidgetItem(texts[column]);
      item->setToolTip(reading.event ? eventText(*reading.event) : reading.problem);
      if (column == 0) {
        item->setFlags(item->flags() | Qt::ItemIsUserCheckable);
        item->setCheckState(Qt::Unchecked);
      }
      table_->setItem(row, column, item);
    }
  }
  followTicks();
  setVisible(!rows_.empty());
}

void ProposedEvents::clear() {
  rows_.clear();
  table_->setRowCount(0);
  hide();
}

void ProposedEvents::tickAll() {
  for (int row = 0; row < count(); ++row)
    table_->item(row, 0)->setCheckState(Qt::Checked);
}

void ProposedEvents::followTicks() {
  int ticked = 0;
  for (int row = 0; row < table_->rowCount(); ++row)
    ticked += table_->item(row, 0) != nullptr && table_->item(row, 0)->checkState() == Qt::Checked ? 1 : 0;
  take_->setEnabled(ticked > 0);
  take_->setText(ticked == 0 ? QStringLiteral("Add ticked") : QStringLiteral("Add %1 ticked").arg(ticked));
}

void ProposedEvents::take() {
  std::vector<EventCells> ticked, rest;
  for (int row = 0; row < count(); ++row)
    (table_->item(row, 0)->checkState() == Qt::Checked ? ticked : rest)
        .push_back(rows_[static_cast<std::size_t>(row)]);
  clear(); // what was not ticked was seen, and stays where it came from
  Q_EMIT taken(ticked);
}

} // namespace chronodrome::ui::steps
