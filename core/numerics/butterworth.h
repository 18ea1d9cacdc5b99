// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <array>
#include <cstddef>
#include <span>
#include <vector>

#include "base/quantity.h"
#include "base/result.h"

namespace chronodrome::numerics {

/// One second-order section, a0 = 1: y[n] = b0 x[n] + b1 x[n-1] + b2 x[n-2] - a1 y[n-1] - a2 y[n-2].
/// A first-order section has b2 = a2 = 0.
struct Section {
  double b0 = 1.0, b1 = 0.0, b2 = 0.0, a1 = 0.0, a2 = 0.0;
};

enum class Pass { low, high };

/// Butterworth filter as second-order sections, lowest quality factor first; an odd order begins with a
/// first-order section. Bilinear transform, the cut-off pre-warped: the gain of one pass at `cutoff` is
/// exactly 1/sqrt(2). A band-pass is a high-pass followed by a low-pass (not the low-pass to band-pass
/// transform of the textbooks).
/// Errors: bad_usage (order outside 1 to 16, cut-off not between 0 and half the rate).
/// Source: Butterworth S, Experimental Wireless 1930;7:536; bilinear transform as in the textbooks.
Result<std::vector<Section>> butterworth(Pass pass, int order, Hertz cutoff, Hertz rate);

/// Cut-off to design at so that forward and backward filtering together have gain 1/sqrt(2) at `cutoff`.
/// Requires: 0 < cutoff < rate / 2, order >= 1.
Hertz cutoff_for_two_passes(Pass pass, int order, Hertz cutoff, Hertz rate);

/// Magnitude of one pass through all sections at `frequency`.
double gain_at(std::span<const Section> sections, Hertz frequency, Hertz rate);

/// State (z1, z2 of the transposed direct form II) in which a section answers a constant input of 1 with its
/// constant output at once.
std::array<double, 2> settled_state(const Section& section);

/// Customary padding, 3 * (2 * sections + 1 - first-order sections) samples.
std::size_t customary_padding(std::span<const Section> sections);

/// Samples in which the slowest pole decays over three time constants, at least the customary padding: what
/// lies within so many samples of an edge leans on the extension.
std::size_t settling_samples(std::span<const Section> sections);

/// One pass forward, in place, started in the settled state of the first sample.
void filter_forward(std::span<const Section> sections, std::span<double> samples);

/// Forward and backward, in place: no phase shift, the gain of one pass squared. The ends are extended by odd
/// reflection over settling_samples() (at most one less than there are samples); each pass starts settled.
/// Cost: two passes. Source: common practice for offline filtering.
void filter_zero_phase(std::span<const Section> sections, std::span<double> samples);

} // namespace chronodrome::numerics
