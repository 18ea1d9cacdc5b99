// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include <cmath>
#include <numbers>

#include "numerics/roots.h"

using namespace chronodrome::numerics;
using Catch::Matchers::WithinAbs;

TEST_CASE("a bracketed root is found to the tolerance, from either end", "[numerics][roots]") {
  const auto cosine = [](double x) { return std::cos(x) - x; };
  // The fixed point of the cosine (OEIS A003957).
  constexpr double kFixedPoint = 0.7390851332151607;
  for (const double tolerance : {1e-3, 1e-9, 0.0}) {
    CAPTURE(tolerance);
    const Root up = bracketed_root(cosine, 0.0, 2.0, tolerance);
    const Root down = bracketed_root(cosine, 2.0, 0.0, tolerance);
    REQUIRE(up.found);
    REQUIRE(down.found);
    // The promise: tolerance and four roundings of x.
    CHECK_THAT(up.x, WithinAbs(kFixedPoint, tolerance + 9e-16));
    CHECK_THAT(down.x, WithinAbs(kFixedPoint, tolerance + 9e-16));
    CHECK(up.evaluations <= 12);
  }
}

TEST_CASE("flat, steep and jumping functions still give their root", "[numerics][roots]") {
  const Root flat = bracketed_root([](double x) { return std::pow(x - 1.0, 9); }, 0.0, 3.0, 1e-12);
  REQUIRE(flat.found);
  CHECK_THAT(flat.x, WithinAbs(1.0, 1e-3)); // rounding: |x - 1|^9 is below 1e-27 there
  const Root steep = bracketed_root([](double x) { return std::exp(50.0 * x) - 1.0; }, -1.0, 10.0, 1e-12);
  REQUIRE(steep.found);
  CHECK_THAT(steep.x, WithinAbs(0.0, 2e-12));
  const Root jump = bracketed_root([](double x) { return x < 0.3 ? -1.0 : 2.0; }, 0.0, 1.0, 1e-10);
  REQUIRE(jump.found);
  CHECK_THAT(jump.x, WithinAbs(0.3, 1e-10));
}

TEST_CASE("an end that is the root ends the search", "[numerics][roots]") {
  const auto line = [](double x) { return x - 2.0; };
  CHECK(bracketed_root(line, 2.0, 5.0, 1e-9).x == 2.0);
  CHECK(bracketed_root(line, 0.0, 2.0, 1e-9).x == 2.0);
  CHECK(bracketed_root(line, 2.0, 5.0, 1e-9).found);
}

TEST_CASE("without a sign change, or without numbers, no root is claimed", "[numerics][roots]") {
  CHECK_FALSE(bracketed_root([](double x) { return x * x + 1.0; }, -1.0, 1.0, 1e-9).found);
  CHECK_FALSE(bracketed_root([](double) { return std::nan(""); }, -1.0, 1.0, 1e-9).found);
  CHECK_FALSE(bracketed_root([](double x) { return x < 0.5 ? -1.0 : std::nan(""); }, 0.0, 1.0, 1e-9).found);
}

TEST_CASE("a minimum is found as closely as rounding allows", "[numerics][roots]") {
  const Minimum cosine = minimise([](double x) { return std::cos(x); }, 2.0, 5.0, 1e-9);
  // A minimum of a smooth function is flat: x is known to about the square root of 1e-16.
  CHECK_THAT(cosine.x, WithinAbs(std::numbers::pi, 3e-8));
  CHECK_THAT(cosine.value, WithinAbs(-1.0, 1e-15));
  CHECK(cosine.evaluations < 40);
  const Minimum kink = minimise([](double x) { return std::abs(x - 0.7); }, 0.0, 1.0, 1e-9);
  CHECK_THAT(kink.x, WithinAbs(0.7, 1e-8));
}

TEST_CASE("a minimum at the end of the range is approached, and holes are avoided", "[numerics][roots]") {
  const Minimum end = minimise([](double x) { return x; }, 1.0, 2.0, 1e-6);
  CHECK_THAT(end.x, WithinAbs(1.0, 2e-6));
  const Minimum hole =
      minimise([](double x) { return x > 1.5 ? std::nan("") : (x - 1.2) * (x - 1.2); }, 1.0, 2.0, 1e-9);
  CHECK_THAT(hole.x, WithinAbs(1.2, 1e-7));
}
