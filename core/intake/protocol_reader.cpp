// Chronodrome, GPL-3.0-or-later.
#include "intake/protocol_reader.h"

#include <algorithm>
#include <optional>

#include "base/number_text.h"
#include "intake/protocol_rows.h"
#include "intake/protocol_table.h"
#include "intake/text_file.h"

namespace chronodrome::intake {
namespace {

using protocol::Protocol;

Error nothing_there(const std::string& file, const std::string& what, const std::string& remedy) {
  return {ErrorCode::wrong_format, file, Place::at(1, 1), what, remedy + log_columns()};
}

bool is_header(const TableRow& row) {
  return std::any_of(row.cells.begin(), row.cells.end(), [](const TableCell& cell) {
    const std::string name = lower_case(cell.text);
    return name == "time_s" || name == "event";
  });
}

/// A table whose first row is a header, or an event in its place.
bool looks_like_log(const std::vector<TableRow>& rows) {
  if (rows.empty()) return false;
  const TableRow& first = rows.front();
  return is_header(first) || (first.cells.size() > 1 && protocol::event_named(first.cells[1].text));
}

struct PastedTable {
  std::vector<TableRow> rows;
  char delimiter = ',';
};

/// Split where the first row then makes sense: a decimal comma would outvote a single tab or semicolon.
Result<PastedTable> split_pasted(const std::string& text, const std::string& name) {
  for (const char delimiter : {'\t', ';', ','}) {
    auto rows = split_table(text, name, delimiter);
    if (rows && looks_like_log(*rows)) return PastedTable{std::move(*rows), delimiter};
  }
  // None makes sense of it: the first there is gives the message.
  const char delimiter = text.find('\t') != std::string::npos  ? '\t'
                         : text.find(';') != std::string::npos ? ';'
                                                               : ',';
  auto rows = split_table(text, name, delimiter);
  if (!rows) return rows.error();
  return PastedTable{std::move(*rows), delimiter};
}

} // namespace

Result<Protocol> parse_protocol(const std::string& text, const std::string& file) {
  auto rows = split_table(text, file);
  if (!rows) return rows.error();
  if (rows->empty()) return nothing_there(file, "the file is empty", "begin it with the names ");
  Protocol protocol;
  protocol.file = file;
  const auto columns = read_log_header(rows->front(), protocol);
  if (!columns) return columns.error();
  const std::size_t width = rows->front().cells.size();
  const auto events = std::span(*rows).subspan(1);
  if (const Done read = read_log_rows(events, *columns, width, LogDecimal::point, protocol); !read)
    return read.error();
  return protocol;
}

Result<Protocol> protocol_from_text(const std::string& text, const std::string& name) {
  auto table = split_pasted(text, name);
  if (!table) return table.error();
  if (table->rows.empty()) return nothing_there(name, "there is no text", "copy rows with the columns ");
  Protocol protocol;
  protocol.file = name;
  LogColumns columns = usual_log_columns();
  std::size_t width = columns.size();
  std::span<const TableRow> events = table->rows;
  if (is_header(events.front())) {
    auto named = read_log_header(events.front(), protocol);
    if (!named) return named.error();
    columns = std::move(*named);
    width = events.front().cells.size();
    events = events.subspan(1);
  }
  const LogDecimal decimal = table->delimiter == ',' ? LogDecimal::point : decimal_of(events, columns);
  if (const Done read = read_log_rows(events, columns, width, decimal, protocol); !read) return read.error();
  return protocol;
}

Result<Protocol> read_protocol(const std::string& path) {
  auto text = read_text_file(path, kLargestProtocol);
  if (!text) return text.error();
  return parse_protocol(*text, path);
}

} // namespace chronodrome::intake
