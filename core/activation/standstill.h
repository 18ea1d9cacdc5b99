// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <span>
#include <vector>

#include "activation/far_field.h"

namespace chronodrome::activation {

/// What ties a deflection to a beat of the other chamber.
struct Lock {
  double distance_s = 0.0; ///< behind that beat
  double sharpness = 0.0;  ///< of that beat, see sharpness_of
};

/// What a deflection is where its chamber seems to stand still.
enum class StandstillVerdict : char {
  none,     ///< no standstill here
  far,      ///< the other chamber's wave
  undecided ///< looks like it, but there are no other beats to compare with
};

/// Slope that tells near from far over peak to peak, 1/s; 0 without amplitude.
double sharpness_of(const Candidate& candidate, const CandidateTrain& train);

/// Finds the deflections that are all an electrode shows while its own chamber stands still: within +-10 s
/// at least three lie at one distance behind the other chamber's beats and few elsewhere (own beats in
/// between, twice as steep, do not count). They are far field if
///  - they are blunt beside the other chamber's beats: nine of ten at one distance within 2 ms, median
///    sharpness below 0.65 of that of those, or
///  - they are weak beside the chamber's own beats, the nearest nine before (after, if there are none
///    before) that reach near_field_share of their surroundings and are twice as steep as such waves within
///    10 s: two of three at one distance within 8 ms (noise may be among what is left), blunter than the
///    other chamber's beats, and their median slope below near_field_share of that of the own beats or their
///    sharpness below 0.65 of it. From 15 ms behind the other chamber on, where retrograde atrial beats
///    begin, both must hold: a beat that loses amplitude keeps its sharpness.
/// `locks` and `relative` (slope over that of the surroundings): one a candidate, as the verdicts. The
/// memory for own beats is the one thing in this room that reaches farther than 30 s.
std::vector<StandstillVerdict> judge_standstill(const CandidateTrain& train,
                                                std::span<const std::optional<Lock>> locks,
                                                std::span<const double> relative, double near_field_share);

} // namespace chronodrome::activation
