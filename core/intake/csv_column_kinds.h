// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstdint>
#include <string>
#include <vector>

#include "intake/csv_cells.h"
#include "intake/csv_dialect.h"

namespace chronodrome::intake {

enum class ColumnKind : std::uint8_t {
  number,  ///< samples, or times in a unit
  clock,   ///< times of day
  date,    ///< dates beside times of day: not read row by row
  text,    ///< comments
  open,    ///< empty so far: turns out to be comments, samples that begin late, or nothing
  counter, ///< numbers of rows: not a signal
};

/// What a column holds, from the data rows of the head.
ColumnKind kind_of_column(const HeadReading& reading, std::size_t column);
/// Its cells in the data rows of the head, and those of them that are numbers.
std::vector<Cell> cells_of(const HeadReading& reading, std::size_t column);
std::vector<double> values_of(const HeadReading& reading, std::size_t column);

/// Words for time in the languages that exports come in (common practice).
bool is_time_name(const std::string& name);
/// Words for row numbers.
bool is_counter_name(const std::string& name);

/// Rises by the same step all along: nobody's signal does.
bool rises_evenly(const std::vector<double>& values);
bool never_falls(const std::vector<double>& values);
/// Rises by one.
bool counts_rows(const std::vector<double>& values);

} // namespace chronodrome::intake
