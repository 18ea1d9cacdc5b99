// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <span>
#include <vector>

#include "base/quantity.h"

namespace chronodrome::activation {

/// Derivative by least squares (a parabola through 5 points; 7 from 2 kHz on; the central difference below
/// 800 Hz): short enough not to widen a deflection, long enough to average noise.
/// Source: Savitzky A, Golay MJE, Anal Chem 1964;36:1627.
class SlopeFilter {
public:
  explicit SlopeFilter(Hertz rate);
  [[nodiscard]] std::size_t reach() const { return reach_; } ///< samples needed to either side
  /// Slope at sample n in units per second. Requires: reach() samples on either side.
  [[nodiscard]] double at(std::span<const double> x, std::size_t n) const {
    switch (reach_) {
    case 1:
      return scale_ * (x[n + 1] - x[n - 1]);
    case 2:
      return scale_ * (2.0 * (x[n + 2] - x[n - 2]) + (x[n + 1] - x[n - 1]));
    default:
      return scale_ * (3.0 * (x[n + 3] - x[n - 3]) + 2.0 * (x[n + 2] - x[n - 2]) + (x[n + 1] - x[n - 1]));
    }
  }
  /// |slope| at every sample that has reach() samples on either side; others are left alone.
  void magnitudes(std::span<const double> x, std::span<double> out) const;
  /// Factor by which white noise of SD 1 appears in the slope.
  [[nodiscard]] double noise_gain() const { return noise_gain_; }
  /// Gain at a frequency against the ideal derivative.
  [[nodiscard]] double gain_at(Hertz frequency) const;

private:
  double rate_;
  std::size_t reach_;
  double scale_;
  double noise_gain_;
};

/// Summit of the parabola through (-1, left), (0, middle), (1, right): offset from the middle within +-0.5
/// and height. A flat or inverted triple gives offset 0.
struct Summit {
  double offset = 0.0;
  double height = 0.0;
};
Summit parabola_summit(double left, double middle, double right);

/// How strongly the signal moves: mean of |slope| over `mean_over` about each sample (an odd number of
/// samples, at least 1). `strength` gets the size of `detection`; zero within the reach of its ends.
/// `scratch` is memory that is used again from call to call.
void detection_function(std::span<const double> detection, const SlopeFilter& slope, Hertz rate,
                        Seconds mean_over, std::vector<double>& scratch, std::vector<double>& strength);
/// Samples that the mean runs over.
std::size_t detection_width(Hertz rate, Seconds mean_over);

} // namespace chronodrome::activation
