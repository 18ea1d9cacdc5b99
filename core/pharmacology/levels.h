// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <span>
#include <vector>

#include "pharmacology/curve_fit.h"

namespace chronodrome::pharmacology {

/// The points of a curve gathered by concentration. Least squares on the weighted means of the levels gives
/// the same estimates as on the points; the scatter within the levels (`pure_error`) is a constant.
struct Levels {
  std::vector<double> concentration;       ///< mol/L, distinct, ascending; the first may be 0
  std::vector<double> log10_concentration; ///< -infinity at 0
  std::vector<double> mean;                ///< weighted
  std::vector<double> weight;              ///< summed over the points of the level
  std::size_t n_points = 0;
  double pure_error = 0.0;  ///< weighted sum of squares about the level means
  int pure_error_df = 0;    ///< points - levels
  double sum_squares = 0.0; ///< weighted, about 0

  [[nodiscard]] std::size_t size() const { return mean.size(); }
  [[nodiscard]] bool has_control() const { return !concentration.empty() && concentration.front() == 0.0; }
  [[nodiscard]] std::size_t first_dose() const { return has_control() ? 1 : 0; }
  [[nodiscard]] double lowest_log() const { return log10_concentration[first_dose()]; }
  [[nodiscard]] double highest_log() const { return log10_concentration.back(); }
  /// Weighted mean of levels [from, to).
  [[nodiscard]] double mean_of(std::size_t from, std::size_t to) const;
  /// Weighted sum of squares of the levels [from, to) about `centre`.
  [[nodiscard]] double squares_about(double centre, std::size_t from, std::size_t to) const;
  /// Largest minus smallest level mean.
  [[nodiscard]] double range() const;
};

/// Requires: concentrations finite and >= 0, responses finite, weights finite and > 0.
Levels gather(std::span<const CurvePoint> points);

} // namespace chronodrome::pharmacology
