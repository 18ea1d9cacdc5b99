// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>
#include <cmath>
#include <fstream>
#include <vector>

#include "base/number_text.h"
#include "numerics/robust.h"
#include "response/plateau.h"

using namespace chronodrome;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;
using response::assess_plateau;

namespace {

/// y of exact_washin.csv, one value a second from 0 on: y = 200 - 90 (1 - exp(-t / 40 s)).
std::vector<double> washin() {
  std::ifstream file(std::string(CHRONODROME_SOURCE_DIR) + "/tests/reference/data/exact_washin.csv");
  REQUIRE(file.good());
  std::vector<double> values;
  std::string line;
  std::getline(file, line);
  while (std::getline(file, line))
    values.push_back(parse_number(line.substr(line.find(',') + 1)).value());
  return values;
}

double mean_of(const std::vector<double>& values, std::size_t first, std::size_t last) {
  return numerics::mean(std::span(values).subspan(first, last - first + 1));
}

} // namespace

TEST_CASE("the asymptote of an exponential approach follows from three windows", "[response]") {
  // Reference: exact_washin.json (closed form, evaluated with 50 digits). The file's values have 17 digits;
  // the differences of the means lose up to two of them: relative 1e-12.
  const auto y = washin();
  const std::array<double, 3> means = {mean_of(y, 60, 89), mean_of(y, 90, 119), mean_of(y, 120, 149)};
  CHECK_THAT(means[0], WithinRel(124.30504448445046, 1e-13));
  CHECK_THAT(means[1], WithinRel(116.75722454992673, 1e-13));
  CHECK_THAT(means[2], WithinRel(113.19188686674585, 1e-13));
  const auto plateau = assess_plateau(means, 1.0);
  CHECK_FALSE(plateau.steady);
  CHECK_THAT(plateau.drift, WithinRel(means[2] - means[1], 1e-15));
  REQUIRE(plateau.asymptote.has_value());
  CHECK_THAT(*plateau.asymptote, WithinRel(110.0, 1e-12));
  CHECK_THAT(*plateau.remaining, WithinRel(-3.1918868667458447, 1e-11));
}

TEST_CASE("the header's form of the extrapolation is the one computed", "[response]") {
  const auto y = washin();
  for (std::size_t end = 89; end + 1 < y.size(); end += 30) {
    const std::array<double, 3> m = {mean_of(y, end - 89, end - 60), mean_of(y, end - 59, end - 30),
                                     mean_of(y, end - 29, end)};
    const auto plateau = assess_plateau(m, 0.0);
    REQUIRE(plateau.asymptote.has_value());
    const double aitken = (m[0] * m[2] - m[1] * m[1]) / (m[0] + m[2] - 2.0 * m[1]);
    // The header's form cancels: near the plateau it keeps about seven digits.
    CHECK_THAT(*plateau.asymptote, WithinRel(aitken, 1e-7));
    CHECK_THAT(*plateau.asymptote, WithinRel(110.0, 1e-9));
  }
}

TEST_CASE("the rest of an exponential is estimated where it is small", "[response]") {
  // Closed form: rate 300 - 100 (1 - exp(-t / 20 s)); at 120 s 0.248 beats/min remain. Means of windows of
  // length w around t differ from the value at the window's end by a known factor (1 - e^(-w/tau)) tau / w.
  const auto rest = [](double t) { return 100.0 * std::exp(-t / 20.0); };
  CHECK_THAT(rest(120.0), WithinAbs(0.248, 5e-4));
  const auto window_mean = [&](double from, double to) {
    return 200.0 + 20.0 * (rest(from) - rest(to)) / (to - from);
  };
  const auto plateau = assess_plateau({window_mean(30, 60), window_mean(60, 90), window_mean(90, 120)}, 0.5);
  CHECK_FALSE(plateau.steady);
  CHECK_THAT(*plateau.asymptote, WithinRel(200.0, 1e-12));
  CHECK_THAT(*plateau.remaining, WithinRel(200.0 - window_mean(90, 120), 1e-9));
}

TEST_CASE("a drift within the tolerance is steady, at it as well", "[response]") {
  CHECK(assess_plateau({100, 100, 101}, 1.0).steady);
  CHECK_FALSE(assess_plateau({100, 100, 101.001}, 1.0).steady);
  CHECK(assess_plateau({100, 102, 101}, 1.0).steady);
  CHECK(assess_plateau({5, 5, 5}, 0.0).steady);
}

TEST_CASE("a value that does not slow down, or turns round, has no asymptote", "[response]") {
  CHECK_FALSE(assess_plateau({100, 110, 120}, 1.0).asymptote.has_value());
  CHECK_FALSE(assess_plateau({100, 110, 125}, 1.0).asymptote.has_value());
  CHECK_FALSE(assess_plateau({100, 110, 105}, 1.0).asymptote.has_value());
  CHECK_FALSE(assess_plateau({100, 110, 110.5}, 1.0).asymptote.has_value()); // steady: nothing remains to say
  CHECK(assess_plateau({100, 110, 115}, 1.0).asymptote == 120.0);
}
