// Chronodrome, GPL-3.0-or-later.
#include "conduction/delay_statistics.h"

#include <catch2/catch.hpp>
#include <cmath>

#include "support/electrogram_waves.h"

using namespace chronodrome;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;
using conduction::statistics_of;

TEST_CASE("eight delays have the mean, scatter and interval of the textbook", "[delay_statistics]") {
  // 60,61,59,62,58,60,61,59 ms: SD 1.3093, t(0.975, 7) = 2.36462, SEM 0.46291, interval +-1.0946 without
  // correlation. Their lag-1 autocorrelation is negative, which may not narrow the interval: n stays 8.
  const std::vector<double> delays = {0.060, 0.061, 0.059, 0.062, 0.058, 0.060, 0.061, 0.059};
  const auto s = statistics_of(delays);
  CHECK(s.n == 8);
  CHECK_THAT(s.n_independent, WithinAbs(8.0, 1e-12));
  CHECK_THAT(in_milliseconds(s.mean), WithinAbs(60.0, 1e-9));
  CHECK_THAT(in_milliseconds(s.sd), WithinAbs(1.3093, 5e-5));
  CHECK_THAT(in_milliseconds(s.sem), WithinAbs(0.46291, 5e-6));
  CHECK_THAT(in_milliseconds(s.half_width), WithinAbs(1.0946, 5e-5));
  CHECK_THAT(in_milliseconds(s.mad_sd), WithinAbs(1.4826, 5e-5));
  CHECK_THAT(in_milliseconds(s.median), WithinAbs(60.0, 1e-9));
  CHECK_THAT(in_milliseconds(s.shortest), WithinAbs(58.0, 1e-9));
  CHECK_THAT(in_milliseconds(s.longest), WithinAbs(62.0, 1e-9));
}

TEST_CASE("correlated delays count for fewer", "[delay_statistics]") {
  // First-order autoregression with 0.8: n (1 - 0.8) / (1 + 0.8) = n / 9.
  test_support::NormalNoise noise(4);
  std::vector<double> delays;
  double x = 0.0;
  for (int i = 0; i < 20000; ++i) {
    x = 0.8 * x + noise.next();
    delays.push_back(0.06 + 1e-3 * x);
  }
  // The autocorrelation of 20000 values has an SD of sqrt((1 - 0.64) / 20000) = 0.004, 4 % of n.
  CHECK_THAT(statistics_of(delays).n_independent, WithinRel(20000.0 / 9.0, 0.1));
}

TEST_CASE("none, one and two delays give what they can", "[delay_statistics]") {
  CHECK(statistics_of({}).n == 0);
  const std::vector<double> one = {0.05};
  CHECK(statistics_of(one).n == 1);
  CHECK(statistics_of(one).sd == Seconds(0.0));
  CHECK(statistics_of(one).half_width == Seconds(0.0));
  const std::vector<double> two = {0.05, 0.06};
  CHECK(statistics_of(two).half_width > Seconds(0.0));
}

TEST_CASE("delays that count for hardly more than one have no interval", "[delay_statistics]") {
  // One slow wave over ten beats: lag-1 autocorrelation about cos(36 degrees) = 0.81, so ten count for 10 x
  // 0.19 / 1.81 = 1.05. Student's t with a twentieth of a degree of freedom exceeds any clock.
  std::vector<double> delays;
  for (int i = 0; i < 10; ++i)
    delays.push_back(0.06 + 1e-3 * std::sin(2.0 * 3.14159265358979 * i / 10.0));
  const auto wave = statistics_of(delays);
  CHECK(wave.n_independent > 1.0);
  CHECK(wave.n_independent < 1.5);
  CHECK(wave.half_width == Seconds(0.0));
  CHECK(wave.sem > Seconds(0.0));
  // A ramp of ten counts for more than 1.5 and keeps its interval.
  for (int i = 0; i < 10; ++i)
    delays[static_cast<std::size_t>(i)] = 0.06 + 1e-3 * i;
  const auto ramp = statistics_of(delays);
  CHECK(ramp.n_independent > 1.5);
  CHECK(ramp.half_width > Seconds(0.0));
  CHECK(ramp.half_width < Seconds(1.0));
}
