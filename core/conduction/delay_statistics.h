// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <span>

#include "base/quantity.h"

namespace chronodrome::conduction {

/// Delays of consecutive conducted beats in one window.
struct DelayStatistics {
  std::size_t n = 0;
  double n_independent = 0.0; ///< n (1 - r) / (1 + r), r the lag-1 autocorrelation held between 0 and 0.95
  Seconds mean, median;
  Seconds sd;     ///< n - 1; 0 for one beat
  Seconds mad_sd; ///< 1.4826 times the median absolute deviation
  Seconds shortest, longest;
  Seconds sem;        ///< of the mean, corrected for the correlation of consecutive beats
  Seconds half_width; ///< of the 95 % interval of the mean, Student's t with n_independent - 1 degrees of
                      ///< freedom; 0 (no interval) where n_independent is not above 1.5, for below half a
                      ///< degree of freedom the quantile says nothing but that there is no interval
};

/// Statistics of `delays` (seconds, in order of time). All zero for none. The beats of one preparation are no
/// independent experiments: between preparations use one value each.
DelayStatistics statistics_of(std::span<const double> delays);

} // namespace chronodrome::conduction
