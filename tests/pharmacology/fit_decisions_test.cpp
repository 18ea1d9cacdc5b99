// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include <limits>

#include "pharmacology/curves.h"

using namespace chronodrome;
using namespace chronodrome::pharmacology;
using Catch::Matchers::Contains;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;
using curves::kHalfLog;
using curves::noisy_hill;
using curves::points;

namespace {

bool nothing_estimated(const CurveFit& fit) {
  for (const auto* list : {&fit.parameters, &fit.derived}) {
    for (const NamedEstimate& one : *list) {
      if (one.value.estimate || one.value.ci_low || one.value.ci_high || one.value.se) return false;
    }
  }
  return true;
}

std::vector<std::string> names(const std::vector<NamedEstimate>& list) {
  std::vector<std::string> result;
  for (const NamedEstimate& one : list)
    result.push_back(one.name);
  return result;
}

} // namespace

TEST_CASE("a good curve has every number, its intervals and no flag", "[pharmacology][fit]") {
  const CurveFit fit = fit_curve(noisy_hill(kHalfLog, 280, 100, 7.0, 1.1), Model::hill);
  CHECK(fit.model == "hill");
  CHECK(fit.likelihood == "gaussian");
  CHECK(fit.n_points == 10);
  CHECK(fit.converged);
  CHECK(fit.df == 6);
  CHECK(fit.flags.empty());
  CHECK(fit.reason.empty());
  CHECK(names(fit.parameters) == std::vector<std::string>{"basal", "emax", "pec50", "nh"});
  CHECK(names(fit.derived) == std::vector<std::string>{"ec50_mol_per_l", "effect_max"});
  for (const NamedEstimate& one : fit.parameters) {
    CAPTURE(one.name);
    REQUIRE(one.value.ci_low.has_value());
    REQUIRE(one.value.ci_high.has_value());
    CHECK(one.value.se.value() > 0.0);
    CHECK(*one.value.ci_low < one.value.estimate.value());
    CHECK(*one.value.estimate < *one.value.ci_high);
    CHECK(one.value.ci_method == "profile");
  }
  CHECK_THAT(fit.find("pec50")->estimate.value(), WithinAbs(7.0, 0.05));
  // Derived numbers follow from the others.
  const Estimate& pec50 = *fit.find("pec50");
  const Estimate& ec50 = *fit.find("ec50_mol_per_l");
  CHECK_THAT(ec50.estimate.value(), WithinRel(std::pow(10.0, -*pec50.estimate), 1e-14));
  CHECK_THAT(ec50.ci_low.value(), WithinRel(std::pow(10.0, -*pec50.ci_high), 1e-14));
  CHECK_THAT(ec50.ci_high.value(), WithinRel(std::pow(10.0, -*pec50.ci_low), 1e-14));
  CHECK_THAT(fit.find("effect_max")->estimate.value(),
             WithinRel(*fit.find("emax")->estimate - *fit.find("basal")->estimate, 1e-12));
  CHECK(*fit.find("effect_max")->estimate < 0.0); // slowing
  CHECK(fit.find("no_such_number") == nullptr);
}

TEST_CASE("four distinct concentrations are declined, five are fitted and flagged", "[pharmacology][fit]") {
  const std::vector<double> five{0, 1e-8, 1e-7, 1e-6, 1e-5}, four{0, 1e-8, 1e-7, 1e-6};
  const CurveFit fitted = fit_curve(points(five, {280, 270, 180, 92, 85}), Model::hill);
  // One degree of freedom: both plateaus have limits, the slope has none above.
  CHECK(fitted.flags == std::vector<std::string>{"slope_undetermined", "few_points"});
  CHECK_FALSE(fitted.find("nh")->ci_high.has_value());
  for (const char* name : {"basal", "emax"})
    CHECK((fitted.find(name)->ci_low.has_value() && fitted.find(name)->ci_high.has_value()));
  CHECK(fitted.find("pec50")->estimate.has_value());
  CHECK(fitted.df == 1);

  const CurveFit declined = fit_curve(points(four, {280, 270, 180, 92}), Model::hill);
  CHECK(declined.flags == std::vector<std::string>{"declined", "few_points"});
  CHECK(nothing_estimated(declined));
  CHECK_FALSE(declined.converged);
  CHECK_FALSE(declined.rss.has_value());
  CHECK(names(declined.parameters) == std::vector<std::string>{"basal", "emax", "pec50", "nh"});
  CHECK_THAT(declined.reason, Contains("4 distinct concentrations"));
  CHECK_THAT(declined.reason, Contains("at least 5"));
}

