// Chronodrome, GPL-3.0-or-later.
#include "conduction/velocity.h"

#include <catch2/catch.hpp>

using namespace chronodrome;
using Catch::Matchers::WithinAbs;

TEST_CASE("velocity along five electrodes is the regression of time on distance", "[velocity]") {
  // Linear regression on paper (and scipy.stats.linregress, theilslopes): slope 1.495 ms/mm, SE 0.0206155,
  // intercept 0.06 ms, residual SD 0.13038 ms, t(0.975, 3) = 3.18245.
  const std::vector<double> d = {0.0, 2e-3, 4e-3, 6e-3, 8e-3};
  const std::vector<double> t = {0.0, 3.1e-3, 6.0e-3, 9.2e-3, 11.9e-3};
  const auto fit = conduction::fit_line(d, t);
  REQUIRE(fit.ok());
  CHECK_THAT(fit->slowness, WithinAbs(1.495, 1e-9));
  CHECK_THAT(fit->slowness_se, WithinAbs(0.0206155, 5e-8));
  CHECK_THAT(in_milliseconds(fit->intercept), WithinAbs(0.06, 1e-9));
  CHECK_THAT(in_milliseconds(fit->residual_sd), WithinAbs(0.13038, 5e-6));
  CHECK_THAT(fit->r_squared, WithinAbs(0.99943, 5e-6));
  CHECK_THAT(fit->velocity.velocity.value(), WithinAbs(0.66890, 5e-6));
  CHECK_THAT(fit->velocity.low.value().value(), WithinAbs(0.64078, 5e-6));
  CHECK_THAT(fit->velocity.high.value().value(), WithinAbs(0.69960, 5e-6));
  CHECK_THAT(fit->velocity_se.value(), WithinAbs(0.009224, 5e-7));
  CHECK_THAT(fit->robust_velocity.value(), WithinAbs(0.66946, 5e-6));
}

TEST_CASE("velocity over a distance carries the interval of the delay", "[velocity]") {
  // 2 mm at 0.6 m/s take 3.333 ms.
  const auto v = conduction::velocity_between(millimetres(2.0), milliseconds(10.0 / 3.0), milliseconds(0.3));
  REQUIRE(v.ok());
  CHECK_THAT(v->velocity.value(), WithinAbs(0.6, 1e-9));
  CHECK_THAT(v->low.value().value(), WithinAbs(2.0 / (10.0 / 3.0 + 0.3), 1e-9));
  CHECK_THAT(v->high.value().value(), WithinAbs(2.0 / (10.0 / 3.0 - 0.3), 1e-9));
  CHECK(v->is_resolved);
}

TEST_CASE("a delay that cannot be told from zero gives a lower bound only", "[velocity]") {
  const auto v = conduction::velocity_between(millimetres(2.0), milliseconds(0.2), milliseconds(0.5));
  REQUIRE(v.ok());
  CHECK_FALSE(v->is_resolved);
  CHECK_FALSE(v->high);
  CHECK_THAT(v->low.value().value(), WithinAbs(2.0 / 0.7, 1e-9));
}

TEST_CASE("what has no velocity is refused", "[velocity]") {
  CHECK_FALSE(conduction::velocity_between(Metres(0.0), milliseconds(1.0), Seconds(0.0)).ok());
  CHECK_FALSE(conduction::velocity_between(millimetres(2.0), Seconds(0.0), Seconds(0.0)).ok());
  const std::vector<double> two = {0.0, 1.0};
  CHECK_FALSE(conduction::fit_line(two, two).ok());
  const std::vector<double> same = {1.0, 1.0, 1.0};
  const std::vector<double> rising = {0.0, 1.0, 2.0};
  CHECK_FALSE(conduction::fit_line(same, rising).ok());
  CHECK_FALSE(conduction::fit_line(rising, same).ok());
  CHECK_FALSE(conduction::fit_line(two, rising).ok());
}
