// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include <cmath>

#include "numerics/distributions.h"
#include "pharmacology/censored_fit.h"
#include "pharmacology/censored_likelihood.h"
#include "pharmacology/curves.h"
#include "pharmacology/wald.h"

using namespace chronodrome;
using namespace chronodrome::pharmacology;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;
using curves::points;

namespace {

// AV delay in ms, then complete block: only known to exceed the longest conducted delay.
std::vector<CurvePoint> delays() {
  return points({0, 1e-8, 3e-8, 1e-7, 3e-7, 1e-6}, {63.2, 61.2, 72.6, 88.2, 104.4, 137.9});
}
const std::vector<CensoredPoint> kBlocked{{Molar(3e-6), 150.0, LimitSide::at_least},
                                          {Molar(1e-5), 150.0, LimitSide::at_least}};

} // namespace

TEST_CASE("gradient and Hessian of the likelihood are those of its value", "[pharmacology][censored]") {
  const std::vector<CurvePoint> measured = delays();
  const std::vector<CensoredPoint> limits{{Molar(3e-6), 150.0, LimitSide::at_least},
                                          {Molar(1e-5), 190.0, LimitSide::at_most}};
  const CensoredLikelihood likelihood(measured, limits);
  numerics::Vector at(5);
  at << 62.0, 165.0, -6.3, 0.1, 1.3;
  numerics::Vector gradient, plus, minus;
  numerics::Matrix hessian, unused;
  const double value = likelihood.derivatives(at, gradient, hessian);
  CHECK_THAT(likelihood.value(at), WithinRel(value, 1e-14));
  for (Eigen::Index j = 0; j < 5; ++j) {
    // Central differences: error of order h^2 times the third derivative, and rounding over h.
    const double h = 1e-5 * std::max(1.0, std::abs(at(j)));
    numerics::Vector up = at, down = at;
    up(j) += h;
    down(j) -= h;
    const double slope = (likelihood.value(up) - likelihood.value(down)) / (2.0 * h);
    CHECK_THAT(gradient(j), WithinAbs(slope, 1e-6 * std::max(1.0, std::abs(slope))));
    likelihood.derivatives(up, plus, unused);
    likelihood.derivatives(down, minus, unused);
    for (Eigen::Index i = 0; i < 5; ++i) {
      CAPTURE(i, j);
      const double bend = (plus(i) - minus(i)) / (2.0 * h);
      CHECK_THAT(hessian(i, j), WithinAbs(bend, 1e-5 * std::max(1.0, std::abs(bend))));
    }
  }
}

TEST_CASE("an upper limit is the mirror image of a lower one", "[pharmacology][censored]") {
  // A rate under arrest is at most its limit: turn the delays' signs.
  std::vector<CurvePoint> turned = delays();
  for (CurvePoint& point : turned)
    point.response = 300.0 - point.response;
  std::vector<CensoredPoint> limits = kBlocked;
  for (CensoredPoint& point : limits) {
    point.limit = 300.0 - point.limit;
    point.side = LimitSide::at_most;
  }
  const CurveFit up = fit_censored(delays(), kBlocked, Model::hill_unit_slope);
  const CurveFit down = fit_censored(turned, limits, Model::hill_unit_slope);
  CHECK_THAT(down.find("pec50")->estimate.value(), WithinRel(up.find("pec50")->estimate.value(), 1e-9));
  CHECK_THAT(down.find("pec50")->se.value(), WithinRel(up.find("pec50")->se.value(), 1e-7));
  CHECK_THAT(down.find("emax")->estimate.value(), WithinRel(300.0 - *up.find("emax")->estimate, 1e-9));
}

TEST_CASE("a limit far below the curve says nothing", "[pharmacology][censored]") {
  // P(response >= -1e6) = 1: the likelihood is that of the measured points, whose maximum is least squares.
  const std::vector<CensoredPoint> idle{{Molar(1e-7), -1e6, LimitSide::at_least}};
  const std::vector<CurvePoint> data = curves::noisy_hill(curves::kHalfLog, 280, 100, 7.0, 1.1);
  const CurveFit ml = fit_censored(data, idle, Model::hill), ls = fit_curve(data, Model::hill);
  CHECK_THAT(ml.find("pec50")->estimate.value(), WithinRel(ls.find("pec50")->estimate.value(), 1e-8));
  CHECK_THAT(ml.find("nh")->estimate.value(), WithinRel(ls.find("nh")->estimate.value(), 1e-7));
  CHECK_THAT(ml.residual_sd.value(), WithinRel(std::sqrt(ls.rss.value() / 10.0), 1e-7));
}

