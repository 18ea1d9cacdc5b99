// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "base/result.h"
#include "intake/csv_cells.h"
#include "intake/recording_reader.h"

namespace chronodrome::intake {

enum class CellKind : std::uint8_t { empty, missing, number, grouped, grouped_fully, clock, text };

/// One record of the head of a table.
struct HeadRecord {
  std::size_t at = 0;   ///< byte in the head
  std::size_t line = 1; ///< first line, from 1
  std::vector<Cell> cells;
  std::vector<CellKind> kinds;
};

/// The head of a table under one dialect.
struct HeadReading {
  Dialect dialect;
  std::vector<HeadRecord> records;
  std::size_t width = 0;      ///< cells that most data records have
  std::size_t first_data = 0; ///< index of the first record that belongs to the data
  std::vector<bool> numeric;  ///< columns that hold numbers or clock times
  std::size_t numbers = 0;    ///< cells that are numbers or clock times, in records of that width
  std::size_t cells = 0;      ///< cells that hold anything, from the first data record on
  std::size_t grouped = 0;    ///< numbers with a thousands mark that might be a decimal mark
  std::size_t marked = 0;     ///< numbers with a decimal or a thousands mark
  bool valid = false;

  [[nodiscard]] double share() const {
    return cells == 0 ? 0.0 : static_cast<double>(numbers) / static_cast<double>(cells);
  }
};

/// Delimiter and decimal mark, found together: the pair under which most cells are numbers in columns of
/// constant count. Where two pairs give different numbers equally well, that is an error which says what to
/// set. `head`: the beginning of the table, or all of it (`final`). Errors: ambiguous, wrong_format (no
/// table), damaged (a quote that does not close), not_enough_data.
Result<HeadReading> find_dialect(std::string_view head, bool final, const std::string& path,
                                 const ReadSettings& settings);

} // namespace chronodrome::intake
