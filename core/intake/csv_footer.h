// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <string_view>

#include "intake/csv_layout.h"

namespace chronodrome::intake {

/// Most bytes of lines below a table, such as "Totals,12".
inline constexpr std::size_t kLargestFooter = 4096;

/// Where the lines below the table begin in `text`, the end of the file: those at its end whose cell in the
/// time column holds words. Its size if there are none, or the table has no time column.
std::size_t footer_of(std::string_view text, const TableLayout& layout);

} // namespace chronodrome::intake
