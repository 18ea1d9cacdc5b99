// Chronodrome, GPL-3.0-or-later.
#include "pharmacology/limit_models.h"

#include <algorithm>
#include <cmath>
#include <limits>
#include <vector>

#include "numerics/roots.h"

namespace chronodrome::pharmacology {

namespace {

constexpr double kInfinity = std::numeric_limits<double>::infinity();

struct Line {
  double intercept = 0.0;
  double slope = 0.0;
};

/// Weighted least squares of the level means on `f`, with the intercept free or given.
Line fit_line(const Levels& levels, const std::vector<double>& f, std::optional<double> intercept) {
  double total = 0.0, sum_f = 0.0, sum_y = 0.0;
  for (std::size_t i = 0; i < f.size(); ++i) {
    total += levels.weight[i];
    sum_f += levels.weight[i] * f[i];
    sum_y += levels.weight[i] * levels.mean[i];
  }
  const double centre_f = intercept ? 0.0 : sum_f / total;
  const double centre_y = intercept ? *intercept : sum_y / total;
  double ff = 0.0, fy = 0.0;
  for (std::size_t i = 0; i < f.size(); ++i) {
    ff += levels.weight[i] * (f[i] - centre_f) * (f[i] - centre_f);
    fy += levels.weight[i] * (f[i] - centre_f) * (levels.mean[i] - centre_y);
  }
  const double slope = ff > 0.0 ? fy / ff : 0.0;
  return {centre_y - slope * centre_f, slope};
}

} // namespace

HillLimits::HillLimits(const Levels& levels, std::optional<double> fixed_nh,
                       std::optional<double> fixed_basal)
    : levels_(levels), fixed_nh_(fixed_nh), fixed_basal_(fixed_basal),
      anchored_(levels.has_control() || fixed_basal.has_value()) {
  const std::size_t first = levels.first_dose(), n = levels.size();
  rest_ = levels.pure_error + levels.squares_about(levels.mean_of(first, n), first, n);
  if (levels.has_control() && fixed_basal) rest_ += levels.squares_about(*fixed_basal, 0, 1);
  step_ = best_step();
}

double HillLimits::basal(bool upwards) const {
  return anchored_ ? kInfinity : inverse(upwards ? 1 : -1).rss;
}

double HillLimits::effect(bool upwards) const {
  return std::min(emax(upwards), basal(!upwards));
}

double HillLimits::slope_down() const {
  return anchored_ ? rest_ : fit_power(0.0, End::zero, 0, false).rss;
}

HillLimits::PowerLaw HillLimits::fit_power(double nh, End end, int sign, bool inverted) const {
  const std::size_t n = levels_.size();
  const std::vector<double>& x = levels_.log10_concentration;
  const double reference = inverted ? levels_.lowest_log() : levels_.highest_log();
  std::vector<double> f(n);
  for (std::size_t i = 0; i < n; ++i) {
    const bool control = levels_.concentration[i] == 0.0;
    if (control) {
      f[i] = 0.0;
    } else if (end == End::infinite) {
      f[i] = x[i] == reference ? 1.0 : 0.0;
    } else if (end == End::zero) {
      f[i] = anchored_ ? 1.0 : (inverted ? -x[i] : x[i]);
    } else {
      f[i] = std::pow(10.0, nh * (inverted ? reference - x[i] : x[i] - reference));
    }
  }
  const std::optional<double> given = inverted ? std::nullopt : fixed_basal_;
  Line line = fit_line(levels_, f, given);
  if (line.slope * sign < 0.0) line = {given ? *given : levels_.mean_of(0, n), 0.0};
  PowerLaw law;
  law.asymptote = line.intercept;
  law.k = line.slope;
  law.end = end;
  law.rss = levels_.pure_error;
  for (std::size_t i = 0; i < n; ++i) {
    const double off = levels_.mean[i] - line.intercept - line.slope * f[i];
    law.rss += levels_.weight[i] * off * off;
  }
  if (end == End::none) law.nh = nh;
  return law;
}

HillLimits::PowerLaw HillLimits::best_power(int sign, bool inverted) const {
  if (fixed_nh_) return fit_power(*fixed_nh_, End::none, sign, inverted);
  PowerLaw best = fit_power(0.0, End::zero, sign, inverted);
  const PowerLaw steep = fit_power(0.0, End::infinite, sign, inverted);
  if (steep.rss < best.rss) best = steep;
  const auto rss = [&](double log_nh) { return fit_power(std::exp(log_nh), End::none, sign, inverted).rss; };
  // From where C^nh is flat to where all levels but the outermost are 0.
  constexpr double kFrom = -7.0, kTo = 4.0, kStep = 0.5;
  constexpr int kNodes = 22;
  int lowest = 0;
  double lowest_rss = kInfinity;
  for (int k = 0; k <= kNodes; ++k) {
    const double here = rss(kFrom + kStep * k);
    if (here < lowest_rss) lowest_rss = here, lowest = k;
  }
  const double middle = kFrom + kStep * lowest;
  const numerics::Minimum found =
      numerics::minimise(rss, std::max(kFrom, middle - kStep), std::min(kTo, middle + kStep), 1e-7);
  if (found.value < best.rss * (1.0 - 1e-9)) best = fit_power(std::exp(found.x), End::none, sign, inverted);
  return best;
}

double HillLimits::step_at(double log10_ec50) const {
  const std::vector<double>& x = levels_.log10_concentration;
  const std::size_t n = levels_.size();
  const auto split = static_cast<std::size_t>(std::lower_bound(x.begin(), x.end(), log10_ec50) - x.begin());
  double rss = levels_.pure_error;
  if (split > 0) rss += levels_.squares_about(fixed_basal_.value_or(levels_.mean_of(0, split)), 0, split);
  if (split < n) rss += levels_.squares_about(levels_.mean_of(split, n), split, n);
  return rss;
}

HillLimits::Step HillLimits::best_step() const {
  const std::size_t n = levels_.size(), first = levels_.first_dose();
  const std::vector<double>& x = levels_.log10_concentration;
  Step best;
  best.rss = kInfinity;
  const auto consider = [&](std::size_t below_end, std::size_t above_begin, double low, double high) {
    Step step;
    if (fixed_basal_) {
      step.basal = fixed_basal_;
    } else if (below_end > 0) {
      step.basal = levels_.mean_of(0, below_end);
    }
    if (above_begin < n) step.emax = levels_.mean_of(above_begin, n);
    step.rss = levels_.pure_error;
    if (step.basal) step.rss += levels_.squares_about(*step.basal, 0, below_end);
    if (step.emax) step.rss += levels_.squares_about(*step.emax, above_begin, n);
    step.log_low = low;
    step.log_high = high;
    if (above_begin == below_end + 1 && step.basal && step.emax) {
      const double between = levels_.mean[below_end];
      if ((between - *step.basal) * (between - *step.emax) > 0.0) return; // not between the plateaus
    }
    if (step.rss < best.rss) best = step;
  };
  for (std::size_t k = first; k < n; ++k) {
    consider(k, k, k > first ? x[k - 1] : -kInfinity, x[k]);
    consider(k, k + 1, x[k], x[k]);
  }
  return best;
}

} // namespace chronodrome::pharmacology
