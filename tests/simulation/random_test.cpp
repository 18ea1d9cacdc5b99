// Chronodrome, GPL-3.0-or-later.
#include "simulation/random.h"

#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <vector>

using namespace chronodrome;
using namespace chronodrome::simulation;
using Catch::Matchers::WithinAbs;

TEST_CASE("normal numbers follow the normal distribution to the tails", "[simulation][random]") {
  Random random(11, "test");
  constexpr std::size_t kCount = 2'000'000;
  std::vector<double> draws(kCount);
  double sum = 0, squares = 0, cubes = 0, fourths = 0;
  for (double& draw : draws) {
    draw = random.normal();
    sum += draw;
    squares += draw * draw;
    cubes += draw * draw * draw;
    fourths += draw * draw * draw * draw;
  }
  const double n = static_cast<double>(kCount);
  // Five standard errors of the moments: 1, sqrt 2, sqrt 15, sqrt 96 over sqrt n.
  CHECK_THAT(sum / n, WithinAbs(0.0, 5.0 / std::sqrt(n)));
  CHECK_THAT(squares / n, WithinAbs(1.0, 5.0 * std::sqrt(2.0 / n)));
  CHECK_THAT(cubes / n, WithinAbs(0.0, 5.0 * std::sqrt(15.0 / n)));
  CHECK_THAT(fourths / n, WithinAbs(3.0, 5.0 * std::sqrt(96.0 / n)));
  std::sort(draws.begin(), draws.end());
  double distance = 0;
  for (std::size_t i = 0; i < kCount; ++i) {
    const double p = 0.5 * std::erfc(-draws[i] / std::sqrt(2.0));
    distance = std::max(distance, std::abs(p - (static_cast<double>(i) + 0.5) / n));
  }
  CHECK(distance < 1.95 / std::sqrt(n)); // Kolmogorov's statistic at p = 0.001
  // Beyond 3.6542 the base layer hands over to the tail: 2 n (1 - Phi) = 515 expected, five SD of Poisson.
  const auto beyond =
      std::count_if(draws.begin(), draws.end(), [](double x) { return std::abs(x) > 3.6541528853610088; });
  const double expected = n * std::erfc(3.6541528853610088 / std::sqrt(2.0));
  CHECK_THAT(static_cast<double>(beyond), WithinAbs(expected, 5.0 * std::sqrt(expected)));
}

TEST_CASE("a stream is fixed by its seed and its name", "[simulation][random]") {
  Random a(5, "RA/white"), b(5, "RA/white"), other_stream(5, "RV/white"), other_seed(6, "RA/white");
  bool streams_differ = false, seeds_differ = false;
  for (int i = 0; i < 100; ++i) {
    const double x = a.normal();
    CHECK(x == b.normal());
    streams_differ = streams_differ || x != other_stream.normal();
    seeds_differ = seeds_differ || x != other_seed.normal();
  }
  CHECK(streams_differ);
  CHECK(seeds_differ);
}

TEST_CASE("uniform numbers fill their range evenly", "[simulation][random]") {
  Random random(3, "u");
  std::vector<int> bins(10, 0);
  for (int i = 0; i < 100'000; ++i) {
    const double x = random.uniform(-2.0, 3.0);
    REQUIRE((x >= -2.0 && x < 3.0));
    ++bins[static_cast<std::size_t>((x + 2.0) * 2.0)];
  }
  for (const int bin : bins)
    CHECK(std::abs(bin - 10'000) < 500); // five SD of a binomial count: 5 sqrt(1e5 * 0.1 * 0.9) = 474
}

TEST_CASE("a slow fluctuation has its size and its time constant", "[simulation][random]") {
  Fluctuation fluctuation(21, "rate", 2.0, Seconds(10.0));
  std::vector<double> values;
  for (int i = 0; i < 400'000; ++i)
    values.push_back(fluctuation.at(Seconds(0.25 * i)));
  double square = 0, lagged = 0;
  constexpr std::size_t kLag = 40; // 10 s
  for (std::size_t i = 0; i + kLag < values.size(); ++i) {
    square += values[i] * values[i];
    lagged += values[i] * values[i + kLag];
  }
  const double variance = square / static_cast<double>(values.size() - kLag);
  // 100000 s hold about 100000 / 20 = 5000 independent values: five SD of their variance are 5 sqrt(2 /
  // 5000).
  CHECK_THAT(variance, WithinAbs(4.0, 4.0 * 5.0 * std::sqrt(2.0 / 5000.0)));
  CHECK_THAT(lagged / square, WithinAbs(std::exp(-1.0), 0.06)); // five SD: 5 / sqrt(5000)
  Fluctuation none(21, "rate", 0.0, Seconds(10.0));
  CHECK(none.at(Seconds(5.0)) == 0.0);
}
