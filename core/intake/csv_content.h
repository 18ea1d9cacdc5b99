// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>

#include "base/result.h"
#include "intake/csv_layout.h"
#include "intake/csv_merge.h"
#include "intake/csv_reader.h"
#include "intake/csv_text.h"

namespace chronodrome::intake {

/// The recording that the merged rows of a table make: its time axis, its signals with their gaps, its
/// comments, and a warning for everything that was dropped or assumed. Errors: ambiguous (the unit of the
/// times), bad_value (times that follow no rate), not_enough_data (no rows, no rate, no signal).
Result<ReadContent> table_content(const TableLayout& layout, Encoding encoding, TableMerge& merge,
                                  const ReadSettings& settings, const std::string& path);

/// Seconds per unit of the time column. Requires: a time column whose usual step is `step`.
/// Errors: ambiguous, bad_value (no unit agrees with the rate that is set).
Result<double> time_unit(const TableLayout& layout, double step, const ReadSettings& settings,
                         const std::string& path, std::vector<Warning>& warnings);

/// "UTF-8 text; columns divided by semicolons; decimal comma; times from column 'Zeit' in ms".
std::string convention_of(const TableLayout& layout, Encoding encoding, double unit);

} // namespace chronodrome::intake
