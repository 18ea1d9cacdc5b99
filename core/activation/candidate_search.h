// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <span>
#include <vector>

#include "activation/slope.h"
#include "base/quantity.h"

namespace chronodrome::activation {

/// A local maximum of the detection function above the noise floor.
struct Peak {
  std::size_t index = 0;
  double height = 0.0;
  double noise = 0.0;      ///< median of the detection function over +-2 s
  double slow_noise = 0.0; ///< ... over +-5 s
};

struct PeakSearch {
  Hertz rate;
  Seconds refractory;       ///< a peak suppresses lower ones nearer than this
  double floor_ratio = 3.4; ///< peaks below this many times the noise are never activations
  double least_noise = 0.0; ///< what the converter's steps alone can do, units/s
};

/// Peaks in samples first ... end - 1 of `strength`, in order: local maxima above floor_ratio times the lower
/// of the two noise levels, the highest ones first, each suppressing its neighbours within the refractory
/// time. The windows reach beyond first and end as far as there are samples.
std::vector<Peak> find_peaks(std::span<const double> strength, std::size_t first, std::size_t end,
                             const PeakSearch& search);

} // namespace chronodrome::activation
