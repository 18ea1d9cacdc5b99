// Chronodrome, GPL-3.0-or-later.
#include "ui/report/paged_table.h"

#include <algorithm>
#include <numeric>

#include "ui/look/plot_style.h"

namespace chronodrome::ui::report {
namespace {

constexpr double kPadX = 5.0;
constexpr double kPadY = 2.0;
/// A word longer than this may be broken rather than squeeze the other columns.
constexpr double kLongestWord = 170.0;

double sum(const std::vector<double>& values) {
  return std::accumulate(values.begin(), values.end(), 0.0);
}

} // namespace

QFont paperFont(const look::Theme& theme, look::TextSize size, bool bold) {
  QFont font = theme.font(size, bold);
  font.setHintingPreference(QFont::PreferNoHinting);
  return font;
}

PagedTable::PagedTable(const Table& table, const look::Theme& theme)
    : theme_(theme), columns_(table.columns) {
  setWidths(table);
  Table::Row heads;
  for (const auto& column : columns_)
    heads.cells.append(column.head);
  head_ = rowOf(heads, true);
  for (const auto& row : table.rows)
    rows_.push_back(rowOf(row, false));
}

void PagedTable::setWidths(const Table& table) {
  const QFont font = paperFont(theme_, look::TextSize::small);
  const QFont bold = paperFont(theme_, look::TextSize::small, true);
  const std::size_t n = columns_.size();
  std::vector<double> natural(n), least(n);
  const auto take = [&](std::size_t i, const QString& text, const QFont& set_in, bool is_head) {
    const double word = std::min(TextBox::leastWidth(text, set_in), kLongestWord);
    least[i] = std::max(least[i], word);
    // A head may stand on two lines; it does not make a column wide.
    natural[i] = std::max(natural[i], is_head ? std::max(word, 0.62 * TextBox::naturalWidth(text, set_in))
                                              : TextBox::naturalWidth(text, set_in));
  };
  for (std::size_t i = 0; i < n; ++i)
    take(i, columns_[i].head, bold, true);
  for (const auto& row : table.rows) {
    if (row.is_group) continue;
    for (std::size_t i = 0; i < n && i < static_cast<std::size_t>(row.cells.size()); ++i)
      take(i, row.cells.at(static_cast<qsizetype>(i)), font, false);
  }
  const double room = kContentWidth - 2.0 * kPadX * static_cast<double>(n);
  const double wanted = sum(natural);
  widths_ = natural;
  if (wanted <= room) {
    const double extra = std::min(20.0, (room - wanted) / static_cast<double>(n));
    for (double& width : widths_)
      width += extra;
    return;
  }
  // Each column has its longest word; what is left goes to those that want more, by how much they want.
  const double spare = std::max(0.0, room - sum(least));
  const double missing = std::max(1.0, wanted - sum(least));
  for (std::size_t i = 0; i < n; ++i)
    widths_[i] = least[i] + spare * (natural[i] - least[i]) / missing;
  if (const double all = sum(widths_); all > room) {
    for (double& width : widths_)
      width *= room / all;
  }
}

PagedTable::Row PagedTable::rowOf(const Table::Row& row, bool is_head) const {
  Row set;
  set.is_group = row.is_group;
  const QFont font = paperFont(theme_, look::TextSize::small, is_head || row.is_group);
  for (qsizetype i = 0; i < row.cells.size(); ++i) {
    const auto at = static_cast<std::size_t>(i);
    const bool right = !row.is_group && at < columns_.size() && columns_[at].is_number;
    const double width = row.is_group ? kContentWidth - 2.0 * kPadX : at < widths_.size() ? widths_[at] : 0.0;
    const auto side = right ? Qt::AlignRight : Qt::AlignLeft;
    set.cells.emplace_back(row.cells.at(i), TextBox::Style{font, theme_.text, side, 0}, width);
    set.lines = std::max(set.lines, set.cells.back().lineCount());
  }
  const double line = set.cells.empty() ? 0.0 : set.cells.front().lineHeight();
  set.height = set.lines * line + 2.0 * kPadY;
  return set;
}

void PagedTable::drawRow(PageFlow& pages, const Row& row, int first, int last) const {
  const double line = row.cells.empty() ? 0.0 : row.cells.front().lineHeight();
  const double height = (last - first) * line + 2.0 * kPadY;
  const double width = row.is_group ? sum(widths_) + 2.0 * kPadX * static_cast<double>(columns_.size()) : 0.0;
  const std::vector<double> widths = widths_;
  const look::Theme& theme = theme_;
  const double all = sum(widths_) + 2.0 * kPadX * static_cast<double>(columns_.size());
  pages.place(height, [row, first, last, height, width, widths, all, &theme](QCPPainter& painter, double y) {
    if (row.is_group) painter.fillRect(QRectF(0.0, y, width, height), theme.raised);
    double x = kPadX;
    for (std::size_t i = 0; i < row.cells.size(); ++i) {
      row.cells[i].draw(painter, QPointF(x, y + kPadY), first, last);
      if (i < widths.size()) x += widths[i] + 2.0 * kPadX;
    }
    painter.setPen(QPen(theme.grid, 0.5));
    painter.drawLine(QPointF(0.0, y + height), QPointF(all, y + height));
  });
}

void PagedTable::placeHead(PageFlow& pages) const {
  drawRow(pages, head_, 0, head_.lines);
  const double all = sum(widths_) + 2.0 * kPadX * static_cast<double>(columns_.size());
  const look::Theme& theme = theme_;
  pages.place(1.0, [all, &theme](QCPPainter& painter, double y) {
    painter.setPen(QPen(theme.text, 0.75));
    painter.drawLine(QPointF(0.0, y), QPointF(all, y));
  });
}

double PagedTable::firstHeight() const {
  double height = head_.height + 1.0;
  for (std::size_t i = 0; i < rows_.size() && i < 3; ++i)
    height += std::min(rows_[i].height, 200.0);
  return height;
}

void PagedTable::placeSplit(PageFlow& pages, const Row& row) const {
  const double line = row.cells.empty() ? 1.0 : row.cells.front().lineHeight();
  for (int first = 0; first < row.lines;) {
    int fitting = static_cast<int>((pages.left() - 2.0 * kPadY) / line);
    if (fitting < 2) {
      pages.newPage();
      placeHead(pages);
      fitting = std::max(1, static_cast<int>((pages.left() - 2.0 * kPadY) / line));
    }
    const int last = std::min(row.lines, first + fitting);
    drawRow(pages, row, first, last);
    first = last;
  }
}

void PagedTable::flow(PageFlow& pages) const {
  pages.need(std::min(firstHeight(), pages.height()));
  placeHead(pages);
  for (std::size_t i = 0; i < rows_.size(); ++i) {
    const Row& row = rows_[i];
    if (row.height > 0.5 * pages.height()) {
      placeSplit(pages, row);
      continue;
    }
    // A group's heading stays with its first row; the last row never goes over alone.
    double needed = row.height;
    if (row.is_group && i + 1 < rows_.size()) needed += std::min(rows_[i + 1].height, 100.0);
    if (i + 2 == rows_.size()) needed += std::min(rows_[i + 1].height, 100.0);
    if (needed > pages.left() && !pages.isAtTop()) {
      pages.newPage();
      placeHead(pages);
    }
    drawRow(pages, row, 0, row.lines);
  }
}

} // namespace chronodrome::ui::report
