// Chronodrome, GPL-3.0-or-later.
//
// What all families of models share once the sum of squares is known: the test for a response, the scatter.
#include <cmath>

#include "base/number_text.h"
#include "numerics/distributions.h"
#include "pharmacology/hill_fit.h"
#include "pharmacology/model_comparison.h"

namespace chronodrome::pharmacology {

namespace {

// Of the sum of squares of the responses: rounding of numbers written with ten digits or more.
constexpr double kExact = 1e-20;

/// P of the slope of the response on the rank of the concentration.
double trend_on_rank(const Levels& levels) {
  double total = 0.0, rank_sum = 0.0;
  for (std::size_t i = 0; i < levels.size(); ++i) {
    total += levels.weight[i];
    rank_sum += levels.weight[i] * static_cast<double>(i);
  }
  const double rank_mean = rank_sum / total, mean = levels.mean_of(0, levels.size());
  double rr = 0.0, ry = 0.0;
  for (std::size_t i = 0; i < levels.size(); ++i) {
    const double rank = static_cast<double>(i) - rank_mean;
    rr += levels.weight[i] * rank * rank;
    ry += levels.weight[i] * rank * (levels.mean[i] - mean);
  }
  double rss = levels.pure_error;
  for (std::size_t i = 0; i < levels.size(); ++i) {
    const double off = levels.mean[i] - mean - ry / rr * (static_cast<double>(i) - rank_mean);
    rss += levels.weight[i] * off * off;
  }
  const double df = static_cast<double>(levels.n_points) - 2.0;
  if (!(rss > 0.0)) return 0.0;
  return numerics::student_t_two_sided(ry / std::sqrt(rr) / std::sqrt(rss / df), df);
}

} // namespace

CurveFit empty_fit(Model model, const std::string& likelihood) {
  CurveFit fit;
  fit.model = model_name(model);
  fit.likelihood = likelihood;
  for (const ModelMeaning& meaning : model_meanings()) {
    if (meaning.model != model) continue;
    for (const ParameterMeaning& one : meaning.parameters) {
      fit.parameters.push_back({std::string(one.name), {}});
    }
    for (const ParameterMeaning& one : meaning.derived) {
      fit.derived.push_back({std::string(one.name), {}});
    }
  }
  return fit;
}

void add_flag(CurveFit& fit, std::string_view flag, const std::string& reason) {
  if (fit.has_flag(flag)) return;
  fit.flags.emplace_back(flag);
  fit.reasons.push_back(reason);
}

void sort_flags(CurveFit& fit) {
  std::vector<std::string> sorted, reasons;
  for (const FlagMeaning& meaning : flag_meanings()) {
    for (std::size_t i = 0; i < fit.flags.size(); ++i) {
      if (fit.flags[i] != meaning.flag) continue;
      sorted.push_back(fit.flags[i]);
      reasons.push_back(fit.reasons[i]);
    }
  }
  fit.flags = std::move(sorted);
  fit.reasons = std::move(reasons);
  fit.reason = fit.reasons.empty() ? "" : fit.reasons.front();
}

double two_sided_t(const FitOptions& options, int df) {
  return numerics::student_t_quantile(0.5 + options.confidence / 2.0, df);
}

bool describe_scatter(const Levels& levels, const FitOptions& options, double rss, int parameters,
                      CurveFit& fit) {
  const int n = static_cast<int>(levels.n_points);
  fit.df = n - parameters;
  fit.rss = rss;
  fit.residual_sd = std::sqrt(rss / fit.df);
  fit.aicc = aicc(rss, n, parameters);
  if (rss <= kExact * levels.sum_squares) {
    fit.aicc.reset();
    add_flag(fit, flags::kExactFit, "the curve passes through all points: no scatter to take errors from");
    return false;
  }
  const auto misses = lack_of_fit_test(rss, fit.df, levels.pure_error, levels.pure_error_df);
  if (misses) {
    fit.lack_of_fit_p = misses->p;
    if (misses->p < options.lack_of_fit_level) {
      add_flag(fit, flags::kLackOfFit,
               "the curve misses the means of repeated concentrations (F test, P = " +
                   number_text(misses->p, 2) + ")");
    }
  }
  return true;
}

bool ends_as_no_response(const Levels& levels, const FitOptions& options, double rss, int parameters,
                         CurveFit& fit) {
  const std::size_t n = levels.size();
  const double mean = levels.mean_of(0, n);
  const double centre = options.fixed_basal.value_or(mean);
  const double null_rss = levels.pure_error + levels.squares_about(centre, 0, n);
  const int points = static_cast<int>(levels.n_points);
  const int null_df = points - (options.fixed_basal ? 0 : 1);
  const bool all_equal = null_rss <= kExact * levels.sum_squares || null_rss == 0.0;
  const auto test = nested_test(null_rss, null_df, rss, points - parameters);
  fit.response_p = all_equal || !test ? 1.0 : test->p;
  fit.trend_p = all_equal || points < 3 ? 1.0 : trend_on_rank(levels);
  const bool asked = options.response_level > 0.0;
  if (!all_equal && !(asked && *fit.response_p >= options.response_level)) return false;

  add_flag(fit, flags::kNoResponse,
           all_equal ? std::string("all responses are equal")
                     : "no concentration-related response detected (F test against a constant, P = " +
                           number_text(*fit.response_p, 2) + ")");
  fit.converged = true;
  fit.df = null_df;
  fit.rss = null_rss;
  fit.residual_sd = std::sqrt(null_rss / null_df);
  fit.aicc = aicc(null_rss, points, options.fixed_basal ? 0 : 1);
  double total = 0.0;
  for (const double weight : levels.weight)
    total += weight;
  for (NamedEstimate& one : fit.parameters) {
    if (one.name != "basal") continue;
    one.value.estimate = centre;
    if (options.fixed_basal) {
      one.value.ci_method = "fixed";
    } else if (!all_equal) {
      one.value.se = *fit.residual_sd / std::sqrt(total);
      const double half = two_sided_t(options, null_df) * *one.value.se;
      one.value.ci_low = mean - half;
      one.value.ci_high = mean + half;
      one.value.ci_method = "profile";
    }
  }
  return true;
}

} // namespace chronodrome::pharmacology
