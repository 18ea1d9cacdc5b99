// Chronodrome, GPL-3.0-or-later.
#include "ui/report/content.h"

#include <algorithm>

namespace chronodrome::ui::report {

Table withoutEmptyColumns(Table table) {
  for (auto i = static_cast<qsizetype>(table.columns.size()) - 1; i >= 0; --i) {
    const bool is_used = std::any_of(table.rows.begin(), table.rows.end(), [i](const Table::Row& row) {
      return !row.is_group && !row.cells.value(i).isEmpty();
    });
    if (is_used) continue;
    table.columns.erase(table.columns.begin() + i);
    for (auto& row : table.rows) {
      if (!row.is_group && i < row.cells.size()) row.cells.removeAt(i);
    }
  }
  return table;
}

} // namespace chronodrome::ui::report
