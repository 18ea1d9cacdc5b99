// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <vector>

#include "base/quantity.h"
#include "conditioning/conditioning.h"
#include "recording/recording.h"

namespace chronodrome::activation {

/// One stimulus on a stimulus channel.
struct Stimulus {
  Seconds time;  ///< first sample beyond half of the pulse, with skew
  Seconds width; ///< until the signal is back below half
};

/// Pulses of a stimulus channel, of either sign: excursions from the local level (median within 10 s) beyond
/// half of the largest one within 10 s, which must exceed 20 robust SD of the local noise. Pulses longer than
/// 0.2 s are no stimuli. In order of time, at least 2 ms apart (a biphasic pulse is one stimulus).
/// `proceed` is asked every few seconds of signal, with 0 samples; where it says no, what is found is not
/// all.
std::vector<Stimulus> find_stimuli(const recording::Channel& channel,
                                   const conditioning::Proceed& proceed = {});

/// What each stimulus covers on the other channels: from 1 ms before it to 2 ms after its end, 8 ms at most.
std::vector<recording::Span> blanked_by(const std::vector<Stimulus>& stimuli);

} // namespace chronodrome::activation
