// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <array>
#include <vector>

#include "numerics/least_squares.h"
#include "pharmacology/levels.h"
#include "pharmacology/shape.h"

namespace chronodrome::pharmacology {

/// constant + sum over m of function[m] x (function m of the shape) + complement[m] x (1 - function m): one
/// column of a model that is linear in all but the shape's parameters, or the part of it that is known. The
/// complement has a place of its own because 1 - function loses its digits where the function is near 1.
struct Column {
  double constant = 0.0;
  std::array<double, 2> function{0.0, 0.0};
  std::array<double, 2> complement{0.0, 0.0};
};

/// A minimum over some of the shape's parameters and all columns.
struct SeparableMinimum {
  std::vector<double> theta;
  std::vector<double> coefficients; ///< one a column; 0 for a column that the others span
  double rss = 0.0;                 ///< with the scatter within the levels
  int iterations = 0;               ///< of the descent that led here
};

/// response = known + sum of coefficient x column, fitted by variable projection: for any shape parameters
/// the best coefficients follow from linear least squares, so that only the shape's parameters are searched.
/// One object serves one thread. Requires: `levels` and `shape` outlive it; at most 3 columns.
/// Source: Golub GH, Pereyra V (1973) SIAM J Numer Anal 10:413-432; Jacobian as in Kaufman L (1975) BIT
/// 15:49-57.
class SeparableProblem {
public:
  SeparableProblem(const Levels& levels, const Shape& shape, std::vector<Column> columns, Column known = {});

  /// Replaces the part of the model that is not fitted.
  void set_known(const Column& known) { known_ = known; }

  /// Sum of squares at the best coefficients; infinite where the model has no value.
  double rss(std::span<const double> theta);

  /// The best coefficients at `theta`.
  SeparableMinimum at(std::span<const double> theta);

  /// Damped Gauss-Newton from `start` over the parameters in `free`, until the promised fall of the RSS is
  /// below a relative 1e-13: enough for a profile, where an error in theta enters squared.
  SeparableMinimum descend(std::vector<double> start, std::span<const std::size_t> free);

  /// The same to full accuracy, with the general solver's summary (parameters: those in `free`).
  SeparableMinimum refine(std::vector<double> start, std::span<const std::size_t> free,
                          numerics::LeastSquaresSummary& summary);

  /// Derivatives of the whole model at a minimum, rows scaled by the root of their weight: first by the
  /// coefficients, then by the parameters in `free`.
  numerics::Matrix jacobian(const SeparableMinimum& minimum, std::span<const std::size_t> free);

private:
  bool project(std::span<const double> theta, bool with_slopes);
  void slopes(std::span<const std::size_t> free, bool projected);
  double* column(std::size_t c) { return columns_values_.data() + c * n_; }

  const Levels& levels_;
  const Shape& shape_;
  std::vector<Column> columns_;
  Column known_;
  std::size_t n_;
  std::vector<double> root_weight_, value_, slope_, columns_values_, basis_, residual_, jacobian_;
  std::array<std::array<double, 3>, 3> r_{}; ///< upper triangle of the columns' QR
  std::array<bool, 3> independent_{};
  std::array<double, 3> coefficient_{};
  double level_rss_ = 0.0;
};

} // namespace chronodrome::pharmacology
