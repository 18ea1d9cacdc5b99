// Chronodrome, GPL-3.0-or-later.
#include "ui/steps/event_table_model.h"

#include <algorithm>

#include <QStringList>

#include "ui/steps/channel_table_model.h"

namespace chronodrome::ui::steps {
namespace {

using protocol::Event;
using protocol::EventKind;

const QStringList& eventWords() {
  static const QStringList words = [] {
    QStringList list;
    for (const EventKind kind : {EventKind::addition, EventKind::vehicle, EventKind::antagonist,
                                 EventKind::washout, EventKind::pacing_start, EventKind::pacing_stop,
                                 EventKind::exclude_start, EventKind::exclude_stop, EventKind::note})
      list << eventWord(kind);
    return list;
  }();
  return words;
}

const QStringList kUnitWords = {QStringLiteral("M"), QStringLiteral("mM"), QStringLiteral("uM"),
                                QStringLiteral("nM"), QStringLiteral("pM")};

} // namespace

EventTableModel::EventTableModel(QObject* parent) : QAbstractTableModel(parent) {}

int EventTableModel::rowCount(const QModelIndex& parent) const {
  return parent.isValid() ? 0 : static_cast<int>(rows_.size());
}

int EventTableModel::columnCount(const QModelIndex& parent) const {
  return parent.isValid() ? 0 : kEventColumns;
}

EventTableModel::Row EventTableModel::rowFor(const Event& event) const {
  Row row;
  row.cells = cellsOf(event, clock_);
  row.in_log = event;
  row.reading.event = event;
  return row;
}

void EventTableModel::begin(const std::vector<Event>& events) {
  beginResetModel();
  rows_.clear();
  for (const auto& event : events)
    rows_.push_back(rowFor(event));
  endResetModel();
}

void EventTableModel::show(const std::vector<Event>& events) {
  std::vector<Row> rows;
  std::vector<bool> used(rows_.size(), false);
  for (const auto& event : events) {
    // What was typed into a row of the log and cannot be read yet stays, as long as its event does.
    Row row = rowFor(event);
    for (std::size_t i = 0; i < rows_.size(); ++i) {
      if (used[i] || !rows_[i].in_log || !sameEvent(*rows_[i].in_log, event)) continue;
      used[i] = true;
      if (!rows_[i].reading.event) row = rows_[i];
      break;
    }
    rows.push_back(std::move(row));
  }
  for (const auto& row : rows_) {
    if (!row.in_log) rows.push_back(row);
  }
  if (rows.size() != rows_.size()) {
    beginResetModel();
    rows_ = std::move(rows);
    endResetModel();
    return;
  }
  rows_ = std::move(rows);
  if (rows_.empty()) return;
  Q_EMIT dataChanged(index(0, 0), index(rowCount() - 1, kEventColumns - 1));
  Q_EMIT headerDataChanged(Qt::Vertical, 0, rowCount() - 1);
}

void EventTableModel::setClock(const EventClock& clock) {
  clock_ = clock;
  for (auto& row : rows_) {
    // Half-typed times mean what they meant when they were typed.
    const auto event = row.reading.event;
    if (event) row.cells = cellsOf(*event, clock_);
  }
  if (!rows_.empty()) Q_EMIT dataChanged(index(0, 0), index(rowCount() - 1, kEventColumns - 1));
}

QString EventTableModel::problem(int row) const {
  return rows_[static_cast<std::size_t>(row)].reading.problem;
}

int EventTableModel::halfTyped() const {
  return static_cast<int>(
      std::count_if(rows_.begin(), rows_.end(), [](const Row& row) { return !row.reading.event; }));
}

std::optional<Event> EventTableModel::eventOf(int row) const {
  return rows_[static_cast<std::size_t>(row)].in_log;
}

int EventTableModel::rowOf(const Event& event) const {
  for (std::size_t i = 0; i < rows_.size(); ++i) {
    if (rows_[i].in_log && sameEvent(*rows_[i].in_log, event)) return static_cast<int>(i);
  }
  return -1;
}

std::vector<Event> EventTableModel::events() const {
  std::vector<Event> events;
  for (const auto& row : rows_) {
    if (row.reading.event)
      events.push_back(*row.reading.event);
    else if (row.in_log)
      events.push_back(*row.in_log);
  }
  std::stable_sort(events.begin(), events.end(),
                   [](const Event& a, const Event& b) { return a.time < b.time; });
  return events;
}

void EventTableModel::adopt() {
  for (auto& row : rows_) {
    if (row.reading.event) row.in_log = row.reading.event;
  }
}

int EventTableModel::addRow(const EventCells& cells) {
  const int row = rowCount();
  beginInsertRows({}, row, row);
  rows_.push_back({cells, std::nullopt, readCells(cells, clock_)});
  endInsertRows();
  if (rows_.back().reading.event)
    Q_EMIT logChanged(QStringLiteral("add %1").arg(eventText(*rows_.back().reading.event)));
  return row;
}

void EventTableModel::removeRow(int row) {
  if (row < 0 || row >= rowCount() || read_only_) return;
  const auto in_log = rows_[static_cast<std::size_t>(row)].in_log;
  beginRemoveRows({}, row, row);
  rows_.erase(rows_.begin() + row);
  endRemoveRows();
  if (in_log) Q_EMIT logChanged(QStringLiteral("delete %1").arg(eventText(*in_log)));
}

QVariant EventTableModel::data(const QModelIndex& index, int role) const {
  if (!index.isValid() || index.row() >= rowCount()) return {};
  const Row& row = rows_[static_cast<std::size_t>(index.row())];
  switch (role) {
  case Qt::DisplayRole:
  case Qt::EditRole:
    return row.cells[static_cast<std::size_t>(index.column())];
  case Qt::ToolTipRole:
    return row.reading.problem.isEmpty() ? row.cells[static_cast<std::size_t>(index.column())]
                                         : QStringLiteral("Not in the log: %1").arg(row.reading.problem);
  case Qt::ForegroundRole:
    return row.reading.event ? QVariant() : QVariant(theme_.caution);
  case Qt::TextAlignmentRole:
    if (index.column() == kConcentration || index.column() == kTime || index.column() >= kStock)
      return int(Qt::AlignRight | Qt::AlignVCenter);
    return int(Qt::AlignLeft | Qt::AlignVCenter);
  case kChoicesRole:
    if (index.column() == kEvent) return eventWords();
    if (index.column() == kUnitOf) return kUnitWords;
    return {};
  default:
    return {};
  }
}

bool EventTableModel::setData(const QModelIndex& index, const QVariant& value, int role) {
  if (!index.isValid() || role != Qt::EditRole || read_only_) return false;
  QString& cell =
      rows_[static_cast<std::size_t>(index.row())].cells[static_cast<std::size_t>(index.column())];
  const QString text = value.toString().trimmed();
  if (text == cell) return false;
  cell = text;
  readAgain(index.row());
  return true;
}

void EventTableModel::readAgain(int number) {
  Row& row = rows_[static_cast<std::size_t>(number)];
  row.reading = readCells(row.cells, clock_);
  // `100 nM` typed into one cell becomes number and unit.
  if (row.reading.event) row.cells = cellsOf(*row.reading.event, clock_);
  Q_EMIT dataChanged(index(number, 0), index(number, kEventColumns - 1));
  Q_EMIT headerDataChanged(Qt::Vertical, number, number);
  if (!row.reading.event) {
    Q_EMIT logChanged({}); // only what is said of the row changes
    return;
  }
  const bool same = row.in_log && sameEvent(*row.in_log, *row.reading.event);
  const QString what = eventText(*row.reading.event);
  Q_EMIT logChanged(same ? QString()
                         : (row.in_log ? QStringLiteral("change %1") : QStringLiteral("add %1")).arg(what));
}

Qt::ItemFlags EventTableModel::flags(const QModelIndex& index) const {
  const Qt::ItemFlags flags = QAbstractTableModel::flags(index);
  return index.isValid() && !read_only_ ? flags | Qt::ItemIsEditable : flags;
}

QVariant EventTableModel::headerData(int section, Qt::Orientation orientation, int role) const {
  if (orientation == Qt::Horizontal) {
    if (role == Qt::DisplayRole) return eventHeading(section);
    if (role == Qt::ToolTipRole && section == kConcentration)
      return QStringLiteral("Final concentration in the bath after the event");
    return {};
  }
  if (section < 0 || section >= rowCount()) return {};
  const bool whole = rows_[static_cast<std::size_t>(section)].reading.event.has_value();
  if (role == Qt::DisplayRole)
    return whole ? QString::number(section + 1) : QStringLiteral("%1 ?").arg(section + 1);
  if (role == Qt::ToolTipRole && !whole) return QStringLiteral("Not in the log: %1").arg(problem(section));
  return {};
}

} // namespace chronodrome::ui::steps
