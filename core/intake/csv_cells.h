// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace chronodrome::intake {

/// How cells and numbers are told apart.
struct Dialect {
  char delimiter = ','; ///< ' ': any number of blanks and tabs
  char decimal = '.';
  bool grouped = false; ///< thousands marks occur, and there is no other way to read them
};

/// A cell as it lies in the text, without outer blanks and outer quotes.
struct Cell {
  std::string_view text;
  bool quoted = false;
};

enum class RecordEnd {
  complete,   ///< ended by a line end, or by the end of the text where that is the end of the file
  incomplete, ///< the text ends inside the record
  open_quote, ///< the text ends inside a quoted cell
};

struct RecordRead {
  RecordEnd end = RecordEnd::complete;
  std::size_t next = 0;   ///< where the next record begins
  std::size_t lines = 0;  ///< line ends passed
  bool terminated = true; ///< false: the file ended without a line end
};

/// Cells of the record at `text`[at]. Line ends LF, CRLF and CR all count; inside quotes neither they nor the
/// delimiter do. `final`: the text ends where the file ends.
RecordRead read_record(std::string_view text, std::size_t at, char delimiter, bool final,
                       std::vector<Cell>& cells);

/// The cell's text as UTF-8, doubled quotes made single, line ends made blanks.
std::string text_of(const Cell& cell);

/// True for an empty cell and for the words that stand for a missing value (NaN, NA, -, ---, OVER, #N/A ...),
/// infinities and values beyond what a float can hold.
bool is_missing(std::string_view cell);

enum class NumberForm {
  none,
  plain,         ///< digits and at most one decimal mark
  grouped,       ///< with thousands marks only: 1,234
  grouped_fully, ///< with thousands marks and a decimal mark: 1,234.5
};
struct NumberRead {
  NumberForm form = NumberForm::none;
  double value = 0.0;
};

/// A number with `decimal` as its decimal mark; thousands marks are the other mark, a blank (also a no-break
/// one) or an apostrophe, in groups of exactly three digits behind a first group of one to three that does
/// not begin with zero.
NumberRead read_number(std::string_view cell, char decimal);

/// Digits behind the decimal mark of a plain number without exponent.
std::optional<int> decimals_of(std::string_view cell, char decimal);

} // namespace chronodrome::intake
