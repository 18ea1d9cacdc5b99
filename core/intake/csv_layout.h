// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "base/result.h"
#include "intake/clock_time.h"
#include "intake/csv_cells.h"
#include "intake/csv_clock.h"
#include "intake/csv_column_kinds.h"
#include "intake/csv_dialect.h"
#include "intake/recording_reader.h"

namespace chronodrome::intake {

struct TableColumn {
  std::string source;            ///< without a bracketed unit
  std::string source_as_written; ///< with it
  std::string unit;              ///< as normalised; empty: none stated
  ColumnKind kind = ColumnKind::number;
};

/// What the head of a table says about the whole.
struct TableLayout {
  Dialect dialect;
  std::vector<TableColumn> columns;
  std::optional<std::size_t> time_column;
  bool time_column_told = false;       ///< by the settings or by its name
  std::optional<double> time_unit;     ///< seconds per unit of the time column; nothing: not stated
  std::optional<int> time_decimals;    ///< most digits behind the decimal mark in the head
  std::optional<ClockTime> clock_zero; ///< date and time of the first row, where they are sure
  bool clock_has_hours = true;
  bool clock_has_days = false; ///< each cell of the time column holds its date
  DateOrder date_order = DateOrder::none;
  std::size_t data_at = 0;                            ///< byte of the first data row in the head
  std::size_t data_line = 1;                          ///< its line
  std::vector<std::string> notes;                     ///< lines that are not data
  std::vector<std::vector<std::string>> heading_rows; ///< names, units: dropped where they are repeated
  std::optional<double> stated_rate; ///< Hz, from a header line such as "Sampling rate: 1000 Hz"
  std::optional<int> last_decimals;  ///< digits behind the mark that all cells of the last column have
  std::vector<Warning> warnings;
};

/// Errors: bad_usage (no column of the name that the settings give), wrong_format (more columns of numbers
/// than names), over_limit.
Result<TableLayout> find_layout(const HeadReading& reading, std::string_view head, const std::string& path,
                                const ReadSettings& settings);

} // namespace chronodrome::intake
