// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include <cmath>
#include <vector>

#include "numerics/robust.h"

using namespace chronodrome::numerics;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;

// Sums of ten numbers: a few roundings of 1.1e-16 each.
constexpr double kRounding = 1e-14;

TEST_CASE("mean, standard deviation and median of a small sample", "[numerics][robust]") {
  const std::vector<double> values{2.0, 4.0, 4.0, 4.0, 5.0, 5.0, 7.0, 9.0};
  CHECK_THAT(mean(values), WithinRel(5.0, kRounding));
  CHECK_THAT(sd(values), WithinRel(std::sqrt(32.0 / 7.0), kRounding)); // squares about 5 sum to 32
  CHECK(median(values) == 4.5);
  CHECK(median(std::vector<double>{3.0, 1.0, 2.0}) == 2.0);
}

TEST_CASE("a large common offset costs the spread no digits", "[numerics][robust]") {
  // Source: NIST StRD NumAcc3 (univariate summary statistics; from memory): mean 1000000.2, SD 0.1, lag-1
  // autocorrelation -0.999, for 1001 values: 1000000.2, then .1 and .3 in turn.
  std::vector<double> values{1000000.2};
  for (int i = 0; i < 500; ++i) {
    values.push_back(1000000.1);
    values.push_back(1000000.3);
  }
  CHECK_THAT(mean(values), WithinRel(1000000.2, kRounding));
  // The decimal fractions are stored with a rounding of 6e-11 absolute: relative 1e-9 of the spread.
  CHECK_THAT(sd(values), WithinRel(0.1, 1e-9));
  CHECK_THAT(lag1_autocorrelation(values), WithinRel(-0.999, 1e-9));
}

TEST_CASE("the scaled median absolute deviation ignores one wild value", "[numerics][robust]") {
  // Deviations from the median 6 are 5 4 3 2 1 0 1 2 3 4 994: their median is 3.
  const std::vector<double> values{1.0, 2.0, 3.0, 4.0, 5.0, 6.0, 7.0, 8.0, 9.0, 10.0, 1000.0};
  CHECK_THAT(mad_sd(values), WithinRel(3.0 * 1.482602218505602, kRounding));
  CHECK(mad_sd(std::vector<double>{7.0}) == 0.0);
}

TEST_CASE("quantiles interpolate between order statistics", "[numerics][robust]") {
  // Definition 7 by hand: h = (n - 1) p. For 1 2 3 4 10 at p = 0.9, h = 3.6: 4 + 0.6 x 6.
  const std::vector<double> values{10.0, 1.0, 3.0, 2.0, 4.0};
  CHECK_THAT(quantile(values, 0.9), WithinRel(7.6, kRounding));
  CHECK(quantile(values, 0.0) == 1.0);
  CHECK(quantile(values, 1.0) == 10.0);
  CHECK(quantile(values, 0.5) == median(values));
  CHECK(quantile(std::vector<double>{3.0}, 0.3) == 3.0);
}

TEST_CASE("correlated values count for fewer, anticorrelated ones for no more", "[numerics][robust]") {
  // 1 2 3 4 5 about 3: (-2)(-1) + (-1)(0) + 0(1) + 1(2) = 4 over 10.
  const std::vector<double> rising{1.0, 2.0, 3.0, 4.0, 5.0};
  CHECK_THAT(lag1_autocorrelation(rising), WithinRel(0.4, kRounding));
  CHECK_THAT(effective_n(rising), WithinRel(5.0 * 0.6 / 1.4, kRounding));
  CHECK_THAT(sem_of_correlated(rising), WithinRel(std::sqrt(2.5 / (5.0 * 0.6 / 1.4)), kRounding));

  const std::vector<double> alternating{1.0, -1.0, 1.0, -1.0, 1.0, -1.0};
  CHECK(lag1_autocorrelation(alternating) < 0.0);
  CHECK(effective_n(alternating) == 6.0);

  std::vector<double> ramp(2000);
  for (std::size_t i = 0; i < ramp.size(); ++i)
    ramp[i] = static_cast<double>(i);
  CHECK_THAT(effective_n(ramp), WithinRel(2000.0 * 0.05 / 1.95, kRounding)); // correlation clipped at 0.95
}

TEST_CASE("samples too short for a statistic give no number", "[numerics][robust]") {
  const std::vector<double> none;
  const std::vector<double> one{3.0};
  CHECK(std::isnan(mean(none)));
  CHECK(std::isnan(sd(one)));
  CHECK(std::isnan(median(none)));
  CHECK(std::isnan(mad_sd(none)));
  CHECK(std::isnan(quantile(none, 0.5)));
  CHECK(std::isnan(lag1_autocorrelation(one)));
  CHECK(effective_n(none) == 0.0);
  CHECK(effective_n(one) == 1.0);
  CHECK(std::isnan(sem_of_correlated(one)));
  CHECK(mean(one) == 3.0);
  CHECK(lag1_autocorrelation(std::vector<double>{2.0, 2.0, 2.0}) == 0.0);
  CHECK(sem_of_correlated(std::vector<double>{2.0, 2.0, 2.0}) == 0.0);
}
