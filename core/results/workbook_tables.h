// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>
#include <vector>

#include "results/sheet_writer.h"
#include "session/session_result.h"

namespace chronodrome::results {

/// The sheet `fits` as the text of a table: one row a parameter or derived number of each fit.
std::string fits_table(const session::SessionResult& result);

/// The rows of the sheet `summary`: section, item, value, note.
std::vector<std::vector<SheetCell>> summary_rows(const session::SessionResult& result,
                                                 const std::string& program_version);

} // namespace chronodrome::results
