// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <array>
#include <cstddef>
#include <map>
#include <string>
#include <string_view>
#include <variant>
#include <vector>

#include <xlsxwriter.h>

#include "base/result.h"
#include "results/plain_locale.h"

namespace chronodrome::results {

/// How a column's numbers are shown; the cell holds all digits.
enum class NumberShow { general, whole, seconds, milliseconds, rate, share, concentration };

struct SheetColumn {
  std::string head;
  NumberShow show = NumberShow::general;
};

/// Nothing, a number, or a text that is never a formula.
using SheetCell = std::variant<std::monostate, double, std::string>;

/// A workbook being made, written to memory. Rows go to the library's temporary files as they come, so a long
/// recording needs no memory for its cells.
class BookWriter {
public:
  explicit BookWriter(std::size_t sheet_rows);
  ~BookWriter();
  BookWriter(const BookWriter&) = delete;
  BookWriter& operator=(const BookWriter&) = delete;

  void describe(const std::string& title, const std::string& program);
  /// Begins a sheet; the rows that follow belong to it. Requires: at most 25 bytes of name.
  void open_sheet(const std::string& name, std::vector<SheetColumn> columns);
  void row(const std::vector<SheetCell>& cells);
  /// The bytes of the workbook. Errors: cannot_write.
  Result<std::string> take();

private:
  void begin_part();
  void end_part();
  void note_fault();
  void write_text(lxw_col_t column, const std::string& text);

  PlainLocale locale_; // the library prints numbers by the thread's locale
  std::size_t sheet_rows_;
  int file_ = -1;
  lxw_workbook* book_ = nullptr;
  lxw_worksheet* sheet_ = nullptr;
  lxw_format* head_ = nullptr;
  std::map<NumberShow, lxw_format*> shows_;
  std::string name_;
  std::vector<SheetColumn> columns_;
  std::vector<std::size_t> widths_; ///< longest text of each column so far, in characters
  std::size_t part_ = 0;            ///< 1 for the first sheet of a table
  lxw_row_t next_ = 0;
  bool failed_ = false;
};

} // namespace chronodrome::results
