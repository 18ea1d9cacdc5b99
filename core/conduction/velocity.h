// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <span>

#include "base/quantity.h"
#include "base/result.h"

namespace chronodrome::conduction {

/// Apparent conduction velocity along a straight line: the true velocity if the wave runs along it, otherwise
/// faster (by 1 / cos of the angle between), never slower.
struct ApparentVelocity {
  MetresPerSecond velocity;
  std::optional<MetresPerSecond> low, high; ///< 95 %; nothing: the data set no bound on that side
  bool is_resolved = true; ///< false: the delay cannot be told from zero; only `low` means something
};

/// Velocity over a known distance from a mean delay and the half width of its 95 % interval. The interval is
/// that of the delay, turned over: distance / (delay + half) to distance / (delay - half).
/// Errors: bad_usage (distance not above 0), not_enough_data (delay 0).
Result<ApparentVelocity> velocity_between(Metres distance, Seconds delay, Seconds half_width);

/// A regression of time on distance along a line of electrodes.
struct LineFit {
  double slowness = 0.0; ///< s/m
  double slowness_se = 0.0;
  Seconds intercept;
  Seconds residual_sd;
  double r_squared = 0.0;
  ApparentVelocity velocity;
  MetresPerSecond velocity_se;     ///< by propagation of slowness_se
  MetresPerSecond robust_velocity; ///< from the median of all pairwise slopes (Theil-Sen)
};

/// Positions along the line and activation times of one beat, or means over beats. Time is regressed on
/// distance, for the error is in the time; regressing distance on time, or averaging velocities of pairs, is
/// biased.
/// Errors: bad_usage (sizes differ), not_enough_data (fewer than three electrodes, all at one
/// place, no trend of time along the line).
Result<LineFit> fit_line(std::span<const double> positions_m, std::span<const double> times_s);

} // namespace chronodrome::conduction
