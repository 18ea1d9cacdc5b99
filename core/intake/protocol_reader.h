// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <string>

#include "base/result.h"
#include "protocol/protocol.h"

namespace chronodrome::intake {

inline constexpr std::size_t kLargestProtocol = std::size_t{16} << 20U;

/// Reads a drug log (`resources/formats/protocol.md`). A concentration that is to be computed from stock and
/// volume stays empty here: protocol::follow_bath fills it in.
/// Warnings: columns that are not known, times out of order (sorted), two bath events at one time, and the
/// doubts of protocol::ladder_warnings.
/// Errors, with line and column: file_missing, read_failed, over_limit; wrong_format (no such columns, not
/// UTF-8); damaged (quotes); bad_value (a cell that may not hold what it holds, with what it may hold).
Result<protocol::Protocol> read_protocol(const std::string& path);

/// The same from a text. Never throws on any bytes.
Result<protocol::Protocol> parse_protocol(const std::string& text, const std::string& file);

/// A drug log as it is pasted from a spreadsheet. As parse_protocol(), and: the delimiter is the one of tab,
/// semicolon and comma under which the first row is a header or an event; without a header the columns are
/// time_s, event, agent, concentration, unit and note; between tabs or semicolons numbers may have a decimal
/// comma. `name` stands for the file in messages and in Protocol::file.
/// Errors: as parse_protocol(); ambiguous (1,250 where no other number tells whether it is 1.25 or 1250;
/// decimal points beside decimal commas). Never throws on any bytes.
Result<protocol::Protocol> protocol_from_text(const std::string& text, const std::string& name);

} // namespace chronodrome::intake
