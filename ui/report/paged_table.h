// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <vector>

#include "ui/look/theme.h"
#include "ui/report/content.h"
#include "ui/report/page_flow.h"
#include "ui/report/text_box.h"

namespace chronodrome::ui::report {

/// A table set for pages: column widths from its texts, heads repeated on each page, group rows kept with the
/// row below them, and a row broken over pages only where it would fill half of one.
class PagedTable {
public:
  PagedTable(const Table& table, const look::Theme& theme);

  /// Of the heads and the first rows: what must fit below a heading.
  [[nodiscard]] double firstHeight() const;
  void flow(PageFlow& pages) const;

private:
  struct Row {
    std::vector<TextBox> cells;
    bool is_group = false;
    int lines = 1;
    double height = 0.0;
  };
  Row rowOf(const Table::Row& row, bool is_head) const;
  void setWidths(const Table& table);
  void drawRow(PageFlow& pages, const Row& row, int first, int last) const;
  void placeHead(PageFlow& pages) const;
  void placeSplit(PageFlow& pages, const Row& row) const;

  const look::Theme& theme_;
  std::vector<Table::Column> columns_;
  std::vector<double> widths_; ///< of the texts, without padding
  Row head_;
  std::vector<Row> rows_;
};

/// Font of the paper at a size, without the hinting of a screen.
QFont paperFont(const look::Theme& theme, look::TextSize size, bool bold = false);

} // namespace chronodrome::ui::report
