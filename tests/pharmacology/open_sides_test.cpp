// Chronodrome, GPL-3.0-or-later.
//
// Curves that lack a plateau or a slope: which side is open, which estimates remain.
#include <catch2/catch.hpp>

#include "numerics/distributions.h"
#include "pharmacology/curves.h"
#include "pharmacology/hill_problem.h"

using namespace chronodrome;
using namespace chronodrome::pharmacology;
using Catch::Matchers::Contains;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;
using curves::noisy_hill;
using curves::points;

namespace {
const std::vector<double> kLow{0, 1e-9, 3e-9, 1e-8, 3e-8, 1e-7, 3e-7};
const std::vector<double> kHighNoControl{3e-8, 1e-7, 3e-7, 1e-6, 3e-6, 1e-5};
} // namespace

TEST_CASE("the upper plateau is the one at high concentration, in both directions", "[pharmacology][open]") {
  for (const double emax : {330.0, 30.0}) { // acceleration and slowing from 180
    const CurveFit fit = fit_curve(noisy_hill(kLow, 180, emax, 6.3, 1.0, 2.0), Model::hill);
    CAPTURE(emax);
    CHECK(fit.has_flag(flags::kUpperPlateauOpen));
    CHECK_FALSE(fit.has_flag(flags::kLowerPlateauOpen));
    CHECK_FALSE(fit.find("pec50")->ci_low.has_value());
    CHECK(fit.find("pec50")->ci_high.has_value());
    // The far side of emax is open, the near one is not.
    CHECK(fit.find("emax")->ci_low.has_value() == (emax > 180.0));
    CHECK(fit.find("emax")->ci_high.has_value() == (emax < 180.0));
    CHECK(fit.find("effect_max")->ci_low.has_value() == (emax > 180.0));
    CHECK(fit.find("basal")->ci_low.has_value());
    CHECK(fit.find("basal")->ci_high.has_value());
  }
}

TEST_CASE("without a control and a lower plateau the other side is open", "[pharmacology][open]") {
  const CurveFit fit = fit_curve(noisy_hill(kHighNoControl, 280, 100, 8.0, 1.0), Model::hill_unit_slope);
  CHECK(fit.has_flag(flags::kLowerPlateauOpen));
  CHECK_FALSE(fit.has_flag(flags::kUpperPlateauOpen));
  CHECK(fit.find("pec50")->ci_low.has_value());
  CHECK_FALSE(fit.find("pec50")->ci_high.has_value());
  CHECK(fit.find("basal")->ci_low.has_value()); // falling curve: basal is at least this
  CHECK_FALSE(fit.find("basal")->ci_high.has_value());
  CHECK(fit.find("emax")->ci_low.has_value());
  CHECK(fit.has_flag(flags::kExtrapolated)); // the EC50 lies below the lowest concentration
}

TEST_CASE("an EC50 outside the tested concentrations is flagged", "[pharmacology][open]") {
  const CurveFit fit = fit_curve(noisy_hill(kLow, 180, 380, 6.1, 1.0), Model::hill_unit_slope);
  CHECK(fit.find("pec50")->estimate.value() < 6.5);
  CHECK(fit.has_flag(flags::kExtrapolated));
  CHECK_FALSE(fit_curve(noisy_hill(curves::kHalfLog, 180, 380, 6.9, 1.0), Model::hill)
                  .has_flag(flags::kExtrapolated));
}

TEST_CASE("a power law leaves EC50 and maximum without an estimate", "[pharmacology][open]") {
  // 100 + 80 (C / 1e-7)^1.3: convex in C, so that no finite EC50 fits better than none.
  std::vector<double> responses;
  for (std::size_t i = 0; i < kLow.size(); ++i) {
    responses.push_back(100.0 + 80.0 * std::pow(kLow[i] / 1e-7, 1.3) + 0.1 * curves::kScatter.at(i));
  }
  const CurveFit fit = fit_curve(points(kLow, responses), Model::hill_unit_slope);
  CHECK(fit.converged);
  CHECK_FALSE(fit.find("pec50")->estimate.has_value());
  CHECK_FALSE(fit.find("emax")->estimate.has_value());
  CHECK_FALSE(fit.find("effect_max")->estimate.has_value());
  CHECK(fit.find("basal")->estimate.has_value());
  CHECK(fit.find("pec50")->ci_high.has_value());
  CHECK_FALSE(fit.find("pec50")->ci_low.has_value());
  CHECK(fit.has_flag(flags::kUpperPlateauOpen));
  CHECK_FALSE(fitted_response(fit, Molar(1e-7)).has_value());
}

TEST_CASE("a step between two concentrations gives the EC50 as their interval", "[pharmacology][open]") {
  const CurveFit fit = fit_curve(noisy_hill(curves::kHalfLog, 280, 100, 7.25, 60.0), Model::hill);
  CHECK(fit.flags == std::vector<std::string>{"slope_undetermined"});
  CHECK_THAT(fit.reason, Contains("between 3e-08 and 1e-07"));
  CHECK_FALSE(fit.find("nh")->estimate.has_value());
  CHECK(fit.find("nh")->ci_low.value() > 3.0);
  CHECK_FALSE(fit.find("nh")->ci_high.has_value());
  CHECK_FALSE(fit.find("pec50")->estimate.has_value());
  // The profile jumps at both concentrations; limits are good to 1e-7 of the distance.
  CHECK_THAT(fit.find("ec50_mol_per_l")->ci_low.value(), WithinRel(3e-8, 1e-6));
  CHECK_THAT(fit.find("ec50_mol_per_l")->ci_high.value(), WithinRel(1e-7, 1e-6));
  // Both plateaus are the means of their points.
  CHECK_THAT(fit.find("basal")->estimate.value(),
             WithinRel(280.0 + (1.0 - 1.0 + 0.5 - 0.7 + 1.2) / 5, 1e-12));
  CHECK_THAT(fit.find("emax")->estimate.value(),
             WithinRel(100.0 + (-0.4 + 0.3 - 1.1 + 0.8 - 0.5) / 5, 1e-12));
}

