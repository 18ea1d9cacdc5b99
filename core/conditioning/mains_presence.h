// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <complex>
#include <cstddef>
#include <cstdint>
#include <span>
#include <vector>

#include "base/quantity.h"
#include "conditioning/mains.h"

namespace chronodrome::conditioning {

/// One stretch between two borders, as the search for hum sees it.
struct HumProbe {
  std::size_t first = 0;
  std::size_t end = 0;
  std::complex<double> line; ///< at the nominal frequency, phase counted from sample 0 of the whole signal
  double line_power = 0.0;   ///< of the unmasked differences, at the nominal frequency
  double side_power = 0.0;   ///< mean over the neighbours
  double line_step = 0.0;    ///< amplitude of the line in the differences
  double largest_step = 0.0; ///< of all differences, beats included
};

/// Hum frequency of each stretch between neighbouring borders; 0 where there is none.
/// `masked`: same size as samples; non-zero: activation, artefact or edge. `grouping`: see fit_harmonics.
std::vector<double> hum_frequencies(std::span<const double> samples, std::span<const std::uint8_t> masked,
                                    std::span<const std::size_t> borders, Hertz rate, std::size_t grouping,
                                    const MainsSettings& settings);

} // namespace chronodrome::conditioning
