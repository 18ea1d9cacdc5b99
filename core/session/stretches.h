// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <memory>
#include <string>
#include <vector>

#include "conditioning/conditioning.h"
#include "recording/recording.h"
#include "session/session_result.h"

namespace chronodrome::session {

/// A window from which responses of one step were read. Measures that share a window share an entry.
struct PlateauWindow {
  recording::Span span;
  int curve = 0;
  std::string agent;
  Molar concentration;
  std::vector<std::string> measures;
};

/// Every window of the responses, by start, then by end.
std::vector<PlateauWindow> plateau_windows(const SessionResult& result);

/// A result that holds nothing but the signals of a recording, each a channel without a role, with its gaps:
/// what there is to see before an analysis.
SessionResult unanalysed(const std::shared_ptr<const recording::Recording>& recording);

/// The settings of conditioning as an analysis of these channels uses them: with the pulses of their stimulus
/// channels blanked. Reads every stimulus channel once.
conditioning::ConditioningSettings with_stimuli_blanked(const std::vector<recording::Channel>& channels,
                                                        const conditioning::ConditioningSettings& settings);

} // namespace chronodrome::session
