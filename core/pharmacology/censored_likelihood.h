// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <span>
#include <vector>

#include "numerics/least_squares.h"
#include "pharmacology/censored_fit.h"

namespace chronodrome::pharmacology {

/// Minus the log likelihood of a Hill curve under limits, without the constants ln(2 pi)/2 of the measured
/// points. Parameters: basal, emax, log10 EC50, ln nh, ln sigma.
class CensoredLikelihood {
public:
  static constexpr Eigen::Index kParameters = 5;

  CensoredLikelihood(std::span<const CurvePoint> measured, std::span<const CensoredPoint> censored)
      : measured_(measured), censored_(censored) {}

  [[nodiscard]] double value(const numerics::Vector& at) const;
  /// The value with gradient and Hessian, both exact.
  double derivatives(const numerics::Vector& at, numerics::Vector& gradient, numerics::Matrix& hessian) const;
  /// Weighted sum of squares of the measured points.
  [[nodiscard]] double rss(const numerics::Vector& at) const;

private:
  std::span<const CurvePoint> measured_;
  std::span<const CensoredPoint> censored_;
};

/// Where the likelihood is largest over the parameters in `free`; the others stay.
struct LikelihoodMaximum {
  numerics::Vector parameters;
  double minus_log = 0.0;
  numerics::Matrix covariance; ///< inverse of the observed information, rows as in `free`; empty if singular
  int iterations = 0;
  bool converged = false;
};

/// Newton's method, damped where the Hessian is not positive definite; converged when the promised fall is
/// below 1e-18, so that a parameter is within 1e-9 standard errors.
LikelihoodMaximum maximise(const CensoredLikelihood& likelihood, numerics::Vector start,
                           const std::vector<Eigen::Index>& free);

} // namespace chronodrome::pharmacology
