// Chronodrome, GPL-3.0-or-later.
#include "ui/steps/pathway_table_model.h"

#include <algorithm>
#include <array>

#include "base/number_text.h"
#include "session/session_edits.h"
#include "ui/look/number_text.h"
#include "ui/steps/channel_table_model.h"

namespace chronodrome::ui::steps {
namespace {

const std::array<const char*, PathwayTableModel::kColumns> kHeads = {"Pathway", "From", "To", "Distance, mm"};
const std::array<const char*, PathwayTableModel::kColumns> kHints = {
    "Short name, unique in the session", "The channel where the impulse comes from",
    "The channel where it arrives", "Between the electrodes; a velocity needs it. May stay empty"};

} // namespace

PathwayTableModel::PathwayTableModel(SessionDraft& draft, QObject* parent)
    : QAbstractTableModel(parent), draft_(draft) {
  rebuild();
  connect(&draft_, &SessionDraft::changed, this, &PathwayTableModel::rebuild);
}

void PathwayTableModel::rebuild() {
  const int now = static_cast<int>(draft_.session().pathways.size());
  if (now != rows_) {
    beginResetModel();
    rows_ = now;
    endResetModel();
  } else if (rows_ > 0) {
    Q_EMIT dataChanged(index(0, 0), index(rows_ - 1, kColumns - 1));
  }
}

int PathwayTableModel::rowCount(const QModelIndex& parent) const {
  return parent.isValid() ? 0 : rows_;
}

int PathwayTableModel::columnCount(const QModelIndex& parent) const {
  return parent.isValid() ? 0 : kColumns;
}

QStringList PathwayTableModel::electrograms() const {
  QStringList labels;
  for (const auto& channel : draft_.session().channels) {
    const auto role = recording::role_named(channel.role);
    if (role && recording::is_electrogram(*role)) labels << QString::fromStdString(channel.label);
  }
  return labels;
}

QVariant PathwayTableModel::data(const QModelIndex& index, int role) const {
  if (!index.isValid() || index.row() >= static_cast<int>(draft_.session().pathways.size())) return {};
  const auto& pathway = draft_.session().pathways[static_cast<std::size_t>(index.row())];
  if (role == kChoicesRole)
    return index.column() == From || index.column() == To ? electrograms() : QStringList();
  if (role == Qt::ToolTipRole) return QString::fromLatin1(kHints[static_cast<std::size_t>(index.column())]);
  if (role != Qt::DisplayRole && role != Qt::EditRole) return {};
  switch (index.column()) {
  case Label:
    return QString::fromStdString(pathway.label);
  case From:
    return QString::fromStdString(pathway.from);
  case To:
    return QString::fromStdString(pathway.to);
  default:
    return pathway.distance_mm ? QString::fromStdString(exact_text(*pathway.distance_mm)) : QString();
  }
}

bool PathwayTableModel::setData(const QModelIndex& index, const QVariant& value, int role) {
  if (!index.isValid() || role != Qt::EditRole || draft_.isReadOnly()) return false;
  auto pathway = draft_.session().pathways[static_cast<std::size_t>(index.row())];
  if (value.toString().trimmed() == data(index, Qt::EditRole).toString()) return false;
  const std::string text = value.toString().trimmed().toStdString();
  switch (index.column()) {
  case Label:
    pathway.label = text;
    break;
  case From:
    pathway.from = text;
    break;
  case To:
    pathway.to = text;
    break;
  default: {
    pathway.distance_mm = look::typedNumber(value.toString());
    if (!text.empty() && !pathway.distance_mm) {
      draft_.refuse(
          QStringLiteral("\"%1\" is no distance; give it in mm, or leave it empty").arg(value.toString()));
      return false;
    }
  }
  }
  return draft_.change(
      session::with_pathway_set(draft_.session(), static_cast<std::size_t>(index.row()), pathway),
      QStringLiteral("pathway %1").arg(QString::fromStdString(pathway.label)));
}

Qt::ItemFlags PathwayTableModel::flags(const QModelIndex& index) const {
  const Qt::ItemFlags flags = QAbstractTableModel::flags(index);
  return index.isValid() && !draft_.isReadOnly() ? flags | Qt::ItemIsEditable : flags;
}

QVariant PathwayTableModel::headerData(int section, Qt::Orientation orientation, int role) const {
  if (orientation != Qt::Horizontal || section < 0 || section >= kColumns) return {};
  if (role == Qt::DisplayRole) return QString::fromLatin1(kHeads[static_cast<std::size_t>(section)]);
  if (role == Qt::ToolTipRole) return QString::fromLatin1(kHints[static_cast<std::size_t>(section)]);
  if (role == Qt::TextAlignmentRole) return int(Qt::AlignLeft | Qt::AlignVCenter);
  return {};
}

int PathwayTableModel::add() {
  const QStringList labels = electrograms();
  const auto& pathways = draft_.session().pathways;
  const auto known = [&](const std::string& from, const std::string& to) {
    return std::any_of(pathways.begin(), pathways.end(),
                       [&](const auto& p) { return p.from == from && p.to == to; });
  };
  for (const QString& a : labels) {
    for (const QString& b : labels) {
      if (a == b || known(a.toStdString(), b.toStdString())) continue;
      const std::string label = (a + QLatin1Char('-') + b).toStdString();
      if (draft_.change(session::with_pathway_set(draft_.session(), pathways.size(),
                                                  {label, a.toStdString(), b.toStdString(), std::nullopt}),
                        QStringLiteral("add pathway %1").arg(QString::fromStdString(label))))
        return rows_ - 1;
      return -1;
    }
  }
  draft_.refuse(
      QStringLiteral("a pathway runs between two electrograms, and there are no two without one; give "
                     "channels their roles first"));
  return -1;
}

void PathwayTableModel::remove(int row) {
  if (row < 0 || row >= rows_ || draft_.isReadOnly()) return;
  const QString label =
      QString::fromStdString(draft_.session().pathways[static_cast<std::size_t>(row)].label);
  draft_.change(session::with_pathway_removed(draft_.session(), static_cast<std::size_t>(row)),
                QStringLiteral("remove pathway %1").arg(label));
}

} // namespace chronodrome::ui::steps
