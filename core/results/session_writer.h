// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>

#include "base/result.h"
#include "document/session_file.h"

namespace chronodrome::results {

/// The session as the text of its file (`resources/formats/session.md`): keys in the order of the format
/// page, one line for every channel, pathway, correction and window, numbers in the shortest form that reads
/// back to the same double. Keys that the program does not know are taken over from `as_read` and stand last
/// in their object; entries of lists are recognised by label, path or seq, a renamed one by its place in the
/// list. Reading the text back gives the same session, and writing that the same text.
std::string session_text(const document::SessionFile& session);

/// Writes the file as a whole or not at all: a temporary file beside it takes its name. If `path` is a
/// symbolic link, the file that it leads to is replaced, not the link. Errors: unsupported_version (a session
/// of a newer program is never saved), cannot_write.
Done write_session(const document::SessionFile& session, const std::string& path);

} // namespace chronodrome::results
