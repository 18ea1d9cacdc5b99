// Chronodrome, GPL-3.0-or-later.
#include <cmath>

#include "pharmacology/hill_fit.h"
#include "pharmacology/wald.h"

namespace chronodrome::pharmacology {

namespace {

/// In a linear model the profile limits and those from standard errors are the same numbers.
Estimate exact_t(double value, std::optional<double> se, double t) {
  Estimate result = wald(value, se, t);
  if (se) result.ci_method = "profile";
  return result;
}

} // namespace

void fit_constant(const Levels& levels, const FitOptions& options, CurveFit& fit) {
  const double mean = levels.mean_of(0, levels.size());
  const double rss = levels.pure_error + levels.squares_about(mean, 0, levels.size());
  const bool scatter = describe_scatter(levels, options, rss, 1, fit);
  fit.converged = true;
  double total = 0.0;
  for (const double weight : levels.weight)
    total += weight;
  const auto se = scatter ? std::optional(*fit.residual_sd / std::sqrt(total)) : std::nullopt;
  fit.parameters[0].value = exact_t(mean, se, two_sided_t(options, fit.df));
}

void fit_linear(const Levels& levels, const FitOptions& options, CurveFit& fit) {
  const auto n = static_cast<Eigen::Index>(levels.size());
  numerics::Matrix design(n, 2);
  numerics::Vector observed(n);
  for (Eigen::Index i = 0; i < n; ++i) {
    const auto k = static_cast<std::size_t>(i);
    const double root = std::sqrt(levels.weight[k]);
    design(i, 0) = root;
    design(i, 1) = root * levels.concentration[k];
    observed(i) = root * levels.mean[k];
  }
  const numerics::LinearFit line = numerics::solve_linear(design, observed);
  const double rss = levels.pure_error + line.rss;
  if (ends_as_no_response(levels, options, rss, 2, fit)) return;
  const bool scatter = describe_scatter(levels, options, rss, 2, fit);
  fit.converged = line.full_rank();
  fit.condition = line.condition;
  const Covariance covariance(design, *fit.residual_sd);
  const double t = two_sided_t(options, fit.df);
  for (Eigen::Index j = 0; j < 2; ++j) {
    const auto se = scatter ? covariance.error(j) : std::nullopt;
    fit.parameters[static_cast<std::size_t>(j)].value = exact_t(line.coefficients(j), se, t);
  }
}

} // namespace chronodrome::pharmacology
