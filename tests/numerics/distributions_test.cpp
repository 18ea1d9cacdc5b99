// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include <cmath>
#include <limits>
#include <numbers>

#include "numerics/distributions.h"

using namespace chronodrome::numerics;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;

// Closed forms, a few roundings each.
constexpr double kClose = 1e-13;

TEST_CASE("student's t has closed forms for one and two degrees of freedom", "[numerics][distributions]") {
  // Source: Abramowitz & Stegun 26.7: one degree is the Cauchy distribution.
  for (const double t : {-40.0, -3.0, -0.5, 0.0, 0.7, 12.0}) {
    CAPTURE(t);
    CHECK_THAT(student_t_upper_tail(t, 1.0), WithinRel(std::atan2(1.0, t) / std::numbers::pi, kClose));
    CHECK_THAT(student_t_cdf(t, 2.0) + student_t_upper_tail(t, 2.0), WithinRel(1.0, kClose));
  }
  CHECK_THAT(student_t_cdf(std::sqrt(2.0), 2.0), WithinRel(0.5 + std::sqrt(0.5) / 2.0, kClose));
}

TEST_CASE("a squared t is an F with one degree of freedom", "[numerics][distributions]") {
  for (const double t : {0.3, 2.0, 15.0, 300.0}) {
    CAPTURE(t);
    CHECK_THAT(f_upper_tail(t * t, 1.0, 9.0), WithinRel(student_t_two_sided(t, 9.0), 1e-12));
  }
}

TEST_CASE("quantiles undo the cumulative distribution in both tails", "[numerics][distributions]") {
  for (const double p : {1e-12, 1e-4, 0.025, 0.5, 0.8, 0.975}) {
    CAPTURE(p);
    CHECK_THAT(normal_cdf(normal_quantile(p)), WithinRel(p, kClose));
    CHECK_THAT(student_t_cdf(student_t_quantile(p, 6.0), 6.0), WithinRel(p, 1e-12));
    CHECK_THAT(f_upper_tail(f_quantile(p, 3.0, 6.0), 3.0, 6.0), WithinRel(1.0 - p, 1e-12));
  }
  CHECK(normal_quantile(0.0) == -std::numeric_limits<double>::infinity());
  CHECK(student_t_quantile(1.0, 4.0) == std::numeric_limits<double>::infinity());
  CHECK(f_quantile(0.0, 2.0, 4.0) == 0.0);
}

TEST_CASE("the normal tail keeps its logarithm and slope where the probability is zero",
          "[numerics][distributions]") {
  // Source: Mills' ratio, Abramowitz & Stegun 26.2.12: P = density / x (1 - 1/x^2 + 3/x^4 - 15/x^6 ...).
  const double x = 100.0;
  const double series = 1.0 - 1.0 / (x * x) + 3.0 / std::pow(x, 4) - 15.0 / std::pow(x, 6);
  const double expected = -x * x / 2.0 - std::log(x * std::sqrt(2.0 * std::numbers::pi)) + std::log(series);
  CHECK_THAT(log_normal_cdf(-x), WithinRel(expected, kClose));
  CHECK_THAT(normal_hazard_below(-x), WithinRel(x / series, 1e-13));
  // Both branches meet at -12.
  CHECK_THAT(log_normal_cdf(-12.0 - 1e-9), WithinRel(log_normal_cdf(-12.0 + 1e-9), 1e-9));
  CHECK_THAT(normal_hazard_below(-12.0 - 1e-9), WithinRel(normal_hazard_below(-12.0 + 1e-9), 1e-9));
  CHECK_THAT(log_normal_cdf(0.0), WithinRel(-std::numbers::ln2, kClose));
  CHECK_THAT(log_normal_cdf(9.0), WithinRel(-normal_upper_tail(9.0), 1e-12));
  // The slope is the derivative of the logarithm: central difference, error of order h^2.
  for (const double at : {-30.0, -5.0, 0.0, 2.0}) {
    CAPTURE(at);
    const double slope = (log_normal_cdf(at + 1e-5) - log_normal_cdf(at - 1e-5)) / 2e-5;
    CHECK_THAT(normal_hazard_below(at), WithinRel(slope, 1e-6));
  }
}

TEST_CASE("arguments outside the domain give no number", "[numerics][distributions]") {
  CHECK(std::isnan(student_t_cdf(1.0, 0.0)));
  CHECK(std::isnan(student_t_quantile(1.5, 3.0)));
  CHECK(std::isnan(student_t_quantile(0.5, -1.0)));
  CHECK(std::isnan(f_upper_tail(1.0, 1.0, std::nan(""))));
  CHECK(std::isnan(normal_quantile(std::nan(""))));
  CHECK(std::isnan(chi_squared_quantile(0.5, 0.0)));
  CHECK(f_upper_tail(-1.0, 2.0, 3.0) == 1.0);
  CHECK(f_upper_tail(std::numeric_limits<double>::infinity(), 2.0, 3.0) == 0.0);
}
