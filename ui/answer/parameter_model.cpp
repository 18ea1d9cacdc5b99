// Chronodrome, GPL-3.0-or-later.
#include "ui/answer/parameter_model.h"

#include "ui/answer/words.h"

namespace chronodrome::ui::answer {
namespace {

QVariant raw(const std::optional<double>& value) {
  return value ? QVariant(*value) : QVariant();
}

} // namespace

void ParameterModel::setRows(std::vector<session::ParameterRow> rows, const std::string& axisUnit) {
  beginResetModel();
  rows_ = std::move(rows);
  axis_unit_ = axisUnit;
  endResetModel();
}

void ParameterModel::setTheme(const look::Theme& theme) {
  theme_ = theme;
  if (!rows_.empty()) Q_EMIT dataChanged(index(0, 0), index(rowCount() - 1, kColumnCount - 1));
}

int ParameterModel::rowCount(const QModelIndex& parent) const {
  return parent.isValid() ? 0 : static_cast<int>(rows_.size());
}

int ParameterModel::columnCount(const QModelIndex& parent) const {
  return parent.isValid() ? 0 : kColumnCount;
}

QString ParameterModel::cell(const session::ParameterRow& row, int column) const {
  switch (column) {
  case kParameter:
    return parameterCell(row, axis_unit_);
  case kEstimate:
    return estimateCell(row);
  case kInterval:
    return intervalCell(row);
  case kDetermined:
    return determinedCell(row);
  case kResponses:
    return QString::number(row.n);
  default:
    return {};
  }
}

QVariant ParameterModel::data(const QModelIndex& index, int role) const {
  if (!index.isValid() || index.row() >= rowCount()) return {};
  const session::ParameterRow& row = rows_[static_cast<std::size_t>(index.row())];
  const int column = index.column();
  switch (role) {
  case Qt::DisplayRole:
    return cell(row, column);
  case Qt::ToolTipRole:
    if (column == kDetermined) return determinedText(row);
    return column == kParameter ? parameterCell(row, {}) : cell(row, column);
  case kRawValueRole:
    if (column == kParameter) return QString::fromStdString(row.name);
    if (column == kEstimate) return raw(row.value.estimate);
    if (column == kInterval) return QVariantList{raw(row.value.ci_low), raw(row.value.ci_high)};
    if (column == kDetermined) return QString::fromStdString(row.value.ci_method);
    return QVariant::fromValue(static_cast<qulonglong>(row.n));
  case Qt::TextAlignmentRole:
    return static_cast<int>(Qt::AlignVCenter |
                            (column == kParameter || column == kDetermined ? Qt::AlignLeft : Qt::AlignRight));
  case Qt::FontRole:
    return theme_.font(look::TextSize::small, row.name == "pec50" && column <= kInterval);
  case Qt::ForegroundRole:
    return column == kDetermined || column == kResponses || row.is_censored ? theme_.text_quiet : theme_.text;
  default:
    return {};
  }
}

QVariant ParameterModel::headerData(int section, Qt::Orientation orientation, int role) const {
  if (orientation != Qt::Horizontal) return {};
  if (role == Qt::FontRole) return theme_.font(look::TextSize::small);
  if (role == Qt::TextAlignmentRole)
    return static_cast<int>(
        Qt::AlignVCenter |
        (section == kParameter || section == kDetermined ? Qt::AlignLeft : Qt::AlignRight));
  if (role == Qt::ToolTipRole && section == kResponses) return tr("Responses in the fit: of one preparation");
  if (role == Qt::ToolTipRole && section == kDetermined)
    return tr("How estimate and interval were determined");
  if (role != Qt::DisplayRole) return {};
  switch (section) {
  case kParameter:
    return tr("parameter");
  case kEstimate:
    return tr("estimate");
  case kInterval:
    return tr("95 % interval");
  case kDetermined:
    return tr("method");
  case kResponses:
    return tr("n");
  default:
    return {};
  }
}

QString ParameterModel::tabSeparated() const {
  QStringList lines, cells;
  for (int column = 0; column < kColumnCount; ++column)
    cells << headerData(column, Qt::Horizontal).toString();
  lines << cells.join(QLatin1Char('\t'));
  for (const session::ParameterRow& row : rows_) {
    cells.clear();
    // Away from the axis a number needs its unit.
    cells << parameterCell(row, {});
    for (int column = kEstimate; column < kColumnCount; ++column)
      cells << cell(row, column).replace(QChar(0x00A0), QLatin1Char(' '));
    lines << cells.join(QLatin1Char('\t'));
  }
  return lines.join(QLatin1Char('\n')) + QLatin1Char('\n');
}

} // namespace chronodrome::ui::answer
