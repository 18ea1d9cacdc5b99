// Chronodrome, GPL-3.0-or-later.
#include "pharmacology/shape_fit.h"

#include <algorithm>
#include <cmath>
#include <limits>

#include "base/number_text.h"
#include "pharmacology/model_comparison.h"

namespace chronodrome::pharmacology {

namespace {

constexpr double kBelievedLevel = 0.05; // of the F test for a second component, where the search failed

} // namespace

ShapeFit::ShapeFit(const Levels& levels, const FitOptions& options, SeparableProblem& problem,
                   std::vector<std::size_t> free, CurveFit& fit)
    : levels_(levels), options_(options), problem_(problem), free_(std::move(free)), fit_(fit) {}

bool ShapeFit::is_no_better_than(const HillConstraints& one_component) const {
  const HillOptimum one = find_hill_optimum(levels_, HillShape(), one_component,
                                            HillLimits(levels_, one_component.nh, one_component.basal));
  const int df = static_cast<int>(levels_.n_points) - one_component.parameters();
  const auto better = nested_test(one.rss, df, minimum_.rss, fit_.df);
  return !better || better->p >= kBelievedLevel;
}

bool ShapeFit::run(const std::vector<std::vector<double>>& starts,
                   const std::optional<HillConstraints>& one_component) {
  minimum_.rss = std::numeric_limits<double>::infinity();
  for (const std::vector<double>& start : starts) {
    const SeparableMinimum found = problem_.descend(start, free_);
    if (found.rss < minimum_.rss) minimum_ = found;
  }
  numerics::LeastSquaresSummary summary;
  const int before = minimum_.iterations;
  minimum_ = problem_.refine(minimum_.theta, free_, summary);
  const int p = static_cast<int>(minimum_.coefficients.size() + free_.size());
  if (ends_as_no_response(levels_, options_, minimum_.rss, p, fit_)) return false;
  const bool scatter = describe_scatter(levels_, options_, minimum_.rss, p, fit_);
  fit_.converged = summary.converged();
  fit_.iterations = before + summary.iterations;
  const Covariance covariance(problem_.jacobian(minimum_, free_), *fit_.residual_sd);
  const bool separable = covariance.condition() <= kNotSeparable;
  if (std::isfinite(covariance.condition())) fit_.condition = covariance.condition();
  if (!fit_.converged) {
    // Two components that became one, or one that lost its weight, leave a valley without an end: that, not
    // the search, is why there is no minimum.
    if (!separable || (one_component && is_no_better_than(*one_component))) {
      add_flag(fit_, flags::kNotSeparable,
               "the parameters cannot be told apart from these points: many sets of them fit alike, and no "
               "single one is given");
    } else {
      add_flag(fit_, flags::kNotConverged,
               "the search ended after " + std::to_string(fit_.iterations) + " steps without a minimum");
    }
    return false;
  }
  if (!separable) {
    add_flag(fit_, flags::kNotSeparable,
             "the parameters cannot be told apart from these points" +
                 (fit_.condition ? " (condition number " + number_text(*fit_.condition, 2) + ")" : ""));
  }
  if (scatter) covariance_ = covariance;
  t_ = two_sided_t(options_, fit_.df);
  return true;
}

std::optional<double> ShapeFit::error(const std::vector<double>& gradient) const {
  if (!covariance_) return std::nullopt;
  return covariance_->error_of(
      Eigen::Map<const numerics::Vector>(gradient.data(), static_cast<Eigen::Index>(gradient.size())));
}

void ShapeFit::set(const char* name, double value, const std::vector<double>& gradient) {
  set(name, wald(value, error(gradient), t_));
}

void ShapeFit::set(const char* name, const Estimate& value) {
  for (auto* list : {&fit_.parameters, &fit_.derived}) {
    for (NamedEstimate& one : *list) {
      if (one.name == name) one.value = value;
    }
  }
}

std::vector<std::vector<double>> pair_starts(const Levels& levels, SeparableProblem& problem,
                                             const std::vector<double>& slopes, std::size_t most) {
  struct Start {
    double rss;
    std::vector<double> theta;
  };
  std::vector<Start> all;
  const std::vector<double> locations = location_nodes(levels, 0.5, 0.4);
  for (std::size_t i = 0; i < locations.size(); ++i) {
    for (std::size_t j = i + 1; j < locations.size(); ++j) {
      for (const double first : slopes) {
        for (const double second : slopes) {
          const std::vector<double> theta{locations[i], first, locations[j], second};
          all.push_back({problem.rss(theta), theta});
        }
      }
    }
  }
  std::stable_sort(all.begin(), all.end(), [](const Start& a, const Start& b) { return a.rss < b.rss; });
  std::vector<std::vector<double>> starts;
  for (std::size_t k = 0; k < std::min(most, all.size()); ++k)
    starts.push_back(all[k].theta);
  return starts;
}

} // namespace chronodrome::pharmacology
