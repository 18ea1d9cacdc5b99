// Chronodrome, GPL-3.0-or-later.
#pragma once

#include "numerics/least_squares.h"
#include "pharmacology/curve_fit.h"

namespace chronodrome::pharmacology {

/// Above this condition number (columns of unit length) parameters count as not separable.
inline constexpr double kNotSeparable = 1e8;

/// residual_sd^2 (J'J)^-1 for a Jacobian with rows scaled by the root of their weight.
class Covariance {
public:
  Covariance(const numerics::Matrix& jacobian, double residual_sd);

  /// Infinite if the columns are dependent; then all errors are missing.
  [[nodiscard]] double condition() const { return condition_; }
  [[nodiscard]] std::optional<double> error(Eigen::Index parameter) const;
  [[nodiscard]] std::optional<double> error_of_difference(Eigen::Index a, Eigen::Index b) const;
  /// Error of a function of the parameters with this gradient.
  [[nodiscard]] std::optional<double> error_of(const numerics::Vector& gradient) const;

private:
  numerics::Matrix covariance_;
  double condition_;
};

/// estimate +- t se, method "wald"; without an error only the estimate.
Estimate wald(double estimate, std::optional<double> se, double t);

/// A number above 0 estimated by its logarithm: exp(log_value -+ t se), so that no limit is below 0; the
/// error is that of the number, exp(log_value) se. A limit without a finite value above 0 is missing.
Estimate wald_of_log(double log_value, std::optional<double> se, double t);

/// 10^-value with limits, no error: concentrations from their negative logarithms.
Estimate antilog(const Estimate& negative_log10);

} // namespace chronodrome::pharmacology
