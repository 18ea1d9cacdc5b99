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

} // namespace chronodrome::intake
