// Chronodrome, GPL-3.0-or-later.
#include "intake/table_head.h"

#include <algorithm>

#include "intake/csv_dialect.h"
#include "intake/csv_layout.h"
#include "intake/csv_text.h"

namespace chronodrome::intake {
namespace {

constexpr std::size_t kHeadBytes = std::size_t{1} << 20U;
constexpr std::size_t kLongestLine = 200;

/// EDF headers are text too, but begin with a version of eight bytes and have no line ends.
bool looks_like_edf(const std::string& text) {
  return text.size() >= 256 && text[0] == '0' && text.find_first_of("\r\n") > 255;
}

std::vector<std::string> first_lines(const std::string& text, std::size_t most) {
  std::vector<std::string> lines;
  std::size_t at = 0;
  while (at < text.size() && lines.size() < most) {
    std::size_t end = text.find_first_of("\r\n", at);
    if (end == std::string::npos) end = text.size();
    lines.push_back(shortened(as_utf8(std::string_view(text).substr(at, end - at)), kLongestLine));
    const bool pair = end + 1 < text.size() && text[end] == '\r' && text[end + 1] == '\n';
    at = end + (pair ? 2 : 1);
  }
  return lines;
}

void describe(const TableLayout& layout, TableHead& head) {
  head.stated_rate = layout.stated_rate;
  head.data_line = layout.data_line;
  if (layout.time_column) head.time_column = layout.columns[*layout.time_column].source_as_written;
  for (const auto& column : layout.columns) {
    if (column.kind != ColumnKind::text && !column.source_as_written.empty())
      head.columns.push_back(column.source_as_written);
  }
}

} // namespace

Result<TableHead> head_of(const ByteSource& source, const ReadSettings& settings, std::size_t lines) {
  TableHead head;
  TextBlocks blocks(source);
  const auto encoding = blocks.find_encoding();
  if (!encoding) return encoding.error();
  std::string text;
  if (const auto added = blocks.add_to(text, kHeadBytes); !added) return added.error();
  if (looks_like_edf(text) || !not_text(text).empty()) return head;
  head.is_table = true;
  head.encoding = name_of(encoding->encoding);
  head.lines = first_lines(text, lines);
  head.delimiter = settings.delimiter;
  head.decimal = settings.decimal;
  if (settings.check()) return head;
  const auto reading = find_dialect(text, blocks.at_end(), source.path(), settings);
  if (!reading) return head;
  head.delimiter = reading->dialect.delimiter;
  head.decimal = reading->dialect.decimal;
  ReadSettings without_column = settings;
  auto layout = find_layout(*reading, text, source.path(), settings);
  if (!layout) {
    without_column.time_column.reset();
    layout = find_layout(*reading, text, source.path(), without_column);
  }
  if (layout) describe(*layout, head);
  return head;
}

std::vector<std::string> choices_asked(const Error& error) {
  std::vector<std::pair<std::size_t, std::string>> found;
  for (const char* key : {"rate_hz", "delimiter", "decimal", "time_column"}) {
    const auto at = error.remedy.find(std::string("recording.csv.") + key);
    if (at != std::string::npos) found.emplace_back(at, key);
  }
  std::sort(found.begin(), found.end());
  std::vector<std::string> keys;
  for (auto& [at, key] : found)
    keys.push_back(std::move(key));
  return keys;
}

} // namespace chronodrome::intake
