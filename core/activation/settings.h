// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>

#include "base/quantity.h"
#include "base/result.h"
#include "conditioning/conditioning.h"

namespace chronodrome::activation {

/// How activations are found. What is left open follows `conditioning.species` (unknown: guinea pig).
struct ActivationSettings {
  conditioning::ConditioningSettings conditioning; ///< holds the species too

  std::optional<Seconds> refractory_atrial;      ///< shortest spacing of two marks; nothing: by species
  std::optional<Seconds> refractory_ventricular; ///< ... ventricular, ECG, His, action potential, mechanical
  double threshold_share = 0.35; ///< of the way from noise to the local beats that a beat must reach;
                                 ///< 0.25 finds more, 0.5 is stricter
  double noise_ratio = 3.4;      ///< ... and this many times the noise at least (white noise reaches 3.0 in
                                 ///< 1 of 20 local maxima, 75 % lie below 2.5)
  double strong_ratio = 4.0;     ///< only deflections above this many times the noise set the local level
  double near_field_share = 0.5; ///< slope over that of the local beats: from here on always an activation
  double far_field_share = 0.3;  ///< below: the other chamber, if its beat is there
  Seconds longest_far_field_lead{5e-3}; ///< a far field may precede the other chamber's mark by this much
  double twitch_share = 0.3;            ///< of the local steepest rises that a twitch or pulse must reach

  /// Errors: bad_usage (a share, ratio or time out of range), and those of the conditioning.
  [[nodiscard]] std::optional<Error> check() const;
};

} // namespace chronodrome::activation
