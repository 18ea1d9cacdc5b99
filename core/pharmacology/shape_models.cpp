// Chronodrome, GPL-3.0-or-later.
//
// Curves beyond the Hill form: asymmetric, two components, bell. Gradients in the comments are by the fitted
// coefficients first, then by the free shape parameters.
#include <cmath>
#include <numbers>

#include "numerics/roots.h"
#include "pharmacology/hill_problem.h"
#include "pharmacology/shape_fit.h"

namespace chronodrome::pharmacology {

namespace {

constexpr double kMostLogAsymmetry = 3.0;
constexpr double kLeastDistance = 0.5; // of two components, in log10 units

constexpr Column kOne{1.0, {0.0, 0.0}, {0.0, 0.0}};
constexpr Column kFirst{0.0, {1.0, 0.0}, {0.0, 0.0}};
constexpr Column kSecond{0.0, {0.0, 1.0}, {0.0, 0.0}};
constexpr Column kFirstBelow{0.0, {0.0, 0.0}, {1.0, 0.0}};

} // namespace

void fit_richards(const Levels& levels, const FitOptions& options, CurveFit& fit) {
  const HillShape hill;
  const HillOptimum symmetric =
      find_hill_optimum(levels, hill, {}, HillLimits(levels, std::nullopt, std::nullopt));
  const RichardsShape shape;
  SeparableProblem problem(levels, shape, {kFirstBelow, kFirst});
  const double location = symmetric.minimum.theta[0], slope = symmetric.minimum.theta[1];
  std::vector<std::vector<double>> starts;
  for (const double s : {1.0, 0.5, 2.0})
    starts.push_back({location, slope, std::log(s)});

  const std::vector<std::size_t> all{0, 1, 2};
  SeparableMinimum best;
  best.rss = symmetric.minimum.rss;
  for (const std::vector<double>& start : starts) {
    const SeparableMinimum found = problem.descend(start, all);
    if (found.rss < best.rss) best = found;
  }
  // An asymmetry that runs away is held at its limit, so that the other parameters keep a meaning.
  std::vector<std::size_t> free = all;
  if (!best.theta.empty() && std::abs(best.theta[2]) > kMostLogAsymmetry) {
    free = {0, 1};
    for (std::vector<double>& start : starts)
      start[2] = std::copysign(kMostLogAsymmetry, best.theta[2]);
    add_flag(fit, flags::kNotSeparable, "the asymmetry of the curve ran to its limit");
  }
  ShapeFit work(levels, options, problem, free, fit);
  if (!work.run(starts)) return;
  const SeparableMinimum& m = work.minimum();
  const double nh = std::exp(m.theta[1]), s = std::exp(m.theta[2]);
  const bool asymmetry_is_free = free.size() == 3;
  const auto gradient = [&](double by_basal, double by_emax, double by_location, double by_log_nh) {
    std::vector<double> g{by_basal, by_emax, by_location, by_log_nh};
    if (asymmetry_is_free) g.push_back(0.0);
    return g;
  };
  work.set("basal", m.coefficients[0], gradient(1, 0, 0, 0));
  work.set("emax", m.coefficients[1], gradient(0, 1, 0, 0));
  work.set("pec50", -m.theta[0], gradient(0, 0, -1, 0));
  work.set("nh", nh, gradient(0, 0, 0, nh));
  work.set("effect_max", m.coefficients[1] - m.coefficients[0], gradient(-1, 1, 0, 0));
  if (asymmetry_is_free) {
    work.set("asymmetry", s, {0, 0, 0, 0, s});
  } else {
    work.set("asymmetry", {s, {}, {}, {}, "fixed"});
  }
  work.set("ec50_mol_per_l", antilog(*fit.find("pec50")));
  // Steepest where z = ln s: L + (ln s + ln(2^(1/s) - 1)) / (nh ln 10).
  const double inflection =
      m.theta[0] + (m.theta[2] + std::log(std::expm1(std::numbers::ln2 / s))) / (nh * std::numbers::ln10);
  work.set("inflection_mol_per_l", antilog(wald(-inflection, std::nullopt, 0.0)));
}

void fit_biphasic(const Levels& levels, const FitOptions& options, CurveFit& fit) {
  const TwoHillShape shape;
  std::vector<Column> columns{kFirst, kSecond};
  if (!options.fixed_basal) columns.insert(columns.begin(), kOne);
  SeparableProblem problem(levels, shape, columns, {options.fixed_basal.value_or(0.0), {}, {}});
  ShapeFit work(levels, options, problem, {0, 2}, fit);
  if (!work.run(pair_starts(levels, problem, {0.0}, 5), HillConstraints{1.0, options.fixed_basal})) return;
  const SeparableMinimum& m = work.minimum();
  const std::size_t b = options.fixed_basal ? 0 : 1; // coefficients before the two effects
  const double basal = options.fixed_basal ? *options.fixed_basal : m.coefficients[0];
  const bool swapped = m.theta[0] > m.theta[2];
  const std::size_t low = b + (swapped ? 1 : 0), high = b + (swapped ? 0 : 1);
  const double first = m.coefficients[low], second = m.coefficients[high], effect = first + second;
  const auto gradient = [&](double by_basal, double by_first, double by_second, double by_l1, double by_l2) {
    std::vector<double> g(b + 4, 0.0);
    if (b == 1) g[0] = by_basal;
    g[low] = by_first;
    g[high] = by_second;
    g[b + (swapped ? 3 : 2)] = by_l1;
    g[b + (swapped ? 2 : 3)] = by_l2;
    return g;
  };
  const double share = first / effect;
  if (options.fixed_basal) {
    work.set("basal", {basal, {}, {}, {}, "fixed"});
  } else {
    work.set("basal", basal, gradient(1, 0, 0, 0, 0));
  }
  work.set("emax", basal + effect, gradient(1, 1, 1, 0, 0));
  work.set("effect_max", effect, gradient(0, 1, 1, 0, 0));
  work.set("fraction_1", share, gradient(0, second / (effect * effect), -first / (effect * effect), 0, 0));
  const double l1 = m.theta[swapped ? 2 : 0], l2 = m.theta[swapped ? 0 : 2];
  work.set("pec50_1", -l1, gradient(0, 0, 0, -1, 0));
  work.set("pec50_2", -l2, gradient(0, 0, 0, 0, -1));
  work.set("ec50_1_mol_per_l", antilog(*fit.find("pec50_1")));
  work.set("ec50_2_mol_per_l", antilog(*fit.find("pec50_2")));
  const Estimate& part = *fit.find("fraction_1");
  if (!(part.ci_low.value_or(share) > 0.0 && part.ci_high.value_or(share) < 1.0) ||
      l2 - l1 < kLeastDistance) {
    add_flag(fit, flags::kNotSeparable, "the two components cannot be told from one");
  }
}

void fit_bell(const Levels& levels, const FitOptions& options, CurveFit& fit) {
  const TwoHillShape shape;
  SeparableProblem problem(levels, shape, {kOne, kFirst, kSecond});
  ShapeFit work(levels, options, problem, {0, 1, 2, 3}, fit);
  if (!work.run(pair_starts(levels, problem, {std::log(0.8), std::log(1.6)}, 8), HillConstraints{})) return;
  const SeparableMinimum& m = work.minimum();
  const bool swapped = m.theta[0] > m.theta[2];
  const std::size_t first = swapped ? 2 : 0, second = swapped ? 0 : 2;
  const auto unit = [](std::size_t place, double factor) {
    std::vector<double> g(7, 0.0);
    g[place] = factor;
    return g;
  };
  const double effect_1 = m.coefficients[1 + first / 2], effect_2 = m.coefficients[1 + second / 2];
  const double nh_1 = std::exp(m.theta[first + 1]), nh_2 = std::exp(m.theta[second + 1]);
  work.set("basal", m.coefficients[0], unit(0, 1.0));
  work.set("effect_1", effect_1, unit(1 + first / 2, 1.0));
  work.set("effect_2", effect_2, unit(1 + second / 2, 1.0));
  work.set("pec50_1", -m.theta[first], unit(3 + first, -1.0));
  work.set("pec50_2", -m.theta[second], unit(3 + second, -1.0));
  work.set("nh_1", nh_1, unit(4 + first, nh_1));
  work.set("nh_2", nh_2, unit(4 + second, nh_2));
  if (effect_1 * effect_2 >= 0.0) {
    add_flag(fit, flags::kNotSeparable, "both limbs go the same way: the curve is not bell-shaped");
    return;
  }
  const auto height = [&](double x) {
    return -std::abs(effect_1 * logistic(nh_1 * std::numbers::ln10 * (x - m.theta[first])) +
                     effect_2 * logistic(nh_2 * std::numbers::ln10 * (x - m.theta[second])));
  };
  const numerics::Minimum top = numerics::minimise(height, m.theta[first], m.theta[second], 1e-9);
  work.set("extremum_mol_per_l", antilog(wald(-top.x, std::nullopt, 0.0)));
}

} // namespace chronodrome::pharmacology
