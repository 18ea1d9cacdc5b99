// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include <cmath>
#include <ctime>
#include <numbers>
#include <random>
#include <vector>

#include "pharmacology/fit.h"
#include "pharmacology/shape.h"

using namespace chronodrome;
using namespace chronodrome::pharmacology;

namespace {

/// Normal deviates of our own making (Box & Muller 1958), the same on every machine.
class Normal {
public:
  explicit Normal(std::uint64_t seed) : engine_(seed) {}
  double operator()() {
    const double u = uniform(), v = uniform();
    return std::sqrt(-2.0 * std::log(u)) * std::cos(2.0 * std::numbers::pi * v);
  }

private:
  double uniform() { return (static_cast<double>(engine_() >> 11U) + 0.5) * 0x1.0p-53; }
  std::mt19937_64 engine_;
};

struct Design {
  std::vector<double> concentrations;
  double basal, emax, pec50, nh, scatter;
};

std::vector<CurvePoint> series(const Design& design, Normal& noise) {
  std::vector<CurvePoint> points;
  for (const double c : design.concentrations) {
    const double g =
        c == 0.0 ? 0.0 : logistic(design.nh * std::numbers::ln10 * (std::log10(c) + design.pec50));
    points.push_back(
        {Molar(c), design.basal + (design.emax - design.basal) * g + design.scatter * noise(), 1.0});
  }
  return points;
}

bool covers(const Estimate& interval, double truth) {
  return (!interval.ci_low || *interval.ci_low <= truth) && (!interval.ci_high || *interval.ci_high >= truth);
}

struct Coverage {
  double pec50 = 0.0, basal = 0.0, emax = 0.0, nh = 0.0, effect = 0.0;
  int open = 0, no_response = 0;
};

Coverage simulate(const Design& design, int count, std::uint64_t seed) {
  Normal noise(seed);
  Coverage coverage;
  const double each = 1.0 / count;
  for (int i = 0; i < count; ++i) {
    const CurveFit fit = fit_curve(series(design, noise), Model::hill);
    if (fit.has_flag(flags::kNoResponse)) ++coverage.no_response;
    if (fit.has_flag(flags::kUpperPlateauOpen)) ++coverage.open;
    coverage.pec50 += covers(*fit.find("pec50"), design.pec50) ? each : 0.0;
    coverage.basal += covers(*fit.find("basal"), design.basal) ? each : 0.0;
    coverage.emax += covers(*fit.find("emax"), design.emax) ? each : 0.0;
    coverage.nh += covers(*fit.find("nh"), design.nh) ? each : 0.0;
    coverage.effect += covers(*fit.find("effect_max"), design.emax - design.basal) ? each : 0.0;
  }
  return coverage;
}

const std::vector<double> kFull{0, 1e-9, 3e-9, 1e-8, 3e-8, 1e-7, 3e-7, 1e-6, 3e-6, 1e-5};
const std::vector<double> kShort{0, 1e-9, 3e-9, 1e-8, 3e-8, 1e-7, 3e-7};

} // namespace

TEST_CASE("95 % profile intervals of full curves hold the truth in 95 % of series", "[.long][pharmacology]") {
  // 1500 series: the binomial standard error is 0.0056, so 0.935 to 0.965 is 0.95 +- 2.7 of them.
  const double scatter = GENERATE(4.0, 20.0);
  const Coverage coverage = simulate({kFull, 278.0, 92.0, 6.75, 1.15, scatter}, 1500, 2026);
  CAPTURE(scatter, coverage.pec50, coverage.basal, coverage.emax, coverage.nh, coverage.effect,
          coverage.open);
  WARN("scatter " << scatter << ": coverage pec50 " << coverage.pec50 << " basal " << coverage.basal
                  << " emax " << coverage.emax << " nh " << coverage.nh << " effect " << coverage.effect);
  CHECK(coverage.pec50 >= 0.935);
  CHECK(coverage.pec50 <= 0.965);
  // The other intervals are as approximate as their curvature makes them: within three percent.
  for (const double one : {coverage.basal, coverage.emax, coverage.nh, coverage.effect}) {
    CHECK(one >= 0.92);
    CHECK(one <= 0.975);
  }
  CHECK(coverage.no_response == 0);
}

TEST_CASE("without a plateau the profile interval still holds the truth", "[.long][pharmacology]") {
  // An independent simulation of this design (other generator, other code, 1500 series, 5 % of them not
  // fitted and left out) measured 0.964 for the profile and 0.892 for standard-error intervals. All series
  // count here, so anything between the nominal 0.95 and 0.964 is right, with 2.7 binomial errors (0.0056,
  // 0.0048) on either side.
  const Coverage coverage = simulate({kShort, 180.0, 330.0, 6.6, 1.0, 3.0}, 1500, 2026);
  CAPTURE(coverage.pec50, coverage.emax, coverage.nh, coverage.open);
  WARN("no plateau: coverage pec50 " << coverage.pec50 << " emax " << coverage.emax << " nh " << coverage.nh
                                     << ", open above in " << coverage.open << " of 1500");
  CHECK(coverage.pec50 >= 0.935);
  CHECK(coverage.pec50 <= 0.977);
  CHECK(coverage.open > 300); // the design asks for open limits
  CHECK(coverage.no_response == 0);
}

TEST_CASE("flat series are called responses in at most 5 % of cases", "[.long][pharmacology]") {
  // The F test is conservative here: 2.8 % in an independent simulation of 20000 series.
  Normal noise(11);
  const Design flat{kFull, 200.0, 200.0, 7.0, 1.0, 4.0};
  int called = 0;
  constexpr int kSeries = 4000;
  for (int i = 0; i < kSeries; ++i) {
    if (!fit_curve(series(flat, noise), Model::hill).has_flag(flags::kNoResponse)) ++called;
  }
  WARN("flat series called a response: " << 100.0 * called / kSeries << " %");
  CHECK(called <= kSeries / 20);
  CHECK(called >= kSeries / 100); // the test is made at all
}

TEST_CASE("a Hill fit with all its profiles takes less than two milliseconds", "[.long][pharmacology]") {
  Normal noise(5);
  const Design eight{{0, 1e-9, 1e-8, 3e-8, 1e-7, 3e-7, 1e-6, 1e-5}, 278.0, 92.0, 6.75, 1.15, 4.0};
  std::vector<std::vector<CurvePoint>> all;
  for (int i = 0; i < 200; ++i)
    all.push_back(series(eight, noise));
  const std::clock_t start = std::clock(); // of this process, whatever else the machine does
  std::size_t converged = 0;
  for (const auto& points : all)
    converged += fit_curve(points, Model::hill).converged ? 1U : 0U;
  const double each = 1e3 * static_cast<double>(std::clock() - start) / CLOCKS_PER_SEC / 200.0;
  WARN("a Hill fit of 8 points takes " << each << " ms");
  CHECK(converged == 200);
  CHECK(each < 2.0); // in an optimised build
}
