// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>
#include <string>
#include <vector>

#include "document/session_file.h"
#include "recording/recording.h"
#include "session/label_words.h"

namespace chronodrome::session {

/// How sure a guess is, and why, in words for the user.
struct Guess {
  Confidence confidence = Confidence::unknown;
  std::string reason;
};

/// What one signal is taken for.
struct ChannelProposal {
  document::ChannelEntry entry; ///< role `other` where nothing tells
  Guess role, lead, unit;       ///< `lead` has no reason where a lead has no meaning
};

/// A session guessed from a recording alone. Nothing is invented: what neither label nor unit tells stays
/// open.
struct Proposal {
  document::SessionFile session;         ///< takes every signal; path and name are left to the caller
  std::vector<ChannelProposal> channels; ///< one a signal, in the recording's order
};

/// Roles, leads and units from labels and units; labels that are unique and short; pathways between the roles
/// present; all measures that these allow. Files with their digests; paths as the recording names them.
Proposal propose(const recording::Recording& recording);

/// Pathways between the roles present: sinus to atrial (SA), atrial to his (AH), his to ventricular (HV),
/// atrial to ventricular (AV), from the first channel of a role to each of the other.
std::vector<document::PathwayEntry> propose_pathways(const std::vector<document::ChannelEntry>& channels);

/// Measures that a session's channels and pathways allow, in the order in which the story shows them:
/// rates, delays, conducted shares, velocities (where a distance is stated), force, pressure, flow.
std::vector<std::string> possible_measures(const document::SessionFile& session);
/// Those of them that are proposed: rates of the chambers (of force or pressure only where no chamber is
/// recorded), and everything but velocity.
std::vector<std::string> propose_measures(const document::SessionFile& session);

/// `label`, or `label 2`, `label 3` ... if channels have it already.
std::string unique_label(const std::string& label, const std::vector<document::ChannelEntry>& channels);

} // namespace chronodrome::session
