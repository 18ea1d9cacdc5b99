// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <span>
#include <string>
#include <string_view>

#include "results/output_folder.h"

namespace chronodrome::results {

enum class ColumnKind {
  text,   ///< words: never read as a number, whatever they look like
  count,  ///< whole numbers
  number, ///< all others
};

/// What one column of one table file holds.
struct ColumnMeaning {
  std::string_view file; ///< as in the results folder; `workbook.xlsx` for a sheet that is no file
  std::string_view column;
  ColumnKind kind = ColumnKind::text;
  std::string_view unit; ///< empty: none; where it differs from row to row, in words
  std::string_view meaning;
  std::string_view values; ///< allowed words, range, or when a cell is empty
};

/// The one table of all columns: by file, columns in the order of the file.
std::span<const ColumnMeaning> column_meanings();

/// The row of a file's column, or null.
const ColumnMeaning* meaning_of(std::string_view file, std::string_view column);

/// `dictionary.csv`: one row a column of each table among `files`, of the sheet of fits, and of itself.
std::string dictionary_csv(std::span<const OutputFile> files);

} // namespace chronodrome::results
