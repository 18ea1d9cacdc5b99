// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <array>
#include <cstddef>
#include <optional>
#include <span>
#include <vector>

#include "base/quantity.h"

namespace chronodrome::conditioning {

/// Samples first ... end - 1.
struct SampleRange {
  std::size_t first = 0;
  std::size_t end = 0;
};

/// Smallest non-zero difference of neighbours: the step of the converter. 0 for a constant.
double smallest_step(std::span<const double> samples);

/// Runs in which the converter clipped.
/// `rails`: values at which it clips, where the file states them: two or more samples within one `step` of a
/// rail. Without rails: runs of three or more equal samples at the extreme of the 5 s to either side, entered
/// or left by a jump of three steps or more, at least two such runs at the same value. (A rounded peak of a
/// coarsely quantised signal is reached by single steps and is no clipping.)
std::vector<SampleRange> find_clipping(std::span<const double> samples, Hertz rate, double step,
                                       const std::optional<std::array<double, 2>>& rails);

/// Stretches of 200 ms and more in which the signal moves by no more than two steps.
std::vector<SampleRange> find_still_stretches(std::span<const double> samples, Hertz rate, double step);

/// Range that the signal covers in its quietest stretches of 50 ms (lower tenth): what noise alone does.
/// 0 for fewer than four stretches.
double quiet_range(std::span<const double> samples, Hertz rate);

/// Ranges in order, overlapping and touching ones joined.
std::vector<SampleRange> joined(std::vector<SampleRange> ranges);

} // namespace chronodrome::conditioning
