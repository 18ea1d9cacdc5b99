// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>
#include <string_view>
#include <vector>

#include "base/quantity.h"
#include "base/result.h"

namespace chronodrome::intake {

/// A response that was measured elsewhere.
struct TablePoint {
  Molar concentration; ///< 0: control
  double response = 0.0;
  double weight = 1.0; ///< relative 1/variance, > 0
};

/// Rows that share preparation, curve and antagonist concentration.
struct TableCurve {
  std::string preparation; ///< empty without that column
  int curve = 1;
  Molar antagonist{0.0};
  std::vector<TablePoint> points; ///< in the order of the file
  std::size_t dropped = 0;        ///< rows without a response
};

struct ResponseTable {
  std::vector<TableCurve> curves; ///< in the order in which they first appear
  std::size_t dropped = 0;        ///< over all curves
  bool has_weights = false;
  bool has_antagonist = false;
  std::vector<Warning> warnings;
};

/// Concentration-response rows for the command `fit`: comma-separated UTF-8 with a header row that names
/// `concentration_mol_per_l,response` and optionally `weight,curve,antagonist_mol_per_l,preparation` in any
/// order (case does not count), point as decimal mark, cells quoted where they must be (RFC 4180), line ends
/// LF, CRLF or CR, with or without a byte order mark. Blank lines are passed over.
/// Empty optional cells mean weight 1, curve 1, antagonist 0, no preparation. A row whose response is empty,
/// NaN or NA is dropped, counted and warned of; so are columns of other names and concentrations above
/// 0.1 mol/L, where the unit is in doubt. A curve all of whose rows were dropped is kept, without points.
/// Errors (with file, line and column): file_missing, read_failed, wrong_format (no such header, not text),
/// over_limit (64 MiB), bad_value (not a number, a negative concentration, a weight that is not above 0, a
/// curve that is no whole number, too many or too few cells), damaged (an open quote), not_enough_data (no
/// rows).
Result<ResponseTable> read_response_table(const std::string& path);

/// The same from text; `name` stands in messages.
Result<ResponseTable> parse_response_table(std::string_view text, const std::string& name);

} // namespace chronodrome::intake
