// Chronodrome, GPL-3.0-or-later.
#include "pharmacology/levels.h"

#include <algorithm>
#include <cmath>
#include <limits>
#include <numeric>

namespace chronodrome::pharmacology {

double Levels::mean_of(std::size_t from, std::size_t to) const {
  double sum = 0.0, total = 0.0;
  const double origin = mean[from]; // a large common offset costs no digits
  for (std::size_t i = from; i < to; ++i) {
    sum += weight[i] * (mean[i] - origin);
    total += weight[i];
  }
  return origin + sum / total;
}

double Levels::squares_about(double centre, std::size_t from, std::size_t to) const {
  double sum = 0.0;
  for (std::size_t i = from; i < to; ++i)
    sum += weight[i] * (mean[i] - centre) * (mean[i] - centre);
  return sum;
}

double Levels::range() const {
  const auto [low, high] = std::minmax_element(mean.begin(), mean.end());
  return *high - *low;
}

Levels gather(std::span<const CurvePoint> points) {
  std::vector<std::size_t> order(points.size());
  std::iota(order.begin(), order.end(), std::size_t{0});
  std::stable_sort(order.begin(), order.end(), [&](std::size_t a, std::size_t b) {
    return points[a].concentration < points[b].concentration;
  });
  Levels levels;
  levels.n_points = points.size();
  for (std::size_t from = 0; from < order.size();) {
    const double concentration = points[order[from]].concentration.value();
    std::size_t to = from;
    double total = 0.0, sum = 0.0;
    const double origin = points[order[from]].response;
    for (; to < order.size() && points[order[to]].concentration.value() == concentration; ++to) {
      const CurvePoint& point = points[order[to]];
      total += point.weight;
      sum += point.weight * (point.response - origin);
      levels.sum_squares += point.weight * point.response * point.response;
    }
    const double centre = origin + sum / total;
    for (std::size_t i = from; i < to; ++i) {
      const CurvePoint& point = points[order[i]];
      levels.pure_error += point.weight * (point.response - centre) * (point.response - centre);
    }
    levels.pure_error_df += static_cast<int>(to - from) - 1;
    levels.concentration.push_back(concentration);
    levels.log10_concentration.push_back(concentration > 0.0 ? std::log10(concentration)
                                                             : -std::numeric_limits<double>::infinity());
    levels.mean.push_back(centre);
    levels.weight.push_back(total);
    from = to;
  }
  return levels;
}

} // namespace chronodrome::pharmacology
