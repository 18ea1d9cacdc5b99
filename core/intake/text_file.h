// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <string>
#include <string_view>

#include "base/result.h"

namespace chronodrome::intake {

/// All bytes of a regular file that holds at most `limit` bytes.
/// Errors: file_missing, wrong_format (a folder or a device), over_limit, read_failed.
Result<std::string> read_text_file(const std::string& path, std::size_t limit);

/// Without the UTF-8 byte order mark that some editors put in front.
std::string_view without_byte_order_mark(std::string_view text);

/// Offset of the first byte that is not UTF-8 (overlong forms and surrogates included), or npos.
std::size_t first_not_utf8(std::string_view text);

/// A cell or value as a message shows it: in quotes, cut after 40 bytes, control characters as blanks.
std::string shown(std::string_view text);

} // namespace chronodrome::intake
