// Chronodrome, GPL-3.0-or-later.
//
// Responses in absurd units: the curve is the same, and no number overflows.
#include <catch2/catch.hpp>

#include <cmath>
#include <limits>
#include <numbers>

#include "pharmacology/censored_fit.h"
#include "pharmacology/curves.h"
#include "pharmacology/response_scale.h"

using namespace chronodrome;
using namespace chronodrome::pharmacology;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;

namespace {

std::vector<CurvePoint> times(std::vector<CurvePoint> points, double factor) {
  for (CurvePoint& point : points)
    point.response *= factor;
  return points;
}

bool all_finite(const CurveFit& fit) {
  bool finite = true;
  const auto look = [&](const std::optional<double>& value) {
    if (value && !std::isfinite(*value)) finite = false;
  };
  for (const auto* list : {&fit.parameters, &fit.derived}) {
    for (const NamedEstimate& one : *list) {
      for (const auto& value : {one.value.estimate, one.value.se, one.value.ci_low, one.value.ci_high})
        look(value);
    }
  }
  for (const auto& value :
       {fit.residual_sd, fit.rss, fit.aicc, fit.response_p, fit.trend_p, fit.lack_of_fit_p, fit.condition})
    look(value);
  return finite;
}

void check_same_curve(const CurveFit& other, const CurveFit& plain, double factor) {
  CHECK(other.flags == plain.flags);
  CHECK(all_finite(other));
  for (const char* name : {"pec50", "nh"}) {
    CAPTURE(name);
    const Estimate &a = *other.find(name), &b = *plain.find(name);
    // Factors that are no power of two round each response; limits are placed to 1e-7 of their distance.
    CHECK_THAT(a.estimate.value(), WithinRel(b.estimate.value(), 1e-8));
    CHECK_THAT(a.se.value(), WithinRel(b.se.value(), 1e-6));
    CHECK_THAT(a.ci_low.value(), WithinRel(b.ci_low.value(), 1e-6));
  }
  for (const char* name : {"basal", "emax", "effect_max"}) {
    CAPTURE(name);
    const Estimate &a = *other.find(name), &b = *plain.find(name);
    CHECK_THAT(a.estimate.value() / factor, WithinRel(b.estimate.value(), 1e-8));
    CHECK_THAT(a.se.value() / factor, WithinRel(b.se.value(), 1e-6));
    CHECK_THAT(a.ci_high.value() / factor, WithinRel(b.ci_high.value(), 1e-6));
  }
  CHECK_THAT(other.residual_sd.value() / factor, WithinRel(plain.residual_sd.value(), 1e-8));
  CHECK_THAT(other.response_p.value(), WithinRel(plain.response_p.value(), 1e-6));
}

} // namespace

TEST_CASE("a response in an absurd unit is the same curve", "[pharmacology][scale]") {
  const std::vector<CurvePoint> data = curves::noisy_hill(curves::kHalfLog, 280, 100, 7.0, 1.1);
  const CurveFit plain = fit_curve(data, Model::hill);
  for (const double factor : {1e300, 1e-300, 1e150, 1e-150, 1e97, 1e-102}) {
    CAPTURE(factor);
    const CurveFit other = fit_curve(times(data, factor), Model::hill);
    check_same_curve(other, plain, factor);
    // Gaussian criterion: n ln(RSS / n) moves by 2 n ln(factor).
    CHECK_THAT(other.aicc.value(), WithinRel(plain.aicc.value() + 20.0 * std::log(factor), 1e-9));
    const bool rss_has_a_double = std::abs(std::log10(factor)) < 152.0;
    CHECK(other.rss.has_value() == rss_has_a_double);
  }
}

TEST_CASE("limits and a fixed basal response follow the unit", "[pharmacology][scale]") {
  const std::vector<CurvePoint> data =
      curves::points({0, 1e-8, 3e-8, 1e-7, 3e-7, 1e-6}, {63.2, 61.2, 72.6, 88.2, 104.4, 137.9});
  const std::vector<CensoredPoint> limits{{Molar(3e-6), 150.0, LimitSide::at_least},
                                          {Molar(1e-5), 150.0, LimitSide::at_least}};
  const CurveFit plain = fit_censored(data, limits, Model::hill_unit_slope);
  for (const double factor : {1e290, 1e-290}) {
    std::vector<CensoredPoint> scaled = limits;
    for (CensoredPoint& point : scaled)
      point.limit *= factor;
    const CurveFit other = fit_censored(times(data, factor), scaled, Model::hill_unit_slope);
    CAPTURE(factor);
    CHECK(other.flags == plain.flags);
    CHECK(all_finite(other));
    CHECK_THAT(other.find("pec50")->estimate.value(), WithinRel(plain.find("pec50")->estimate.value(), 1e-9));
    CHECK_THAT(other.find("emax")->ci_high.value() / factor,
               WithinRel(plain.find("emax")->ci_high.value(), 1e-7));
    CHECK_THAT(other.aicc.value(), WithinRel(plain.aicc.value() + 12.0 * std::log(factor), 1e-9));

    FitOptions zero, sixty;
    zero.fixed_basal = 60.0;
    sixty.fixed_basal = 60.0 * factor;
    const CurveFit held = fit_curve(times(data, factor), Model::hill_unit_slope, sixty);
    CHECK(held.find("basal")->estimate == sixty.fixed_basal);
    CHECK_THAT(
        held.find("pec50")->estimate.value(),
        WithinRel(fit_curve(data, Model::hill_unit_slope, zero).find("pec50")->estimate.value(), 1e-8));
  }
}

TEST_CASE("no model lets out a number that is none", "[pharmacology][scale]") {
  const double most = std::numeric_limits<double>::max();
  const std::vector<CurvePoint> wild = curves::points(
      curves::kHalfLog, {most, -most, most, most / 2, 1e300, 0.0, -most, -most, -most, -most / 3});
  const std::vector<CurvePoint> smallest = curves::points(
      curves::kHalfLog, {5e-324, 0, 5e-324, 1e-323, 1e-322, 2e-322, 3e-322, 3e-322, 4e-322, 4e-322});
  FitOptions always;
  always.response_level = 0.0;
  for (const ModelMeaning& meaning : model_meanings()) {
    CAPTURE(std::string(meaning.name));
    CHECK(all_finite(fit_curve(wild, meaning.model)));
    CHECK(all_finite(fit_curve(wild, meaning.model, always)));
    CHECK(all_finite(fit_curve(smallest, meaning.model, always)));
  }
  const CurveFit zero =
      fit_curve(curves::points(curves::kHalfLog, std::vector<double>(10, 0.0)), Model::hill);
  CHECK(zero.has_flag(flags::kNoResponse));
}

TEST_CASE("ordinary responses are not touched", "[pharmacology][scale]") {
  for (const double largest : {0.0, 1e-100, 0.3, 280.0, 1e100}) {
    const ResponseScale scale(largest);
    CHECK_FALSE(scale.is_needed());
    CHECK(scale.down(0.1) == 0.1);
  }
  const ResponseScale scale(3e200);
  REQUIRE(scale.is_needed());
  CHECK(std::abs(scale.down(3e200)) >= 1.0);
  CHECK(std::abs(scale.down(3e200)) < 2.0);
  // A power of two keeps every digit.
  CHECK(std::ldexp(scale.down(3e200), std::ilogb(3e200)) == 3e200);
}
