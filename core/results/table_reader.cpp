// Chronodrome, GPL-3.0-or-later.
#include "results/table_reader.h"

#include <algorithm>

namespace chronodrome::results {

bool TableReader::next(std::vector<std::string>& cells) {
  cells.clear();
  if (rest_.empty()) return false;
  for (;;) {
    cells.push_back(cell());
    if (rest_.empty()) return true;
    const char mark = rest_.front();
    rest_.remove_prefix(1);
    if (mark == '\n') return true;
  }
}

/// Leaves the mark behind the cell in place.
std::string TableReader::cell() {
  if (rest_.empty() || rest_.front() != '"') {
    const std::size_t end = std::min(rest_.find_first_of(",\n"), rest_.size());
    std::string plain(rest_.substr(0, end));
    rest_.remove_prefix(end);
    return plain;
  }
  rest_.remove_prefix(1);
  std::string text;
  while (!rest_.empty()) {
    const char c = rest_.front();
    rest_.remove_prefix(1);
    if (c != '"') {
      text += c;
    } else if (!rest_.empty() && rest_.front() == '"') {
      text += '"';
      rest_.remove_prefix(1);
    } else {
      break;
    }
  }
  return text;
}

} // namespace chronodrome::results