TEST_CASE("repeats do not make up for missing concentrations", "[pharmacology][fit]") {
  // Control and two concentrations, four times each: twelve points for four parameters.
  std::vector<double> c, y;
  for (int i = 0; i < 4; ++i) {
    for (const double one : {0.0, 1e-7, 1e-6}) {
      c.push_back(one);
      y.push_back(100.0 + 1e8 * one + i);
    }
  }
  CHECK(fit_curve(points(c, y), Model::hill).has_flag(flags::kDeclined));
  CHECK_FALSE(fit_curve(points(c, y), Model::linear).has_flag(flags::kDeclined));
}

TEST_CASE("with the slope or basal fixed fewer concentrations do", "[pharmacology][fit]") {
  const std::vector<CurvePoint> four = points({0, 1e-8, 1e-7, 1e-6}, {280, 262, 190, 119});
  const CurveFit unit = fit_curve(four, Model::hill_unit_slope);
  CHECK_FALSE(unit.has_flag(flags::kDeclined));
  CHECK(unit.has_flag(flags::kFewPoints));
  CHECK(unit.find("nh")->estimate == 1.0);
  CHECK(unit.find("nh")->ci_method == "fixed");
  CHECK_FALSE(unit.find("nh")->se.has_value());
  FitOptions options;
  options.fixed_nh = 1.0;
  const CurveFit fixed = fit_curve(four, Model::hill, options);
  CHECK(fixed.find("pec50")->estimate == unit.find("pec50")->estimate);
  CHECK(fixed.find("pec50")->ci_low == unit.find("pec50")->ci_low);
}

TEST_CASE("equal responses are no response, and neither is scatter about a mean", "[pharmacology][fit]") {
  const CurveFit equal = fit_curve(points(kHalfLog, std::vector<double>(10, 199.3)), Model::hill);
  CHECK(equal.flags == std::vector<std::string>{"no_response"});
  CHECK(equal.find("basal")->estimate == 199.3);
  CHECK_FALSE(equal.find("basal")->ci_low.has_value()); // no scatter, no interval
  CHECK_FALSE(equal.find("emax")->estimate.has_value());

  const CurveFit flat = fit_curve(noisy_hill(kHalfLog, 200, 200, 7, 1), Model::hill);
  CHECK(flat.flags == std::vector<std::string>{"no_response"});
  CHECK(flat.response_p.value() >= 0.05);
  CHECK(flat.trend_p.value() >= 0.05);
  const Estimate& mean = *flat.find("basal");
  // t interval of a mean: 2.262157 is the 0.975 quantile of t with 9 df.
  CHECK_THAT(mean.ci_high.value() - mean.estimate.value(),
             WithinRel(2.2621571627982 * mean.se.value(), 1e-10));
  CHECK_THAT(mean.se.value(), WithinRel(flat.residual_sd.value() / std::sqrt(10.0), 1e-12));
  CHECK_THAT(flat.reason, Contains("no concentration-related response detected"));
  CHECK_FALSE(flat.find("pec50")->estimate.has_value());
  CHECK_THAT(fitted_response(flat, Molar(1e-6)).value(), WithinRel(*mean.estimate, 1e-14));
}

TEST_CASE("with basal fixed, no response means equal to basal", "[pharmacology][fit]") {
  FitOptions options;
  options.fixed_basal = 0.0;
  std::vector<double> scatter;
  for (std::size_t i = 0; i < 10; ++i)
    scatter.push_back(curves::kScatter[i]);
  const CurveFit fit = fit_curve(points(kHalfLog, scatter), Model::hill, options);
  CHECK(fit.has_flag(flags::kNoResponse));
  CHECK(fit.find("basal")->estimate == 0.0);
  CHECK(fit.find("basal")->ci_method == "fixed");
  CHECK(fit.df == 10);
}

