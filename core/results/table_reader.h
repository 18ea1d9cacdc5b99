// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>
#include <string_view>
#include <vector>

namespace chronodrome::results {

/// Reads a table that CsvTable wrote back, row by row: commas, `\n`, quotes as in RFC 4180. The heads are the
/// first row. Requires: `text` outlives the reader.
class TableReader {
public:
  explicit TableReader(std::string_view text) : rest_(text) {}

  /// The cells of the next row without their quotes; false behind the last one.
  bool next(std::vector<std::string>& cells);

private:
  std::string cell();

  std::string_view rest_;
};

} // namespace chronodrome::results
