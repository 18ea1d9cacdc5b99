// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <string>

#include "base/result.h"
#include "document/session_file.h"

namespace chronodrome::intake {

/// A session of 200 000 corrections takes about half of this.
inline constexpr std::size_t kLargestSession = std::size_t{64} << 20U;

/// What to do with a session that a newer program wrote.
enum class NewerSession { refuse, open_read_only };

/// Reads a session file (`resources/formats/session.md`).
/// Returns the file's values; an unknown key, a repeated measure and corrections out of order are warnings.
/// Errors, with line and column of the key or value: file_missing, read_failed, over_limit; damaged (not
/// JSON); wrong_format (no session); unsupported_version; bad_value (a value that may not stand there, with
/// what may; a path out of the session's folder, also through a symbolic link).
Result<document::SessionFile> read_session(const std::string& path,
                                           NewerSession newer = NewerSession::refuse);

/// The same from a text that would stand at `path`. Touches no file, so links are not followed. Never throws
/// on any bytes.
Result<document::SessionFile> parse_session(const std::string& text, const std::string& path,
                                            NewerSession newer = NewerSession::refuse);

} // namespace chronodrome::intake
