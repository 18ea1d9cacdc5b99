// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <span>
#include <vector>

#include "activation/candidate.h"

namespace chronodrome::activation {

/// Correlation of a beat's shape with the mean shape of up to eight beats to either side, -1 to 1; 1 where
/// there are fewer than four of them. Requires: i < beats.size().
double shape_match(const std::vector<Candidate>& beats, std::size_t i);

/// Median of `matches` (one a beat, as by shape_match) over up to eight beats to either side of the i-th,
/// that one left out; 1 where there are fewer than four. Requires: i < matches.size().
double usual_match(std::span<const double> matches, std::size_t i);

/// Takes out what is weak in every way: less than half as steep as the local level, less than half of the
/// median peak to peak of the eight beats to either side, and unlike them in shape (correlation below 0.75).
/// Movement and muscle leave such wiggles. An ectopic beat is large or steep, a far field or a beat that
/// loses contact gradually keeps its shape.
void take_out_wiggles(std::vector<Candidate>& beats);

} // namespace chronodrome::activation
