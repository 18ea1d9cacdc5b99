// Chronodrome, GPL-3.0-or-later.
#include "intake/csv_footer.h"

#include <algorithm>
#include <vector>

#include "base/number_text.h"

namespace chronodrome::intake {
namespace {

bool is_line_end(char c) {
  return c == '\n' || c == '\r';
}

std::string_view trimmed_line(std::string_view line) {
  while (!line.empty() && is_line_end(line.back()))
    line.remove_suffix(1);
  return trimmed(line);
}

/// Where the line begins that ends, with its line end, at `end`.
std::size_t line_begin(std::string_view text, std::size_t end) {
  std::size_t at = end;
  if (at > 0 && text[at - 1] == '\n') --at;
  if (at > 0 && text[at - 1] == '\r') --at;
  while (at > 0 && !is_line_end(text[at - 1]))
    --at;
  return at;
}

/// A letter at the front of the cell in the time column. Digits may be a damaged time: no footer.
bool begins_with_words(std::string_view line, const TableLayout& layout) {
  if (std::count(line.begin(), line.end(), '"') % 2 != 0) return false; // part of a cell with line ends
  std::vector<Cell> cells;
  read_record(line, 0, layout.dialect.delimiter, true, cells);
  if (cells.size() <= *layout.time_column) return false;
  const std::string_view cell = trimmed(cells[*layout.time_column].text);
  if (cell.empty() || is_missing(cell)) return false;
  const auto first = static_cast<unsigned char>(cell.front());
  return (first >= 'A' && first <= 'Z') || (first >= 'a' && first <= 'z') || first >= 0x80;
}

} // namespace

std::size_t footer_of(std::string_view text, const TableLayout& layout) {
  if (!layout.time_column) return text.size();
  std::size_t footer = text.size();
  for (std::size_t end = footer; end > 0 && text.size() - end < kLargestFooter;) {
    const std::size_t begin = line_begin(text, end);
    const std::string_view line = text.substr(begin, end - begin);
    if (text.size() - begin > kLargestFooter) break; // the line may reach into an earlier block
    if (!trimmed_line(line).empty()) {
      if (!begins_with_words(line, layout)) break;
      footer = begin;
    }
    end = begin;
  }
  return footer;
}

} // namespace chronodrome::intake
