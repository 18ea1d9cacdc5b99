// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <cstdint>
#include <span>

#include "activation/candidate.h"
#include "activation/slope.h"
#include "base/quantity.h"
#include "conditioning/species.h"

namespace chronodrome::activation {

/// Signals of one block about a candidate; all of one size.
struct DeflectionSignals {
  std::span<const double> timing;      ///< least filtered
  std::span<const double> detection;   ///< high-passed
  std::span<const std::uint8_t> flags; ///< conditioning::SampleFlag
};

/// Measures the deflection about sample `peak` and fills all of the candidate but run, time, height and
/// noise. Positions count from the block's first sample. The steepest slopes are sought within
/// `traits.refine_window`, lobes and peak-to-peak within half of `traits.deflection_width` (at least the
/// refine window), each refined by a parabola through three samples.
/// Accuracy: for a front -tanh(t/w) sampled at 1 kHz without noise within 0.036 ms (w = 1 ms) and 0.005 ms
/// (w = 5 ms).
void measure_deflection(const DeflectionSignals& signals, std::size_t peak, Hertz rate,
                        const SlopeFilter& slope, const conditioning::SpeciesTraits& traits,
                        Seconds refractory, Candidate& candidate);

/// Correlation of two shapes, -1 to 1; 0 where one is flat.
double similarity(const Shape& a, const Shape& b);

} // namespace chronodrome::activation
