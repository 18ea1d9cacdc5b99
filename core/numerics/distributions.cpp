// Chronodrome, GPL-3.0-or-later.
#include "numerics/distributions.h"

#include <cmath>
#include <limits>
#include <numbers>

#include <boost/math/distributions/chi_squared.hpp>
#include <boost/math/distributions/fisher_f.hpp>
#include <boost/math/distributions/normal.hpp>
#include <boost/math/distributions/students_t.hpp>

namespace chronodrome::numerics {

namespace {

namespace bm = boost::math;
namespace bp = boost::math::policies;

// NaN and infinities instead of exceptions and errno; no promotion to long double, whose width differs
// between machines.
using Quiet = bp::policy<bp::domain_error<bp::ignore_error>, bp::pole_error<bp::ignore_error>,
                         bp::overflow_error<bp::ignore_error>, bp::underflow_error<bp::ignore_error>,
                         bp::evaluation_error<bp::ignore_error>, bp::rounding_error<bp::ignore_error>,
                         bp::promote_double<false>>;
using Normal = bm::normal_distribution<double, Quiet>;
using StudentT = bm::students_t_distribution<double, Quiet>;
using FisherF = bm::fisher_f_distribution<double, Quiet>;
using ChiSquared = bm::chi_squared_distribution<double, Quiet>;

constexpr double kNaN = std::numeric_limits<double>::quiet_NaN();
constexpr double kInfinity = std::numeric_limits<double>::infinity();

bool positive(double df) {
  return df > 0.0 && std::isfinite(df);
}

/// The quantile with its ends: `lowest` at p = 0, plus infinity at p = 1. Above one half the upper tail is
/// inverted, where 1 - p is exact.
template <class Distribution>
double quantile_of(const Distribution& distribution, double p, double lowest) {
  if (!(p >= 0.0 && p <= 1.0)) return kNaN;
  if (p == 0.0) return lowest;
  if (p == 1.0) return kInfinity;
  if (p > 0.5) return bm::quantile(bm::complement(distribution, 1.0 - p));
  return bm::quantile(distribution, p);
}

} // namespace

double normal_cdf(double x) {
  return std::erfc(-x / std::numbers::sqrt2) / 2.0;
}

double normal_upper_tail(double x) {
  return std::erfc(x / std::numbers::sqrt2) / 2.0;
}

double normal_quantile(double p) {
  return quantile_of(Normal(), p, -kInfinity);
}

double normal_hazard_below(double x) {
  // Deep in the tail both density and probability underflow; the continued fraction of Laplace,
  // a + 1/(a + 2/(a + 3/(a + ...))) with a = -x, gives their ratio directly.
  if (x > -12.0) {
    const double density = std::exp(-x * x / 2.0) / std::sqrt(2.0 * std::numbers::pi);
    return density / normal_cdf(x);
  }
  const double a = -x;
  double tail = a;
  for (int k = 40; k >= 1; --k)
    tail = a + static_cast<double>(k) / tail;
  return tail;
}

double log_normal_cdf(double x) {
  if (x > -12.0) {
    return x > 0.0 ? std::log1p(-normal_upper_tail(x)) : std::log(normal_cdf(x));
  }
  return -x * x / 2.0 - std::log(2.0 * std::numbers::pi) / 2.0 - std::log(normal_hazard_below(x));
}

double student_t_cdf(double t, double df) {
  if (!positive(df) || std::isnan(t)) return kNaN;
  if (std::isinf(t)) return t > 0.0 ? 1.0 : 0.0;
  return bm::cdf(StudentT(df), t);
}

double student_t_upper_tail(double t, double df) {
  return student_t_cdf(-t, df);
}

double student_t_two_sided(double t, double df) {
  return 2.0 * student_t_cdf(-std::abs(t), df);
}

double student_t_quantile(double p, double df) {
  if (!positive(df)) return kNaN;
  return quantile_of(StudentT(df), p, -kInfinity);
}

double f_upper_tail(double f, double df1, double df2) {
  if (!positive(df1) || !positive(df2) || std::isnan(f)) return kNaN;
  if (f <= 0.0) return 1.0;
  if (std::isinf(f)) return 0.0;
  return bm::cdf(bm::complement(FisherF(df1, df2), f));
}

double f_quantile(double p, double df1, double df2) {
  if (!positive(df1) || !positive(df2)) return kNaN;
  return quantile_of(FisherF(df1, df2), p, 0.0);
}

double chi_squared_upper_tail(double x, double df) {
  if (!positive(df) || std::isnan(x)) return kNaN;
  if (x <= 0.0) return 1.0;
  if (std::isinf(x)) return 0.0;
  return bm::cdf(bm::complement(ChiSquared(df), x));
}

double chi_squared_quantile(double p, double df) {
  if (!positive(df)) return kNaN;
  return quantile_of(ChiSquared(df), p, 0.0);
}

} // namespace chronodrome::numerics
