// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <map>
#include <span>
#include <string>

#include "base/result.h"
#include "intake/protocol_table.h"
#include "protocol/protocol.h"

namespace chronodrome::intake {

/// Which cell of a row holds which column of a drug log.
using LogColumns = std::map<std::string, std::size_t>;

/// The names of all columns, as a message lists them.
std::string log_columns();

/// The columns that the header `row` names; warns of unknown ones in `protocol`.
/// Errors: wrong_format (a column twice, no `time_s` or `event`).
Result<LogColumns> read_log_header(const TableRow& row, protocol::Protocol& protocol);

/// The columns of a text without a header: the first six in the order of the format page.
LogColumns usual_log_columns();

/// The mark before the decimals of a log's numbers.
enum class LogDecimal {
  point,
  comma,   ///< some number can be read with a decimal comma only
  doubtful ///< no number has a point, and each comma stands before three digits: 1,250 may be 1250
};

/// What the numbers of the rows tell. Requires: the delimiter is not the comma.
LogDecimal decimal_of(std::span<const TableRow> rows, const LogColumns& columns);

/// Reads the rows of a table of `width` columns into events, and puts them in order.
/// Errors: bad_value; ambiguous (a number with a comma where `decimal` is doubtful).
Done read_log_rows(std::span<const TableRow> rows, const LogColumns& columns, std::size_t width,
                   LogDecimal decimal, protocol::Protocol& protocol);

} // namespace chronodrome::intake
