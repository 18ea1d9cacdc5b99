// Chronodrome, GPL-3.0-or-later.
//
// Symbols: x log10 concentration, L log10 EC50, n = nh, s asymmetry, z = n ln(10) (x - L), g logistic of z.
//   dg/dz = g (1 - g),  dz/dL = -n ln 10,  dz/d(ln n) = z.
#include "pharmacology/shape.h"

#include <cmath>
#include <limits>
#include <numbers>

namespace chronodrome::pharmacology {

namespace {

constexpr double kLn10 = std::numbers::ln10;

bool is_control(double x) {
  return x == -std::numeric_limits<double>::infinity();
}

void hill(double location, double log_slope, std::span<const double> x, double* value, double* complement,
          double* by_location, double* by_log_slope) {
  const double steepness = std::exp(log_slope) * kLn10;
  for (std::size_t i = 0; i < x.size(); ++i) {
    const bool control = is_control(x[i]);
    const double z = control ? 0.0 : steepness * (x[i] - location);
    const double small = std::exp(-std::abs(z));
    const double near_zero = small / (1.0 + small); // the smaller of g and 1 - g, with all its digits
    const double near_one = 1.0 / (1.0 + small);
    value[i] = control ? 0.0 : (z >= 0.0 ? near_one : near_zero);
    complement[i] = control ? 1.0 : (z >= 0.0 ? near_zero : near_one);
    if (by_location) {
      const double density = control ? 0.0 : near_zero * near_one;
      by_location[i] = -steepness * density;
      by_log_slope[i] = z * density;
    }
  }
}

} // namespace

double logistic(double z) {
  const double small = std::exp(-std::abs(z));
  return z >= 0.0 ? 1.0 / (1.0 + small) : small / (1.0 + small);
}

void HillShape::evaluate(std::span<const double> theta, std::span<const double> x, double* value,
                         double* slope) const {
  hill(theta[0], theta[1], x, value, value + x.size(), slope, slope ? slope + x.size() : nullptr);
}

void RichardsShape::evaluate(std::span<const double> theta, std::span<const double> x, double* value,
                             double* slope) const {
  const std::size_t n = x.size();
  const double steepness = std::exp(theta[1]) * kLn10;
  const double s = std::exp(theta[2]);
  // ln(2^(1/s) - 1), which moves the location so that L stays the EC50, and its derivative by ln s.
  const double exponent = std::numbers::ln2 / s;
  const double shift = std::log(std::expm1(exponent));
  const double shift_by_log_s = -exponent / -std::expm1(-exponent);
  for (std::size_t i = 0; i < n; ++i) {
    const bool control = is_control(x[i]);
    const double u = control ? 0.0 : steepness * (x[i] - theta[0]);
    const double z = u - shift;
    const double log_one_plus = z >= 0.0 ? std::log1p(std::exp(-z)) : -z + std::log1p(std::exp(z));
    const double h = control ? 0.0 : std::exp(-s * log_one_plus);
    value[i] = h;
    value[n + i] = control ? 1.0 : -std::expm1(-s * log_one_plus);
    if (slope) {
      const double by_z = h * s * logistic(-z);
      slope[i] = -steepness * by_z;
      slope[n + i] = u * by_z;
      slope[2 * n + i] = -s * log_one_plus * h - by_z * shift_by_log_s;
    }
  }
}

void TwoHillShape::evaluate(std::span<const double> theta, std::span<const double> x, double* value,
                            double* slope) const {
  const std::size_t n = x.size();
  if (slope) {
    for (std::size_t i = 0; i < 8 * n; ++i)
      slope[i] = 0.0;
  }
  // Rows 0 and 1 of the first function, rows 4 + 2 and 4 + 3 of the second.
  hill(theta[0], theta[1], x, value, value + 2 * n, slope, slope ? slope + n : nullptr);
  hill(theta[2], theta[3], x, value + n, value + 3 * n, slope ? slope + 6 * n : nullptr,
       slope ? slope + 7 * n : nullptr);
}

} // namespace chronodrome::pharmacology
