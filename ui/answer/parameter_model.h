// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <vector>

#include <QAbstractTableModel>

#include "session/curve_view.h"
#include "ui/look/theme.h"

namespace chronodrome::ui::answer {

inline constexpr int kParameterRowHeight = 20; ///< device-independent pixels

/// The parameters of the shown fit, a row each.
class ParameterModel : public QAbstractTableModel {
  Q_OBJECT
public:
  enum Column { kParameter, kEstimate, kInterval, kDetermined, kResponses, kColumnCount };
  /// The number behind a cell: a double for the estimate, a list of two (null where open) for the interval.
  static constexpr int kRawValueRole = Qt::UserRole + 1;

  explicit ParameterModel(QObject* parent = nullptr) : QAbstractTableModel(parent) {}

  /// `axisUnit`: stands at the response axis beside the table.
  void setRows(std::vector<session::ParameterRow> rows, const std::string& axisUnit);
  void setTheme(const look::Theme& theme);

  [[nodiscard]] int rowCount(const QModelIndex& parent = {}) const override;
  [[nodiscard]] int columnCount(const QModelIndex& parent = {}) const override;
  [[nodiscard]] QVariant data(const QModelIndex& index, int role = Qt::DisplayRole) const override;
  [[nodiscard]] QVariant headerData(int section, Qt::Orientation orientation,
                                    int role = Qt::DisplayRole) const override;
  /// Headings and all rows, cells parted by tabs, lines by line feeds.
  [[nodiscard]] QString tabSeparated() const;

private:
  [[nodiscard]] QString cell(const session::ParameterRow& row, int column) const;

  std::vector<session::ParameterRow> rows_;
  std::string axis_unit_;
  look::Theme theme_;
};

} // namespace chronodrome::ui::answer
