// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <span>
#include <string>
#include <vector>

#include "document/session_file.h"
#include "recording/time_base.h"
#include "response/response.h"

namespace chronodrome::session {

/// What the user's corrections `exclude` and `include` leave excluded, in their order: a later `include` of
/// the same channel takes back what it covers. A correction without a channel counts for all.
std::vector<response::Exclusion> exclusions_of(std::span<const document::Correction> review);

/// Stretches that are excluded for a channel, in order.
std::vector<recording::Span> excluded_spans(std::span<const response::Exclusion> exclusions,
                                            const std::string& channel);

} // namespace chronodrome::session
