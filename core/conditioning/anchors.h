// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <cstdint>
#include <span>
#include <vector>

#include "base/quantity.h"

namespace chronodrome::conditioning {

/// Borders at which a signal is divided for local fits, found in the signal itself: the samples with the
/// largest jump within 0.5 s to either side, and equal parts of at most 0.75 s between them. The same stretch
/// of signal is divided alike wherever the file was cut, which no grid counted from the start can do.
/// `samples`: at least 1; `bad`: same size, non-zero samples are never a border of their own; `offset`:
/// position of samples[0] in its run (borders inside 8 s of dead signal fall on multiples of 4 s from there).
/// Returns rising borders from 0 to samples.size(), both included.
std::vector<std::size_t> divide(std::span<const double> samples, std::span<const std::uint8_t> bad,
                                Hertz rate, std::size_t offset);

} // namespace chronodrome::conditioning
