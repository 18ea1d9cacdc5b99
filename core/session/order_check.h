// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>
#include <string>
#include <utility>
#include <vector>

#include "document/session_file.h"
#include "recording/recording.h"

namespace chronodrome::session {

/// Roles that the beats themselves speak for, in words and as a change that can be made in one step.
struct RoleDoubt {
  std::string text; ///< what was seen, with numbers, and what it would mean
  std::vector<std::pair<std::string, std::string>> roles; ///< label of a channel, the role it would have
};

/// Looks at the order of activation in the first minute. In a beating heart the ventricle follows the atrium
/// after a delay that is the smaller part of a cycle: where a channel called ventricular leads every beat of
/// one called atrial by less than half of what it lags behind, the two may be swapped. Two electrograms
/// without a role that follow each other beat by beat get the same proposal. Nothing is changed. A channel
/// that cannot be read is passed over. Fails: with retrograde conduction from a ventricular pacemaker the
/// order is truly reversed; the text says so.
std::vector<RoleDoubt> check_order(const document::SessionFile& session,
                                   const std::shared_ptr<const recording::Recording>& recording);

} // namespace chronodrome::session
