// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <cstdint>
#include <span>
#include <vector>

namespace chronodrome::conditioning {

/// Part of a hum: amplitude * cos(2 pi number f t + phase), split into cosine and sine.
struct Harmonic {
  int number = 1; ///< multiple of the mains frequency
  double cosine = 0.0;
  double sine = 0.0;
};

/// Hum of one stretch, with the time origin of its fit.
struct HarmonicFit {
  double cycles_per_sample = 0.0; ///< of the fundamental
  double origin = 0.0;            ///< sample position at which the phases count from zero
  std::vector<Harmonic> harmonics;
  bool solved = false; ///< false: too few usable samples, the harmonics are zero
};

/// Positions and values of one stretch of signal with what may not enter a fit.
struct FitSamples {
  std::span<const double> values;
  std::span<const std::uint8_t> masked; ///< same size; non-zero: left out
  double first = 0.0;                   ///< sample position of values[0]
};

/// Least-squares fit of sum_k (c_k cos + s_k sin)(2 pi k f t) + b0 + b1 t + b2 t^2 to the unmasked samples of
/// all `parts` together; the polynomial takes up the baseline and is not part of the answer. `grouping`
/// neighbouring samples are averaged before the fit (from the start of each part; groups with a masked sample
/// are left out) and the loss of amplitude by averaging is made good exactly.
/// Requires: numbers not empty, 0 < cycles_per_sample * number * grouping < 0.5.
/// Accuracy: exact for stationary hum of that frequency; an error df of the frequency over T seconds leaves
/// pi df T / sqrt(3) of the hum; one unmasked spike among N samples leaks 2 K / N of its height.
HarmonicFit fit_harmonics(std::span<const FitSamples> parts, double cycles_per_sample,
                          std::span<const int> numbers, std::size_t grouping, double origin);

/// Adds weight(i) * hum to out[i], where the weight runs as sin^2 from `from` to `to` over out (or is
/// constant where they are equal): 0 and 1 give a rising flank.
void add_hum(const HarmonicFit& fit, double first, double from, double to, std::span<double> out);

} // namespace chronodrome::conditioning
