// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "intake/csv_dialect.h"

namespace chronodrome::intake {

/// The rows above the data, told apart.
struct Headings {
  std::optional<std::size_t> names_record; ///< index into the head's records
  std::optional<std::size_t> units_record;
  std::vector<std::string> names; ///< one a cell of the row; empty: no row of names
  std::vector<std::string> units;
  std::vector<std::string> notes; ///< the other lines, as they stand
};

/// Names: the row above the units, or the last row above the data that holds as many texts as there are
/// columns of numbers. Units: a row of nothing but units.
Headings find_headings(const HeadReading& reading, std::string_view head);

/// Hertz that a header line states behind a word for rate: "Sampling rate: 1000 Hz", "fs = 2 kHz".
std::optional<double> rate_in(const std::vector<std::string>& notes);

} // namespace chronodrome::intake
