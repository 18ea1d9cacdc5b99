// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <array>
#include <cstddef>
#include <cstdint>
#include <vector>

#include "base/quantity.h"

namespace chronodrome::activation {

/// A deflection as 24 points about its centre, without its mean, largest value 127.
using Shape = std::array<std::int8_t, 24>;

/// A deflection that may be an activation, with all that later decisions need, so that no sample is read
/// twice.
struct Candidate {
  std::size_t run = 0;
  std::size_t peak = 0;        ///< sample of the detection function's local maximum
  Seconds time;                ///< of the centre, with skew
  double centre_at = 0.0;      ///< sample position of the centroid of the squared slope over the deflection;
                               ///< never jumps between flanks of equal steepness
  double fall_at = 0.0;        ///< sample position of the steepest negative slope
  double rise_at = 0.0;        ///< ... of the steepest positive slope
  double top_at = 0.0;         ///< ... of the largest positive lobe
  double bottom_at = 0.0;      ///< ... of the largest negative lobe
  float height = 0.0F;         ///< of the detection function, units/s
  float noise = 0.0F;          ///< its median over +-2 s
  float slow_noise = 0.0F;     ///< ... over +-5 s
  float fall = 0.0F;           ///< steepest negative slope, as a positive number, units/s
  float rise = 0.0F;           ///< steepest positive slope
  float top = 0.0F;            ///< lobe above the local baseline
  float bottom = 0.0F;         ///< lobe below it, as a positive number
  float amplitude = 0.0F;      ///< peak to peak
  float slope_energy = 0.0F;   ///< sum of squared slopes over the deflection, (units/s)^2
  float baseline_shift = 0.0F; ///< lasting difference of level, see lasting_shift in deflection.cpp
  float level = 0.0F;          ///< what the local threshold compared with: S of the acceptance rule
  bool is_clipped = false;
  bool is_double = false; ///< two steep parts of about equal height more than 3 ms apart
  Shape shape{};
};

} // namespace chronodrome::activation
