// Chronodrome, GPL-3.0-or-later.
#include "numerics/robust.h"

#include <algorithm>
#include <cassert>
#include <cmath>
#include <cstddef>
#include <limits>
#include <vector>

namespace chronodrome::numerics {

namespace {

constexpr double kNaN = std::numeric_limits<double>::quiet_NaN();

double sum_of_squares_about(std::span<const double> values, double centre) {
  double sum = 0.0;
  for (const double v : values)
    sum += (v - centre) * (v - centre);
  return sum;
}

/// The median of values that may be reordered.
double median_in_place(std::vector<double>& values) {
  const std::size_t n = values.size();
  const auto middle = values.begin() + static_cast<std::ptrdiff_t>(n / 2);
  std::nth_element(values.begin(), middle, values.end());
  if (n % 2 == 1) return *middle;
  const double below = *std::max_element(values.begin(), middle);
  return below + (*middle - below) / 2.0;
}

} // namespace

double mean(std::span<const double> values) {
  if (values.empty()) return kNaN;
  const double n = static_cast<double>(values.size());
  double sum = 0.0;
  for (const double v : values)
    sum += v;
  const double rough = sum / n;
  double correction = 0.0;
  for (const double v : values)
    correction += v - rough;
  return rough + correction / n;
}

double sd(std::span<const double> values) {
  if (values.size() < 2) return kNaN;
  return std::sqrt(sum_of_squares_about(values, mean(values)) / static_cast<double>(values.size() - 1));
}

double median(std::span<const double> values) {
  if (values.empty()) return kNaN;
  std::vector<double> copy(values.begin(), values.end());
  return median_in_place(copy);
}

double mad_sd(std::span<const double> values) {
  if (values.empty()) return kNaN;
  std::vector<double> work(values.begin(), values.end());
  const double centre = median_in_place(work);
  for (double& v : work)
    v = std::abs(v - centre);
  return kMadToSd * median_in_place(work);
}

double quantile(std::span<const double> values, double p) {
  assert(p >= 0.0 && p <= 1.0);
  if (values.empty()) return kNaN;
  std::vector<double> work(values.begin(), values.end());
  const double h = static_cast<double>(work.size() - 1) * p;
  const auto below = std::min(static_cast<std::size_t>(h), work.size() - 1);
  const auto lower = work.begin() + static_cast<std::ptrdiff_t>(below);
  std::nth_element(work.begin(), lower, work.end());
  if (below + 1 == work.size()) return *lower;
  const double next = *std::min_element(lower + 1, work.end());
  return *lower + (h - static_cast<double>(below)) * (next - *lower);
}

double lag1_autocorrelation(std::span<const double> values) {
  if (values.size() < 2) return kNaN;
  const double centre = mean(values);
  const double spread = sum_of_squares_about(values, centre);
  if (!(spread > 0.0)) return 0.0;
  double sum = 0.0;
  for (std::size_t i = 0; i + 1 < values.size(); ++i)
    sum += (values[i] - centre) * (values[i + 1] - centre);
  return sum / spread;
}

double effective_n(std::span<const double> values) {
  const double n = static_cast<double>(values.size());
  if (values.size() < 2) return n;
  const double rho = std::clamp(lag1_autocorrelation(values), 0.0, 0.95);
  return n * (1.0 - rho) / (1.0 + rho);
}

double sem_of_correlated(std::span<const double> values) {
  if (values.size() < 2) return kNaN;
  return sd(values) / std::sqrt(effective_n(values));
}

} // namespace chronodrome::numerics
