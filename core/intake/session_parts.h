// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>

#include "document/session_file.h"
#include "intake/json_fields.h"

namespace chronodrome::intake {

/// Parts of a session file; each writes what it reads into `session` and what is wrong into `notes`.
void read_channels(JsonObject& root, document::SessionFile& session, JsonNotes& notes);
void read_pathways(JsonObject& root, document::SessionFile& session, JsonNotes& notes);
/// Requires: channels and pathways have been read.
void read_measures(JsonObject& root, document::SessionFile& session, JsonNotes& notes);
void read_review(JsonObject& root, document::SessionFile& session, JsonNotes& notes);
void read_windows(JsonObject& root, document::SessionFile& session, JsonNotes& notes);

/// `when` of a correction or a window: date and time of day, with or without `Z` or `+01:00`; may be empty.
std::string read_moment(JsonObject& fields);

/// Why `path` may not stand in a session, or nothing.
std::optional<std::string> fault_of_path(const std::string& path);

} // namespace chronodrome::intake