TEST_CASE("a Hill coefficient from few points has limits above 0", "[pharmacology][censored]") {
  // One point on the slope of the curve: the error of nh is larger than half of nh.
  const std::vector<CurvePoint> measured =
      points({0, 1e-9, 1e-8, 1e-7, 3e-7, 1e-6}, {60.0, 75.0, 50.0, 70.0, 97.0, 140.0});
  const std::vector<CensoredPoint> limits{{Molar(1e-5), 145.0, LimitSide::at_least}};
  const CurveFit fit = fit_censored(measured, limits, Model::hill);
  const Estimate& nh = *fit.find("nh");
  REQUIRE(nh.estimate.has_value());
  const double t = numerics::student_t_quantile(0.975, fit.df);
  REQUIRE(t * nh.se.value() > nh.estimate.value()); // nh - t se is negative
  CHECK(nh.ci_low.value() > 0.0);
  // ln nh -+ t se(nh) / nh, by the chain rule.
  CHECK_THAT(nh.ci_low.value(), WithinRel(*nh.estimate * std::exp(-t * *nh.se / *nh.estimate), 1e-12));
  CHECK_THAT(nh.ci_high.value(), WithinRel(*nh.estimate * std::exp(t * *nh.se / *nh.estimate), 1e-12));
  CHECK(nh.ci_method == "wald");
}

TEST_CASE("limits on a logarithm without a double are missing", "[pharmacology][censored]") {
  const Estimate wide = wald_of_log(0.0, 1000.0, 2.0);
  CHECK(wide.estimate == 1.0);
  CHECK(wide.se == 1000.0);
  CHECK_FALSE(wide.ci_low.has_value());
  CHECK_FALSE(wide.ci_high.has_value());
  CHECK_FALSE(wald_of_log(0.0, std::nullopt, 2.0).ci_low.has_value());
}

TEST_CASE("censored fits are declined where they cannot answer", "[pharmacology][censored]") {
  CHECK(fit_censored(delays(), {}, Model::hill_unit_slope).has_flag(flags::kDeclined));
  CHECK(fit_censored(delays(), kBlocked, Model::bell).has_flag(flags::kDeclined));
  CHECK(fit_censored(points({0, 1e-8, 1e-7}, {60, 62, 90}), kBlocked, Model::hill_unit_slope)
            .has_flag(flags::kDeclined));
  std::vector<double> exact;
  const std::vector<double> c{0, 1e-8, 3e-8, 1e-7, 3e-7, 1e-6};
  for (const double one : c)
    exact.push_back(curves::hill(one, 60, 170, 6.4, 1.0));
  CHECK(fit_censored(points(c, exact), kBlocked, Model::hill_unit_slope).has_flag(flags::kDeclined));
  FitOptions options;
  options.confidence = 0.0;
  const CurveFit wrong = fit_censored(delays(), kBlocked, Model::hill, options);
  CHECK(wrong.has_flag(flags::kDeclined));
  CHECK_FALSE(wrong.find("pec50")->estimate.has_value());
}

TEST_CASE("a flat series with limits it easily keeps is no response", "[pharmacology][censored]") {
  std::vector<double> flat;
  for (std::size_t i = 0; i < 10; ++i)
    flat.push_back(100.0 + curves::kScatter[i]);
  const std::vector<CensoredPoint> idle{{Molar(1e-4), 90.0, LimitSide::at_least}};
  const CurveFit fit = fit_censored(points(curves::kHalfLog, flat), idle, Model::hill_unit_slope);
  CHECK(fit.has_flag(flags::kNoResponse));
  CHECK_THAT(fit.find("basal")->estimate.value(), WithinAbs(100.01, 1e-6));
  CHECK_FALSE(fit.find("pec50")->estimate.has_value());
}

TEST_CASE("too many limits in the middle of the curve leave no EC50", "[pharmacology][censored]") {
  const std::vector<CurvePoint> measured =
      points({0, 1e-9, 3e-9, 1e-8, 3e-8, 1e-5, 3e-5}, {60, 61, 59.5, 66, 73, 170, 171.5});
  const std::vector<CensoredPoint> limits{{Molar(1e-7), 80.0, LimitSide::at_least},
                                          {Molar(2e-7), 80.0, LimitSide::at_least},
                                          {Molar(3e-7), 80.0, LimitSide::at_least}};
  const CurveFit fit = fit_censored(measured, limits, Model::hill_unit_slope);
  CHECK(fit.has_flag(flags::kHeavilyCensored));
  CHECK_FALSE(fit.find("pec50")->estimate.has_value());
  CHECK(fit.find("emax")->estimate.has_value());
}
