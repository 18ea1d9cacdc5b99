// Chronodrome, GPL-3.0-or-later.
#include "pharmacology/hill_problem.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <limits>

namespace chronodrome::pharmacology {

namespace {

constexpr double kInfinity = std::numeric_limits<double>::infinity();
constexpr std::array kSlopes{0.3, 0.5, 0.75, 1.0, 1.5, 2.0, 3.0, 5.0};
constexpr double kFlattest = -3.0; // ln nh
constexpr double kSteepest = 3.0;
// A finite optimum must beat its limit models by more than rounding can feign.
constexpr double kClearlyBelow = 1.0 - 1e-9;

constexpr Column kBasalColumn{0.0, {0.0, 0.0}, {1.0, 0.0}};
constexpr Column kEmaxColumn{0.0, {1.0, 0.0}, {0.0, 0.0}};
constexpr Column kOne{1.0, {0.0, 0.0}, {0.0, 0.0}};

Column scaled(const Column& column, double factor) {
  return {factor * column.constant,
          {factor * column.function[0], factor * column.function[1]},
          {factor * column.complement[0], factor * column.complement[1]}};
}

Column sum(const Column& a, const Column& b) {
  return {a.constant + b.constant,
          {a.function[0] + b.function[0], a.function[1] + b.function[1]},
          {a.complement[0] + b.complement[0], a.complement[1] + b.complement[1]}};
}

/// The columns that stay free when `parameter` is held.
std::vector<Column> free_columns(const HillConstraints& held, HillParameter parameter) {
  switch (parameter) {
  case HillParameter::basal:
    return {kEmaxColumn};
  case HillParameter::emax:
    return held.basal ? std::vector<Column>{} : std::vector<Column>{kBasalColumn};
  case HillParameter::effect:
    return held.basal ? std::vector<Column>{} : std::vector<Column>{kOne};
  case HillParameter::location:
  case HillParameter::log_slope:
    break;
  }
  return held.basal ? std::vector<Column>{kEmaxColumn} : std::vector<Column>{kBasalColumn, kEmaxColumn};
}

Column fixed_part(const HillConstraints& held) {
  return held.basal ? scaled(kBasalColumn, *held.basal) : Column{};
}

/// Up to `most` starts from the grid: its lowest nodes that no neighbour undercuts.
std::vector<std::vector<double>> grid_starts(SeparableProblem& problem, const std::vector<double>& locations,
                                             const std::vector<double>& slopes, std::size_t most) {
  const std::size_t rows = locations.size(), columns = slopes.size();
  std::vector<double> rss(rows * columns);
  for (std::size_t i = 0; i < rows; ++i) {
    for (std::size_t j = 0; j < columns; ++j) {
      const std::array<double, 2> theta{locations[i], slopes[j]};
      rss[i * columns + j] = problem.rss(theta);
    }
  }
  std::vector<std::size_t> minima;
  for (std::size_t i = 0; i < rows; ++i) {
    for (std::size_t j = 0; j < columns; ++j) {
      const double here = rss[i * columns + j];
      const bool lowest = (i == 0 || here <= rss[(i - 1) * columns + j]) &&
                          (i + 1 == rows || here <= rss[(i + 1) * columns + j]) &&
                          (j == 0 || here <= rss[i * columns + j - 1]) &&
                          (j + 1 == columns || here <= rss[i * columns + j + 1]);
      if (lowest && here < kInfinity) minima.push_back(i * columns + j);
    }
  }
  std::stable_sort(minima.begin(), minima.end(),
                   [&](std::size_t a, std::size_t b) { return rss[a] < rss[b]; });
  std::vector<std::vector<double>> starts;
  for (std::size_t k = 0; k < std::min(most, minima.size()); ++k) {
    starts.push_back({locations[minima[k] / columns], slopes[minima[k] % columns]});
  }
  return starts;
}

/// Starts beside the limit models, in case the grid missed a basin that leads there.
void add_limit_starts(const Levels& levels, const HillConstraints& held, const HillLimits& limits,
                      std::vector<std::vector<double>>& starts) {
  const double fixed = held.nh ? std::log(*held.nh) : 0.0;
  const auto slope_of = [&](const HillLimits::PowerLaw& law) {
    if (held.nh) return fixed;
    return law.nh ? std::log(*law.nh) : (law.end == HillLimits::End::zero ? -1.5 : 1.5);
  };
  starts.push_back({levels.highest_log() + 1.0, slope_of(limits.power(0))});
  if (!limits.anchored()) starts.push_back({levels.lowest_log() - 1.0, slope_of(limits.inverse(0))});
  const HillLimits::Step& step = limits.step();
  if (!held.nh && std::isfinite(step.log_low)) {
    starts.push_back({(step.log_low + step.log_high) / 2.0, std::log(8.0)});
  }
}

HillOptimum::Kind kind_of(double finite, const HillConstraints& held, const HillLimits& limits, double& rss) {
  const double up = limits.location_up(), down = limits.location_down();
  const double step = held.nh ? kInfinity : limits.slope_up();
  const double flat = held.nh ? kInfinity : limits.slope_down();
  const double lowest = std::min({up, down, step, flat});
  if (finite < lowest * kClearlyBelow) {
    rss = finite;
    return HillOptimum::Kind::finite;
  }
  rss = lowest;
  const double same = lowest / kClearlyBelow;
  if (limits.anchored() && limits.rest() <= same) return HillOptimum::Kind::rest;
  if (!limits.anchored() && flat <= same) return HillOptimum::Kind::line;
  if (up <= same) return HillOptimum::Kind::location_up;
  if (down <= same) return HillOptimum::Kind::location_down;
  return step <= same ? HillOptimum::Kind::step : HillOptimum::Kind::location_up;
}

} // namespace

std::vector<std::size_t> HillConstraints::free_shape() const {
  return nh ? std::vector<std::size_t>{0} : std::vector<std::size_t>{0, 1};
}

SeparableProblem hill_problem(const Levels& levels, const HillShape& shape, const HillConstraints& held) {
  return {levels, shape, free_columns(held, HillParameter::location), fixed_part(held)};
}

std::vector<double> location_nodes(const Levels& levels, double reach, double spacing) {
  std::vector<double> nodes;
  const double from = levels.lowest_log() - reach;
  const double width = levels.highest_log() + reach - from;
  const int count = static_cast<int>(std::ceil(width / spacing));
  for (int k = 0; k <= count; ++k)
    nodes.push_back(from + width * k / count);
  return nodes;
}

std::vector<double> slope_nodes(const HillConstraints& held) {
  if (held.nh) return {std::log(*held.nh)};
  std::vector<double> nodes;
  nodes.reserve(kSlopes.size());
  for (const double nh : kSlopes)
    nodes.push_back(std::log(nh));
  return nodes;
}

HillOptimum find_hill_optimum(const Levels& levels, const HillShape& shape, const HillConstraints& held,
                              const HillLimits& limits) {
  SeparableProblem problem = hill_problem(levels, shape, held);
  const std::vector<std::size_t> free = held.free_shape();
  std::vector<std::vector<double>> starts =
      grid_starts(problem, location_nodes(levels, 1.0, 0.25), slope_nodes(held), 3);
  add_limit_starts(levels, held, limits, starts);
  HillOptimum optimum;
  optimum.minimum.rss = kInfinity;
  for (const std::vector<double>& start : starts) {
    const SeparableMinimum found = problem.descend(start, free);
    if (found.rss < optimum.minimum.rss) optimum.minimum = found;
  }
  optimum.kind = kind_of(optimum.minimum.rss, held, limits, optimum.rss);
  if (optimum.kind == HillOptimum::Kind::finite) {
    const int before = optimum.minimum.iterations;
    optimum.minimum = problem.refine(optimum.minimum.theta, free, optimum.summary);
    optimum.minimum.iterations = before + optimum.summary.iterations;
    optimum.rss = optimum.minimum.rss;
  }
  return optimum;
}

ConstrainedHill::ConstrainedHill(const Levels& levels, const HillShape& shape, const HillConstraints& held,
                                 const HillLimits& limits, HillParameter parameter, std::vector<double> start)
    : levels_(levels), limits_(limits), held_(held), parameter_(parameter),
      problem_(levels, shape, free_columns(held, parameter), fixed_part(held)), home_(std::move(start)),
      kept_(home_), theta_(home_) {
  if (parameter != HillParameter::location) free_.push_back(0);
  if (parameter != HillParameter::log_slope && !held.nh) free_.push_back(1);
}

void ConstrainedHill::hold(double value) {
  const Column fixed = fixed_part(held_);
  switch (parameter_) {
  case HillParameter::basal:
    problem_.set_known(scaled(kBasalColumn, value));
    break;
  case HillParameter::emax:
    problem_.set_known(sum(fixed, scaled(kEmaxColumn, value)));
    break;
  case HillParameter::effect: // basal 1 + effect h: with basal fixed its column is the constant
    problem_.set_known(sum(scaled(kOne, held_.basal.value_or(0.0)), scaled(kEmaxColumn, value)));
    break;
  case HillParameter::location:
    theta_[0] = value;
    break;
  case HillParameter::log_slope:
    theta_[1] = value;
    break;
  }
}

double ConstrainedHill::follow(double held) {
  theta_ = kept_;
  // From a place so far out that the curve is its limit model no descent finds back.
  theta_[0] = std::clamp(theta_[0], levels_.lowest_log() - 2.0, levels_.highest_log() + 2.0);
  if (!held_.nh) theta_[1] = std::clamp(theta_[1], kFlattest, kSteepest);
  hold(held);
  SeparableMinimum found = problem_.descend(theta_, free_);
  theta_ = found.theta;
  return with_limit(found.rss, held);
}

/// What the held fit becomes at the ends of its free parameters, where a descent creeps: a step (beside a
/// tested concentration the slope of the best curve goes beyond all bounds) and one level for all doses.
double ConstrainedHill::with_limit(double rss, double held) const {
  if (held_.nh) return rss;
  if (parameter_ == HillParameter::location) return std::min(rss, limits_.step_at(held));
  if (parameter_ != HillParameter::basal) return rss;
  const HillLimits limits(levels_, std::nullopt, held);
  return std::min({rss, limits.rest(), limits.step().rss});
}

double ConstrainedHill::search(double held) {
  const double followed = follow(held);
  const std::vector<double> locations =
      parameter_ == HillParameter::location ? std::vector<double>{held} : location_nodes(levels_, 2.0, 0.25);
  const std::vector<double> slopes =
      parameter_ == HillParameter::log_slope ? std::vector<double>{held} : slope_nodes(held_);
  double best = followed;
  for (const std::vector<double>& start : grid_starts(problem_, locations, slopes, 3)) {
    const SeparableMinimum found = problem_.descend(start, free_);
    if (found.rss < best) best = found.rss, theta_ = found.theta;
  }
  return best;
}

} // namespace chronodrome::pharmacology
