// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <string>
#include <string_view>
#include <vector>

#include "base/result.h"

namespace chronodrome::intake {

/// A cell and where its text begins (line and column from 1, column in characters).
struct TableCell {
  std::string text; ///< without blanks at either side and without quotes
  std::size_t line = 1;
  std::size_t column = 1;

  [[nodiscard]] Place place() const { return Place::at(line, column); }
};

struct TableRow {
  std::vector<TableCell> cells; ///< never empty
};

/// Splits a small table into rows and cells: cells may be quoted, with quotes doubled inside and line ends
/// within (RFC 4180); lines end with LF, CR LF or CR; a byte order mark is passed over; rows without any text
/// are left out. The delimiter is the one of comma, semicolon and tab that stands most often in the first
/// row. Errors: damaged (a quote that is never closed, text behind a closing quote), wrong_format (bytes that
/// are not UTF-8, a zero byte), with line and column.
Result<std::vector<TableRow>> split_table(std::string_view text, const std::string& file);
/// The same with the delimiter given.
Result<std::vector<TableRow>> split_table(std::string_view text, const std::string& file, char delimiter);

} // namespace chronodrome::intake
