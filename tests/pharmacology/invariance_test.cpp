// Chronodrome, GPL-3.0-or-later.
//
// What must not change when units change: properties of the model, not of one data set.
#include <catch2/catch.hpp>

#include "pharmacology/curves.h"

using namespace chronodrome;
using namespace chronodrome::pharmacology;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;
using curves::kHalfLog;
using curves::noisy_hill;

namespace {

std::vector<CurvePoint> changed(std::vector<CurvePoint> points, double scale, double offset,
                                double dilution) {
  for (CurvePoint& point : points) {
    point.response = scale * point.response + offset;
    point.concentration = Molar(point.concentration.value() * dilution);
  }
  return points;
}

// A limit is placed to 1e-7 of its distance, an estimate far closer.
constexpr double kClose = 1e-6;

} // namespace

TEST_CASE("the unit and zero of the response leave EC50 and slope alone", "[pharmacology][invariance]") {
  const std::vector<CurvePoint> data = noisy_hill(kHalfLog, 280, 100, 7.0, 1.1);
  const CurveFit plain = fit_curve(data, Model::hill);
  for (const double scale : {1e-9, 60.0, -1.0}) {
    const double offset = 5.0 * scale;
    const CurveFit other = fit_curve(changed(data, scale, offset, 1.0), Model::hill);
    CAPTURE(scale);
    for (const char* name : {"pec50", "nh"}) {
      CAPTURE(name);
      CHECK_THAT(other.find(name)->estimate.value(), WithinRel(plain.find(name)->estimate.value(), 1e-8));
      CHECK_THAT(other.find(name)->se.value(), WithinRel(plain.find(name)->se.value(), kClose));
      CHECK_THAT(other.find(name)->ci_low.value(), WithinRel(plain.find(name)->ci_low.value(), kClose));
      CHECK_THAT(other.find(name)->ci_high.value(), WithinRel(plain.find(name)->ci_high.value(), kClose));
    }
    const Estimate &emax = *other.find("emax"), &before = *plain.find("emax");
    CHECK_THAT(emax.estimate.value(), WithinRel(scale * *before.estimate + offset, 1e-8));
    const double turned = scale > 0.0 ? *before.ci_low : *before.ci_high; // a mirror swaps the limits
    CHECK_THAT(emax.ci_low.value(), WithinRel(scale * turned + offset, kClose));
    CHECK_THAT(other.rss.value(), WithinRel(scale * scale * plain.rss.value(), 1e-8));
  }
}

TEST_CASE("the unit of the concentration shifts pEC50 and nothing else", "[pharmacology][invariance]") {
  const std::vector<CurvePoint> data = noisy_hill(kHalfLog, 280, 100, 7.0, 1.1);
  const CurveFit plain = fit_curve(data, Model::hill);
  const CurveFit other = fit_curve(changed(data, 1.0, 0.0, 1e3), Model::hill);
  CHECK_THAT(other.find("pec50")->estimate.value(),
             WithinRel(plain.find("pec50")->estimate.value() - 3.0, 1e-8));
  CHECK_THAT(other.find("pec50")->ci_low.value(),
             WithinAbs(plain.find("pec50")->ci_low.value() - 3.0, kClose));
  CHECK_THAT(other.find("nh")->ci_high.value(), WithinRel(plain.find("nh")->ci_high.value(), kClose));
  CHECK_THAT(other.rss.value(), WithinRel(plain.rss.value(), 1e-9));
}

TEST_CASE("a weight of two is two equal points", "[pharmacology][invariance]") {
  std::vector<CurvePoint> doubled = noisy_hill(kHalfLog, 280, 100, 7.0, 1.1), weighted = doubled;
  doubled.push_back(doubled[4]);
  weighted[4].weight = 2.0;
  const CurveFit a = fit_curve(doubled, Model::hill), b = fit_curve(weighted, Model::hill);
  CHECK_THAT(a.find("pec50")->estimate.value(), WithinRel(b.find("pec50")->estimate.value(), 1e-10));
  CHECK_THAT(a.rss.value(), WithinRel(b.rss.value(), 1e-10));
  CHECK(a.df == b.df + 1); // but it is not one more point
}

TEST_CASE("the reciprocal of the response moves the EC50 as theory says", "[pharmacology][invariance]") {
  // Rate falls from R0 to R1 by a Hill curve: cycle length rises by an exact one with EC50 (R0/R1)^(1/nH).
  std::vector<double> cycle;
  for (const double c : kHalfLog)
    cycle.push_back(60.0 / curves::hill(c, 300, 60, 7.0, 1.5));
  const CurveFit fit = fit_curve(curves::points(kHalfLog, cycle), Model::hill);
  CHECK_THAT(fit.find("pec50")->estimate.value(), WithinAbs(7.0 - 0.4659800029, 1e-9)); // log10(5) / 1.5
  CHECK_THAT(fit.find("nh")->estimate.value(), WithinAbs(1.5, 1e-9));
}

TEST_CASE("the control is exactly basal, whatever the lowest concentration", "[pharmacology][invariance]") {
  const CurveFit fit = fit_curve(noisy_hill(kHalfLog, 280, 100, 7.0, 1.1), Model::hill);
  CHECK(fitted_response(fit, Molar(0.0)) == fit.find("basal")->estimate);
  CHECK_THAT(fitted_response(fit, Molar(*fit.find("ec50_mol_per_l")->estimate)).value(),
             WithinRel((*fit.find("basal")->estimate + *fit.find("emax")->estimate) / 2.0, 1e-12));
  CHECK_FALSE(fitted_response(fit, Molar(-1.0)).has_value());
}
