// Chronodrome, GPL-3.0-or-later.
#include "ui/steps/channel_table_model.h"

#include <array>

#include "session/session_edits.h"
#include "ui/look/number_text.h"

namespace chronodrome::ui::steps {
namespace {

using recording::Role;

const QStringList& roleWords() {
  static const QStringList words = [] {
    QStringList list;
    for (const Role role :
         {Role::sinus, Role::atrial, Role::his, Role::ventricular, Role::ecg, Role::map, Role::stimulus,
          Role::tension, Role::pressure, Role::flow, Role::temperature, Role::other})
      list << QString::fromStdString(recording::name_of(role));
    return list;
  }();
  return words;
}

const QStringList kLeadWords = {QStringLiteral("unipolar"), QStringLiteral("bipolar"), QString()};

const std::array<const char*, ChannelTableModel::kColumns> kHeads = {
    "Signal", "Whole recording", "2 s", "Label", "Role", "Lead", "Unit", "Invert", "Role is"};
const std::array<const char*, ChannelTableModel::kColumns> kHints = {
    "The name in the file; a tick takes the signal into the session",
    "The whole recording",
    "Two seconds from the middle",
    "Short name, unique in the session",
    "What the electrode or transducer lies on",
    "Electrograms: one electrode in the tissue, or two",
    "The file's own unit; where it states none, yours",
    "Turns the signal upside down",
    "How far the role can be trusted: point at it to see why"};

} // namespace

ChannelTableModel::ChannelTableModel(SessionDraft& draft, QObject* parent)
    : QAbstractTableModel(parent), draft_(draft) {
  rebuild();
  connect(&draft_, &SessionDraft::changed, this, &ChannelTableModel::rebuild);
}

void ChannelTableModel::setTheme(const look::Theme& theme) {
  theme_ = theme;
  if (!rows_.empty()) Q_EMIT dataChanged(index(0, 0), index(rowCount() - 1, kColumns - 1));
}

std::vector<ChannelTableModel::Row> ChannelTableModel::rowsNow() const {
  std::vector<Row> rows;
  const auto& recording = draft_.recording();
  if (!recording) return rows;
  for (std::size_t i = 0; i < recording->signals.size(); ++i) {
    const auto& signal = recording->signals[i];
    bool taken = false;
    for (const auto& entry : draft_.session().channels) {
      if (recording->find(entry.source) != &signal) continue;
      rows.push_back({entry, true, i});
      taken = true;
    }
    if (taken) continue;
    Row row;
    row.signal = i;
    row.entry.source = signal.source_as_written;
    row.entry.label = signal.source;
    row.entry.role = recording::name_of(Role::other);
    row.entry.unit = signal.unit;
    if (i < draft_.guesses().size()) row.entry = draft_.guesses()[i].entry;
    rows.push_back(row);
  }
  return rows;
}

/// Rows stay where they are as long as their number does, so that an open editor and the selection do too.
void ChannelTableModel::rebuild() {
  auto rows = rowsNow();
  if (rows.size() != rows_.size()) {
    beginResetModel();
    rows_ = std::move(rows);
    endResetModel();
    return;
  }
  rows_ = std::move(rows);
  if (!rows_.empty()) Q_EMIT dataChanged(index(0, 0), index(rowCount() - 1, kColumns - 1));
}

int ChannelTableModel::rowCount(const QModelIndex& parent) const {
  return parent.isValid() ? 0 : static_cast<int>(rows_.size());
}

int ChannelTableModel::columnCount(const QModelIndex& parent) const {
  return parent.isValid() ? 0 : kColumns;
}

recording::Role ChannelTableModel::roleOf(int row) const {
  return recording::role_named(rows_[static_cast<std::size_t>(row)].entry.role).value_or(Role::other);
}

bool ChannelTableModel::isTaken(int row) const {
  return rows_[static_cast<std::size_t>(row)].taken;
}

bool ChannelTableModel::isInverted(int row) const {
  return rows_[static_cast<std::size_t>(row)].entry.invert;
}

const session::PreviewTrace* ChannelTableModel::traceOf(const QModelIndex& index) const {
  const std::size_t signal = rows_[static_cast<std::size_t>(index.row())].signal;
  if (signal >= draft_.previews().size()) return nullptr;
  const auto& preview = draft_.previews()[signal];
  const auto& trace = index.column() == Whole ? preview.whole : preview.close;
  return trace.pieces.empty() ? nullptr : &trace;
}

const session::ChannelProposal* ChannelTableModel::guessOf(const Row& row) const {
  return row.signal < draft_.guesses().size() ? &draft_.guesses()[row.signal] : nullptr;
}

QString ChannelTableModel::guessText(const Row& row) const {
  if (!row.taken) return QStringLiteral("left out");
  if (draft_.isConfirmed(row.entry.source)) return QStringLiteral("set by you");
  const auto* guess = guessOf(row);
  return guess == nullptr ? QString() : QString::fromStdString(session::name_of(guess->role.confidence));
}

QString ChannelTableModel::textOf(const Row& row, int column) const {
  switch (column) {
  case Source:
    return QString::fromStdString(row.entry.source);
  case Label:
    return QString::fromStdString(row.entry.label);
  case Role:
    return QString::fromStdString(row.entry.role);
  case Lead:
    return QString::fromStdString(row.entry.lead);
  case Unit:
    return QString::fromStdString(row.entry.unit);
  case Guessed:
    return guessText(row);
  default:
    return {};
  }
}

QString ChannelTableModel::reasonOf(const Row& row, int column) const {
  const auto* guess = guessOf(row);
  if (column == Whole || column == Close) {
    const auto* trace = traceOf(index(static_cast<int>(&row - rows_.data()), column));
    if (trace == nullptr) return QStringLiteral("nothing to draw");
    return QStringLiteral("%1 to %2, from %3 to %4")
        .arg(look::plainText(trace->range.min), look::withUnit(trace->range.max, row.entry.unit),
             look::timeText(trace->span.start), look::timeText(trace->span.end));
  }
  if (guess == nullptr || draft_.isConfirmed(row.entry.source))
    return QString::fromLatin1(kHints[static_cast<std::size_t>(column)]);
  const auto& part = column == Lead ? guess->lead : column == Unit ? guess->unit : guess->role;
  if (column == Source || column == Label || column == Invert || part.reason.empty())
    return QString::fromLatin1(kHints[static_cast<std::size_t>(column)]);
  return QString::fromStdString(session::name_of(part.confidence) + ": " + part.reason);
}

QVariant ChannelTableModel::data(const QModelIndex& index, int role) const {
  if (!index.isValid()) return {};
  const Row& row = rows_[static_cast<std::size_t>(index.row())];
  switch (role) {
  case Qt::DisplayRole:
    if (index.column() == Unit && row.entry.unit.empty()) return QStringLiteral("not stated");
    return index.column() == Unit ? look::unitText(row.entry.unit) : textOf(row, index.column());
  case Qt::EditRole:
    return textOf(row, index.column());
  case Qt::CheckStateRole:
    if (index.column() == Source) return row.taken ? Qt::Checked : Qt::Unchecked;
    if (index.column() == Invert) return row.entry.invert ? Qt::Checked : Qt::Unchecked;
    return {};
  case Qt::ToolTipRole:
    return reasonOf(row, index.column());
  case Qt::ForegroundRole: {
    const QString guess = guessText(row);
    if (!row.taken) return theme_.text_quiet;
    if (index.column() == Guessed &&
        (guess == QStringLiteral("guessed") || guess == QStringLiteral("unknown")))
      return theme_.caution;
    if (index.column() == Guessed || (index.column() == Unit && row.entry.unit.empty()))
      return theme_.text_quiet;
    return {};
  }
  case kChoicesRole:
    if (index.column() == Role) return roleWords();
    if (index.column() == Lead) return kLeadWords;
    return {};
  default:
    return {};
  }
}

Qt::ItemFlags ChannelTableModel::flags(const QModelIndex& index) const {
  Qt::ItemFlags flags = QAbstractTableModel::flags(index);
  if (!index.isValid() || draft_.isReadOnly()) return flags;
  const Row& row = rows_[static_cast<std::size_t>(index.row())];
  switch (index.column()) {
  case Source:
    return flags | Qt::ItemIsUserCheckable;
  case Invert:
    return row.taken ? flags | Qt::ItemIsUserCheckable : flags;
  case Lead: {
    const auto role = recording::role_named(row.entry.role).value_or(Role::other);
    return row.taken && recording::is_electrogram(role) ? flags | Qt::ItemIsEditable : flags;
  }
  case Label:
  case Role:
    return row.taken ? flags | Qt::ItemIsEditable : flags;
  case Unit: {
    // What the file states stands; only where it states nothing, or counts, the user does.
    const auto& unit = draft_.recording()->signals[row.signal].unit;
    return row.taken && unit.empty() ? flags | Qt::ItemIsEditable : flags;
  }
  default:
    return flags;
  }
}

QVariant ChannelTableModel::headerData(int section, Qt::Orientation orientation, int role) const {
  if (orientation != Qt::Horizontal || section < 0 || section >= kColumns) return {};
  if (role == Qt::DisplayRole) return QString::fromLatin1(kHeads[static_cast<std::size_t>(section)]);
  if (role == Qt::ToolTipRole) return QString::fromLatin1(kHints[static_cast<std::size_t>(section)]);
  if (role == Qt::TextAlignmentRole) return int(Qt::AlignLeft | Qt::AlignVCenter);
  return {};
}

bool ChannelTableModel::take(const Row& row, bool wanted) {
  if (wanted == row.taken) return false;
  const QString name = QString::fromStdString(wanted ? row.entry.source : row.entry.label);
  if (wanted) {
    draft_.change(session::with_channel_added(draft_.session(), row.entry, *draft_.recording()),
                  QStringLiteral("take %1").arg(name));
    return true;
  }
  return draft_.change(session::with_channel_removed(draft_.session(), row.entry.label),
                       QStringLiteral("leave %1 out").arg(name));
}

bool ChannelTableModel::changeEntry(const Row& row, int column, const QString& text) {
  auto entry = row.entry;
  const std::string before = entry.label;
  const std::string value = text.trimmed().toStdString();
  std::string& field = column == Label  ? entry.label
                       : column == Role ? entry.role
                       : column == Lead ? entry.lead
                                        : entry.unit;
  if (field == value) return false;
  if (column == Role && !recording::role_named(value)) return false;
  if (column == Lead && !recording::lead_named(value)) return false;
  field = value;
  // Electrodes that have just become electrograms are taken as the label names them: one electrode.
  const auto role = recording::role_named(entry.role).value_or(Role::other);
  const bool chamber = recording::is_electrogram(role) && role != Role::ecg && role != Role::map;
  if (column == Role && chamber && entry.lead.empty()) {
    const auto read = session::read_lead(entry.source);
    entry.lead = recording::name_of(read.word.empty() ? recording::Lead::unipolar : read.lead);
  }
  const QString what = QString::fromLatin1(kHeads[static_cast<std::size_t>(column)]).toLower();
  if (column == Role) draft_.confirm(entry.source);
  return draft_.change(session::with_channel_changed(draft_.session(), before, entry),
                       QStringLiteral("%1 of %2").arg(what, QString::fromStdString(before)));
}

bool ChannelTableModel::setData(const QModelIndex& index, const QVariant& value, int role) {
  if (!index.isValid() || !(flags(index) & (Qt::ItemIsEditable | Qt::ItemIsUserCheckable))) return false;
  const Row row = rows_[static_cast<std::size_t>(index.row())];
  if (role == Qt::CheckStateRole) {
    const bool checked = value.toInt() == Qt::Checked;
    if (index.column() == Source) return take(row, checked);
    if (index.column() != Invert || checked == row.entry.invert) return false;
    auto entry = row.entry;
    entry.invert = checked;
    return draft_.change(session::with_channel_changed(draft_.session(), entry.label, entry),
                         QStringLiteral("invert %1").arg(QString::fromStdString(entry.label)));
  }
  if (role != Qt::EditRole) return false;
  return changeEntry(row, index.column(), value.toString());
}

} // namespace chronodrome::ui::steps
