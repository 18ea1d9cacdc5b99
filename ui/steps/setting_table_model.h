// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <map>
#include <string>
#include <vector>

#include <QAbstractTableModel>

#include "ui/look/theme.h"
#include "ui/steps/session_draft.h"

namespace chronodrome::ui::steps {

/// Every setting of the analysis: key, value in effect, unit, default, meaning. A session keeps only what
/// differs from the default.
class SettingTableModel : public QAbstractTableModel {
  Q_OBJECT
public:
  enum Column { Key, Value, Unit, Default, Meaning, kColumns };

  explicit SettingTableModel(SessionDraft& draft, QObject* parent = nullptr);
  void setTheme(const look::Theme& theme) { theme_ = theme; }

  [[nodiscard]] int rowCount(const QModelIndex& parent = {}) const override;
  [[nodiscard]] int columnCount(const QModelIndex& parent = {}) const override;
  [[nodiscard]] QVariant data(const QModelIndex& index, int role = Qt::DisplayRole) const override;
  bool setData(const QModelIndex& index, const QVariant& value, int role = Qt::EditRole) override;
  [[nodiscard]] Qt::ItemFlags flags(const QModelIndex& index) const override;
  [[nodiscard]] QVariant headerData(int section, Qt::Orientation orientation,
                                    int role = Qt::DisplayRole) const override;

  [[nodiscard]] bool isChanged(int row) const;
  /// Gives the setting its default back.
  void reset(int row);
  /// Key, meaning and what may stand there, for the line below the table.
  [[nodiscard]] QString description(int row) const;

private:
  void rebuild();
  bool set(int row, const std::optional<document::SettingValue>& value);

  SessionDraft& draft_;
  look::Theme theme_ = look::Theme::of(look::Mode::light);
  std::map<std::string, document::SettingValue> values_, defaults_;
};

} // namespace chronodrome::ui::steps
