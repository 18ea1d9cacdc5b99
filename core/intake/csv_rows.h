// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "base/result.h"
#include "intake/csv_layout.h"

namespace chronodrome::intake {

/// A text met among the samples.
struct RowText {
  std::size_t row = 0;               ///< of the block; a line of its own: the row that follows
  std::size_t line = 0;              ///< of the block, from 0
  std::optional<std::size_t> column; ///< nothing: a line of its own
  std::optional<double> time;        ///< in the time column of a line of its own
  bool state_unknown = false;        ///< may repeat what the block before ended with
  std::string text;
};

/// Row `row` stands on line `line`; those that follow on the lines that follow.
struct RowLine {
  std::size_t row = 0;
  std::size_t line = 0;
};

/// Rows that have too few or too many cells.
struct UnevenRow {
  std::size_t line = 0;
  std::size_t cells = 0;
};

/// What a stretch of rows says, whatever stands before it: blocks can be read side by side.
struct RowBlock {
  std::size_t rows = 0;
  std::size_t lines = 0; ///< line ends passed
  std::size_t bytes = 0; ///< consumed: up to the end of the last whole record
  std::vector<std::vector<double>>
      columns;                           ///< one a column of the table; NaN: missing. Empty for other kinds
  std::vector<std::size_t> missing;      ///< how many, a column
  std::vector<std::string> missing_word; ///< the first one that is not empty, a column
  std::vector<RowText> texts;
  std::vector<RowLine> row_lines;
  std::vector<UnevenRow> uneven; ///< the first hundred
  std::size_t uneven_rows = 0;
  std::size_t repeated_headings = 0;
  std::optional<std::size_t> dropped_line; ///< last line of the file, cut in the middle
  bool unterminated = false;               ///< the last row has no line end and may be cut in its last digits
  std::vector<std::optional<std::string>> last_text; ///< of each column of comments, at the end of the block
  std::optional<std::size_t> open_quote_line;        ///< a quote that the block does not close
  std::optional<Error> error;                        ///< its line counts from 0 in the block
};

/// Rows of `text`, which begins with a record. `final`: its last record is whole, or the file ends there.
RowBlock read_rows(std::string_view text, const TableLayout& layout, bool final);

/// The lines below a table, each as a text of its own.
RowBlock read_footer(std::string_view text, const TableLayout& layout);

} // namespace chronodrome::intake