TEST_CASE("a slope outside 0.2 to 10 is not believed", "[pharmacology][open]") {
  std::vector<double> wide{0};
  for (int k = -24; k <= -2; ++k)
    wide.push_back(std::pow(10.0, k));
  const CurveFit shallow = fit_curve(noisy_hill(wide, 100, 200, 13.0, 0.15, 0.01), Model::hill);
  CHECK_THAT(shallow.find("nh")->estimate.value(), WithinAbs(0.15, 0.002));
  CHECK(shallow.has_flag(flags::kSlopeUndetermined));
}

TEST_CASE("a slope without an upper limit is undetermined although it has an optimum",
          "[pharmacology][open]") {
  // One point on the way between two plateaus: any steeper curve through it does as well.
  const CurveFit fit = fit_curve(
      points({0, 1e-9, 1e-8, 1e-7, 1e-6, 1e-5, 1e-4}, {280, 276, 285, 205, 104, 97, 100}), Model::hill);
  REQUIRE(fit.converged);
  REQUIRE(fit.find("nh")->estimate.has_value());
  CHECK(fit.find("nh")->estimate.value() < 10.0);
  CHECK(fit.find("nh")->ci_low.has_value());
  CHECK_FALSE(fit.find("nh")->ci_high.has_value());
  CHECK(fit.find("emax")->ci_low.has_value());
  CHECK(fit.find("basal")->ci_high.has_value());
  CHECK(fit.flags == std::vector<std::string>{"slope_undetermined"});
  CHECK_THAT(fit.reason, Contains("no upper limit"));
}

TEST_CASE("a slope that only an open plateau leaves open is not flagged by itself", "[pharmacology][open]") {
  const CurveFit fit = fit_curve(noisy_hill(kLow, 180, 330, 6.3, 1.0, 8.0), Model::hill);
  REQUIRE(fit.find("nh")->estimate.has_value());
  REQUIRE_FALSE((fit.find("nh")->ci_low.has_value() && fit.find("nh")->ci_high.has_value()));
  CHECK(fit.has_flag(flags::kUpperPlateauOpen));
  CHECK_FALSE(fit.has_flag(flags::kSlopeUndetermined));
}

TEST_CASE("a response at all doses alike hides its EC50 below them", "[pharmacology][open]") {
  const CurveFit fit = fit_curve(points(kLow, {200, 101, 100, 99, 100.5, 100, 99.5}), Model::hill_unit_slope);
  CHECK(fit.has_flag(flags::kLowerPlateauOpen));
  CHECK_FALSE(fit.find("pec50")->ci_high.has_value());
  CHECK(fit.find("pec50")->ci_low.value() > 9.0); // EC50 below 1 nM at any rate
  CHECK(fit.find("basal")->estimate.value() > 190.0);
}

TEST_CASE("computed data without scatter keep estimates and lose errors", "[pharmacology][open]") {
  std::vector<double> exact;
  for (const double c : curves::kHalfLog)
    exact.push_back(curves::hill(c, 280, 100, 7.1, 0.8));
  const CurveFit fit = fit_curve(points(curves::kHalfLog, exact), Model::hill);
  CHECK(fit.converged);
  CHECK(fit.flags == std::vector<std::string>{"exact_fit"});
  CHECK_THAT(fit.find("pec50")->estimate.value(), WithinRel(7.1, 1e-11));
  CHECK_FALSE(fit.find("pec50")->se.has_value());
  CHECK(fit.find("pec50")->ci_method.empty());
  CHECK_FALSE(fit.aicc.has_value());
}

TEST_CASE("at a profile limit the held fit has exactly the threshold", "[pharmacology][open]") {
  // The definition itself: RSS(limit) = RSS (1 + t^2 / df).
  const std::vector<CurvePoint> data = noisy_hill(curves::kHalfLog, 280, 100, 7.0, 1.1, 3.0);
  const CurveFit fit = fit_curve(data, Model::hill);
  const Levels levels = gather(data);
  const HillShape shape;
  const HillConstraints held;
  const HillLimits limits(levels, std::nullopt, std::nullopt);
  const std::vector<double> start{-fit.find("pec50")->estimate.value(),
                                  std::log(fit.find("nh")->estimate.value())};
  const double t = numerics::student_t_quantile(0.975, 6.0);
  const double threshold = fit.rss.value() * (1.0 + t * t / 6.0);
  struct Limit {
    HillParameter parameter;
    double value;
  };
  const std::vector<Limit> all{{HillParameter::location, -fit.find("pec50")->ci_low.value()},
                               {HillParameter::location, -fit.find("pec50")->ci_high.value()},
                               {HillParameter::log_slope, std::log(fit.find("nh")->ci_low.value())},
                               {HillParameter::log_slope, std::log(fit.find("nh")->ci_high.value())},
                               {HillParameter::basal, fit.find("basal")->ci_low.value()},
                               {HillParameter::emax, fit.find("emax")->ci_high.value()},
                               {HillParameter::effect, fit.find("effect_max")->ci_low.value()}};
  for (const Limit& limit : all) {
    ConstrainedHill constrained(levels, shape, held, limits, limit.parameter, start);
    CAPTURE(static_cast<int>(limit.parameter), limit.value);
    // 1e-7 of the interval's half width, where the RSS rises by about twice its excess over that width.
    CHECK_THAT(constrained.search(limit.value), WithinRel(threshold, 1e-6));
  }
}
