// Chronodrome, GPL-3.0-or-later.
#include "results/dictionary.h"

#include <algorithm>

#include "results/csv_text.h"

namespace chronodrome::results {

const ColumnMeaning* meaning_of(std::string_view file, std::string_view column) {
  const auto rows = column_meanings();
  const auto at = std::find_if(rows.begin(), rows.end(), [&](const ColumnMeaning& row) {
    return row.file == file && row.column == column;
  });
  return at == rows.end() ? nullptr : &*at;
}

std::string dictionary_csv(std::span<const OutputFile> files) {
  CsvTable table("file,column,meaning,unit,values");
  for (const auto& row : column_meanings()) {
    const bool always = row.file == "dictionary.csv" || row.file == "workbook.xlsx";
    const bool there = always || std::any_of(files.begin(), files.end(),
                                             [&](const OutputFile& file) { return file.name == row.file; });
    if (!there) continue;
    table.text(row.file).text(row.column).text(row.meaning).text(row.unit).text(row.values).end_row();
  }
  return table.take();
}

} // namespace chronodrome::results
