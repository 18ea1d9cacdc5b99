// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <vector>

#include "activation/candidate.h"
#include "activation/settings.h"
#include "base/quantity.h"

namespace chronodrome::activation {

/// The candidates that are beats, by the local threshold: with N the median of the detection function and S
/// the median height of the strong candidates within +-2 s (+-5 s where beats are slow: fewer than five
/// strong ones within 2 s, or `is_slow`), a candidate is a beat if it exceeds both N + share * (S - N) and
/// noise_ratio * N. Strong is what exceeds strong_ratio * N and a fifth of the second largest in the window,
/// so that neither noise nor the slow waves of a quiet recording pull S down. Without a strong candidate
/// there is no beat, however low the noise: the threshold is never lowered. A strong candidate that stands
/// alone within 5 s must exceed 5 N.
/// `level` of each returned candidate is S. Source: rule and constants from simulated trains (white noise:
/// candidate heights 2.4 to 2.5 N at the upper quartile).
std::vector<Candidate> accept_beats(const std::vector<Candidate>& candidates, Hertz rate, bool is_slow,
                                    const ActivationSettings& settings);

/// Takes out steps of the baseline that look like beats (an electrode that moves or polarises): the level
/// behind it differs from that before, and lastingly so, by more than 0.6 of the deflection and by more than
/// 8 robust SD of what the beats within +-10 s do. Returns the times of the steps.
std::vector<Seconds> take_out_steps(std::vector<Candidate>& candidates, Hertz rate);

} // namespace chronodrome::activation
