// Chronodrome, GPL-3.0-or-later.
#include "ui/steps/setting_table_model.h"

#include <array>

#include <QFont>

#include "base/number_text.h"
#include "session/analysis_settings.h"
#include "ui/look/number_text.h"
#include "ui/steps/channel_table_model.h"

namespace chronodrome::ui::steps {
namespace {

const std::array<const char*, SettingTableModel::kColumns> kHeads = {"Setting", "Value", "Unit", "Default",
                                                                     "Meaning"};

QString textOf(const document::SettingValue& value) {
  if (const auto* number = std::get_if<double>(&value)) return QString::fromStdString(exact_text(*number));
  if (const auto* truth = std::get_if<bool>(&value))
    return *truth ? QStringLiteral("yes") : QStringLiteral("no");
  return QString::fromStdString(std::get<std::string>(value));
}

const session::SettingRow& rowAt(int row) {
  return session::setting_rows()[static_cast<std::size_t>(row)];
}

/// `automatic, 50, 60 or off` as a list.
QStringList wordsOf(const std::string& allowed) {
  QString text = QString::fromStdString(allowed);
  text.replace(QStringLiteral(" or "), QStringLiteral(", "));
  QStringList words;
  for (const QString& word : text.split(QLatin1Char(','), Qt::SkipEmptyParts))
    words << word.trimmed();
  return words;
}

} // namespace

SettingTableModel::SettingTableModel(SessionDraft& draft, QObject* parent)
    : QAbstractTableModel(parent), draft_(draft) {
  rebuild();
  connect(&draft_, &SessionDraft::changed, this, &SettingTableModel::rebuild);
}

void SettingTableModel::rebuild() {
  auto plain = draft_.session();
  plain.analysis.clear();
  // Settings that cannot be used are an error of the analysis; here they leave the defaults.
  const auto usual = session::settings_of(plain);
  const auto chosen = session::settings_of(draft_.session());
  if (usual) defaults_ = session::in_effect(usual->settings);
  values_ = chosen ? session::in_effect(chosen->settings) : defaults_;
  Q_EMIT dataChanged(index(0, 0), index(rowCount() - 1, kColumns - 1));
}

int SettingTableModel::rowCount(const QModelIndex& parent) const {
  return parent.isValid() ? 0 : static_cast<int>(session::setting_rows().size());
}

int SettingTableModel::columnCount(const QModelIndex& parent) const {
  return parent.isValid() ? 0 : kColumns;
}

bool SettingTableModel::isChanged(int row) const {
  const auto& key = rowAt(row).key;
  const auto value = values_.find(key);
  const auto usual = defaults_.find(key);
  return value != values_.end() && usual != defaults_.end() && value->second != usual->second;
}

QString SettingTableModel::description(int row) const {
  const auto& setting = rowAt(row);
  QString text = QString::fromStdString(setting.key + ": " + setting.meaning);
  if (!setting.allowed.empty())
    text += QStringLiteral(". One of %1").arg(QString::fromStdString(setting.allowed));
  if (setting.follows_species) text += QStringLiteral(". Follows the species as long as it is not set");
  return text;
}

QVariant SettingTableModel::data(const QModelIndex& index, int role) const {
  if (!index.isValid()) return {};
  const auto& setting = rowAt(index.row());
  const auto shown = [&](const std::map<std::string, document::SettingValue>& map) {
    const auto found = map.find(setting.key);
    return found == map.end() ? QString() : textOf(found->second);
  };
  switch (role) {
  case Qt::DisplayRole:
  case Qt::EditRole:
    switch (index.column()) {
    case Key: {
      const QString key = QString::fromStdString(setting.key);
      return role == Qt::DisplayRole && isChanged(index.row()) ? key + QStringLiteral(" (changed)") : key;
    }
    case Value:
      return shown(values_);
    case Unit:
      return look::unitText(setting.unit);
    case Default:
      return shown(defaults_);
    default:
      return QString::fromStdString(setting.meaning);
    }
  case Qt::ToolTipRole:
    return description(index.row());
  case Qt::FontRole: {
    QFont font;
    font.setBold(isChanged(index.row()) && (index.column() == Key || index.column() == Value));
    return font;
  }
  case Qt::ForegroundRole:
    return index.column() == Default || index.column() == Unit ? QVariant(theme_.text_quiet) : QVariant();
  case Qt::TextAlignmentRole:
    return int((index.column() == Value || index.column() == Default ? Qt::AlignRight : Qt::AlignLeft) |
               Qt::AlignVCenter);
  case kChoicesRole:
    return index.column() == Value ? wordsOf(setting.allowed) : QStringList();
  default:
    return {};
  }
}

Qt::ItemFlags SettingTableModel::flags(const QModelIndex& index) const {
  const Qt::ItemFlags flags = QAbstractTableModel::flags(index);
  return index.isValid() && index.column() == Value && !draft_.isReadOnly() ? flags | Qt::ItemIsEditable
                                                                            : flags;
}

QVariant SettingTableModel::headerData(int section, Qt::Orientation orientation, int role) const {
  if (orientation != Qt::Horizontal || role != Qt::DisplayRole || section < 0 || section >= kColumns)
    return {};
  return QString::fromLatin1(kHeads[static_cast<std::size_t>(section)]);
}

bool SettingTableModel::setData(const QModelIndex& index, const QVariant& value, int role) {
  if (!(flags(index) & Qt::ItemIsEditable) || role != Qt::EditRole) return false;
  const QString text = value.toString().trimmed();
  if (text == data(index, Qt::EditRole).toString()) return false;
  if (text.isEmpty()) return set(index.row(), std::nullopt);
  if (!rowAt(index.row()).allowed.empty())
    return set(index.row(), document::SettingValue(text.toStdString()));
  const auto number = look::typedNumber(text);
  if (!number) {
    draft_.refuse(QStringLiteral("\"%1\" is no number; %2 needs one")
                      .arg(text, QString::fromStdString(rowAt(index.row()).key)));
    return false;
  }
  return set(index.row(), document::SettingValue(*number));
}

void SettingTableModel::reset(int row) {
  if (row >= 0 && row < rowCount() && !draft_.isReadOnly()) set(row, std::nullopt);
}

bool SettingTableModel::set(int row, const std::optional<document::SettingValue>& value) {
  const auto& setting = rowAt(row);
  auto session = draft_.session();
  const auto usual = defaults_.find(setting.key);
  if (!value || (usual != defaults_.end() && *value == usual->second)) {
    if (session.analysis.erase(setting.key) == 0) return false;
  } else {
    session.analysis[setting.key] = *value;
  }
  // Refused before it is an edit: a setting out of range would leave the session without an analysis.
  if (const auto usable = session::settings_of(session); !usable) {
    draft_.refuse(look::messageText(usable.error()));
    return false;
  }
  draft_.change(std::move(session), QStringLiteral("setting %1").arg(QString::fromStdString(setting.key)));
  return true;
}

} // namespace chronodrome::ui::steps
