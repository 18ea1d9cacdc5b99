// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>

#include "session/session_result.h"
#include "ui/report/content.h"

namespace chronodrome::ui::report {

/// The whole report. Requires: `result` outlives the content (figures are painted from it).
Content contentOf(const session::SessionResult& result, const std::string& version);

// Its sections, in the order of the report.
void addIdentity(Content& content, const session::SessionResult& result);
void addMainResult(Content& content, const session::SessionResult& result);
void addProtocol(Content& content, const session::SessionResult& result);
void addStory(Content& content, const session::SessionResult& result);
void addTypicalBeats(Content& content, const session::SessionResult& result);
void addResponses(Content& content, const session::SessionResult& result);
void addCurves(Content& content, const session::SessionResult& result);
void addFlags(Content& content, const session::SessionResult& result);
void addRhythm(Content& content, const session::SessionResult& result);
void addEdits(Content& content, const session::SessionResult& result);
void addQuality(Content& content, const session::SessionResult& result);
void addWarnings(Content& content, const session::SessionResult& result);
void addSettings(Content& content, const session::SessionResult& result);
void addDefinitions(Content& content, const session::SessionResult& result);
void addProvenance(Content& content, const session::SessionResult& result, const std::string& version);
void addCautions(Content& content);

} // namespace chronodrome::ui::report