TEST_CASE("unusable points are declined or dropped, never used", "[pharmacology][fit]") {
  std::vector<CurvePoint> good = noisy_hill(kHalfLog, 280, 100, 7.0, 1.1);
  SECTION("a missing response is dropped and counted") {
    std::vector<CurvePoint> more = good;
    more.push_back({Molar(1e-4), std::numeric_limits<double>::quiet_NaN(), 1.0});
    const CurveFit fit = fit_curve(more, Model::hill), without = fit_curve(good, Model::hill);
    CHECK(fit.n_dropped == 1);
    CHECK(fit.n_points == 10);
    CHECK(fit.find("pec50")->estimate == without.find("pec50")->estimate);
  }
  SECTION("a negative concentration") {
    good[3].concentration = Molar(-1e-8);
    CHECK(fit_curve(good, Model::hill).flags == std::vector<std::string>{"declined"});
  }
  SECTION("a weight of zero") {
    good[3].weight = 0.0;
    CHECK(fit_curve(good, Model::hill).flags == std::vector<std::string>{"declined"});
  }
  SECTION("no points at all") {
    const CurveFit fit = fit_curve({}, Model::hill);
    CHECK(fit.has_flag(flags::kDeclined));
    CHECK(nothing_estimated(fit));
  }
}

TEST_CASE("options outside their range decline the fit with the reason", "[pharmacology][fit]") {
  const std::vector<CurvePoint> good = noisy_hill(kHalfLog, 280, 100, 7.0, 1.1);
  FitOptions options;
  options.confidence = 1.5;
  CHECK_FALSE(options.check().ok());
  CHECK_THAT(fit_curve(good, Model::hill, options).reason, Contains("1.5"));
  options = {};
  options.fixed_nh = -1.0;
  CHECK(fit_curve(good, Model::hill, options).has_flag(flags::kDeclined));
  options.fixed_nh = 2.0;
  CHECK(fit_curve(good, Model::hill_unit_slope, options).has_flag(flags::kDeclined)); // two slopes at once
  options = {};
  options.fixed_basal = 0.0;
  CHECK(fit_curve(good, Model::bell, options).has_flag(flags::kDeclined));
}

TEST_CASE("repeated concentrations that the curve misses are flagged", "[pharmacology][fit]") {
  std::vector<double> c, y;
  for (const double one : kHalfLog) {
    const bool odd = one == 1e-8 || one == 1e-6;
    for (const double off : {-0.1, 0.1}) {
      c.push_back(one);
      y.push_back(curves::hill(one, 100, 200, 7, 1) + (odd ? 15.0 : 0.0) + off);
    }
  }
  const CurveFit fit = fit_curve(points(c, y), Model::hill);
  CHECK(fit.has_flag(flags::kLackOfFit));
  CHECK(fit.lack_of_fit_p.value() < 1e-6);
  CHECK(fit.find("pec50")->estimate.has_value()); // kept, flagged
}

TEST_CASE("a narrower confidence gives a narrower interval inside the wider", "[pharmacology][fit]") {
  const std::vector<CurvePoint> good = noisy_hill(kHalfLog, 280, 100, 7.0, 1.1);
  FitOptions half;
  half.confidence = 0.5;
  const Estimate wide = *fit_curve(good, Model::hill).find("pec50");
  const Estimate narrow = *fit_curve(good, Model::hill, half).find("pec50");
  CHECK(*wide.ci_low < *narrow.ci_low);
  CHECK(*narrow.ci_high < *wide.ci_high);
  CHECK(wide.estimate == narrow.estimate);
}

TEST_CASE("the same points give the same bits, in any order the same numbers", "[pharmacology][fit]") {
  std::vector<CurvePoint> good = noisy_hill(kHalfLog, 280, 100, 7.0, 1.1);
  const CurveFit first = fit_curve(good, Model::hill), second = fit_curve(good, Model::hill);
  std::vector<CurvePoint> reversed(good.rbegin(), good.rend());
  const CurveFit third = fit_curve(reversed, Model::hill);
  for (std::size_t i = 0; i < first.parameters.size(); ++i) {
    const Estimate &a = first.parameters[i].value, &b = second.parameters[i].value,
                   &c = third.parameters[i].value;
    CHECK(a.estimate == b.estimate);
    CHECK(a.ci_high == b.ci_high);
    CHECK(a.estimate == c.estimate); // one point a concentration: sorting restores the order
    CHECK(a.ci_low == c.ci_low);
  }
}
