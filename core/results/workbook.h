// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <span>
#include <string>

#include "base/result.h"
#include "results/output_folder.h"
#include "session/session_result.h"

namespace chronodrome::results {

/// Rows that a sheet can hold, its heads included (ECMA-376, as spreadsheets implement it).
inline constexpr std::size_t kSheetRows = 1'048'576;

/// `workbook.xlsx`: the tables among `files` for a spreadsheet, one sheet each, a summary first and the fits
/// as a sheet of their own. Cells are those of the tables: numbers as numbers, texts as texts and never as
/// formulas. A table with more than `sheet_rows` rows goes on in a sheet named so; nothing is cut. The same
/// tables give the same bytes, whatever clock and locale. `program_version` as the build states it.
/// Errors: cannot_write (no room for temporary files).
Result<OutputFile> workbook_file(const session::SessionResult& result, const std::string& program_version,
                                 std::span<const OutputFile> files, std::size_t sheet_rows = kSheetRows);

} // namespace chronodrome::results
