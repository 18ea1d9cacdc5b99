// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <span>

#include "activation/activation.h"
#include "activation/settings.h"
#include "document/session_file.h"
#include "recording/recording.h"

namespace chronodrome::activation {

/// A correction finds the mark nearest to its time, no farther than this.
constexpr Seconds kCorrectionReach{5e-3};

/// Applies the corrections `add`, `remove` and `move` that name this channel, in order of `seq`, to its
/// marks. An added mark stands at the user's time, a moved one at the new time; their origin says so, their
/// confidence is 1 (a person vouches for them) and their peak to peak is measured there. On tension and
/// pressure the beat is measured about the new time. Marks stay strictly increasing.
/// A correction without a mark within 5 ms, outside the signal, without the times it needs, or that would put
/// two marks within 5 ms of each other is left out with a warning in `activations.warnings`: it is never
/// applied to another beat. Other kinds of correction are left to the stages they concern.
void apply_corrections(ChannelActivations& activations, std::span<const document::Correction> corrections,
                       const recording::Channel& channel, const ActivationSettings& settings);

} // namespace chronodrome::activation
