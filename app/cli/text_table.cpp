// Chronodrome, GPL-3.0-or-later.
#include "text_table.h"

#include <algorithm>

namespace chronodrome::cli {
namespace {

std::size_t width_of(const std::string& text) {
  return static_cast<std::size_t>(std::count_if(
      text.begin(), text.end(), [](char c) { return (static_cast<unsigned char>(c) & 0xc0U) != 0x80; }));
}

} // namespace

std::string TextTable::text(const std::string& indent) const {
  std::vector<std::size_t> widths;
  for (const auto& row : rows_) {
    widths.resize(std::max(widths.size(), row.size()));
    for (std::size_t i = 0; i < row.size(); ++i)
      widths[i] = std::max(widths[i], width_of(row[i]));
  }
  std::string all;
  for (const auto& row : rows_) {
    std::string line = indent;
    for (std::size_t i = 0; i < row.size(); ++i) {
      const std::string padding(widths[i] - width_of(row[i]), ' ');
      line += i == 0 ? row[i] + padding : "  " + padding + row[i];
    }
    while (!line.empty() && line.back() == ' ')
      line.pop_back();
    all += line + '\n';
  }
  return all;
}

} // namespace chronodrome::cli
