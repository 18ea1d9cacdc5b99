// Chronodrome, GPL-3.0-or-later.
#include "pharmacology/wald.h"

#include <cmath>

namespace chronodrome::pharmacology {

Covariance::Covariance(const numerics::Matrix& jacobian, double residual_sd) {
  const numerics::LinearFit linear =
      numerics::solve_linear(jacobian, numerics::Vector::Zero(jacobian.rows()));
  condition_ = linear.condition;
  if (linear.full_rank()) covariance_ = linear.inverse_normal * (residual_sd * residual_sd);
}

std::optional<double> Covariance::error(Eigen::Index parameter) const {
  if (covariance_.size() == 0) return std::nullopt;
  return std::sqrt(covariance_(parameter, parameter));
}

std::optional<double> Covariance::error_of_difference(Eigen::Index a, Eigen::Index b) const {
  if (covariance_.size() == 0) return std::nullopt;
  return std::sqrt(covariance_(a, a) + covariance_(b, b) - 2.0 * covariance_(a, b));
}

std::optional<double> Covariance::error_of(const numerics::Vector& gradient) const {
  if (covariance_.size() == 0) return std::nullopt;
  return std::sqrt(gradient.dot(covariance_ * gradient));
}

Estimate wald(double estimate, std::optional<double> se, double t) {
  Estimate result;
  result.estimate = estimate;
  if (!se) return result;
  result.se = se;
  result.ci_low = estimate - t * *se;
  result.ci_high = estimate + t * *se;
  result.ci_method = "wald";
  return result;
}

Estimate wald_of_log(double log_value, std::optional<double> se, double t) {
  const auto back = [](const std::optional<double>& value) -> std::optional<double> {
    const double result = value ? std::exp(*value) : 0.0;
    return std::isfinite(result) && result > 0.0 ? std::optional(result) : std::nullopt;
  };
  const Estimate log = wald(log_value, se, t);
  Estimate result{back(log.estimate), {}, back(log.ci_low), back(log.ci_high), log.ci_method};
  if (se && result.estimate && std::isfinite(*se * *result.estimate)) result.se = *se * *result.estimate;
  return result;
}

Estimate antilog(const Estimate& negative_log10) {
  const auto back = [](const std::optional<double>& value) -> std::optional<double> {
    if (!value) return std::nullopt;
    const double concentration = std::pow(10.0, -*value);
    if (!std::isfinite(concentration) || concentration == 0.0) return std::nullopt;
    return concentration;
  };
  return {back(negative_log10.estimate),
          {},
          back(negative_log10.ci_high),
          back(negative_log10.ci_low),
          negative_log10.ci_method};
}

} // namespace chronodrome::pharmacology
