// Chronodrome, GPL-3.0-or-later.
//
// Curves as they should not come: any slope, any scatter, few and repeated concentrations, odd weights.
#include <catch2/catch.hpp>

#include <cmath>
#include <random>

#include "pharmacology/censored_fit.h"
#include "pharmacology/curves.h"

using namespace chronodrome;
using namespace chronodrome::pharmacology;

namespace {

class Chance {
public:
  explicit Chance(std::uint64_t seed) : engine_(seed) {}
  double operator()() { return static_cast<double>(engine_() >> 11U) * 0x1.0p-53; }
  bool less_than(double p) { return (*this)() < p; }

private:
  std::mt19937_64 engine_;
};

std::vector<CurvePoint> random_curve(Chance& chance) {
  const int n = 5 + static_cast<int>(12.0 * chance());
  const bool control = chance.less_than(0.7);
  const double pec50 = 5.0 + 4.0 * chance(), nh = std::exp(-1.5 + 4.0 * chance());
  const double basal = 100.0 * chance(), emax = 200.0 * chance();
  const double scatter = std::pow(10.0, -3.0 + 4.0 * chance());
  std::vector<CurvePoint> points;
  for (int i = 0; i < n; ++i) {
    const double c = i == 0 && control ? 0.0 : std::pow(10.0, -9.0 + std::floor(10.0 * chance()) / 2.0);
    double y = curves::hill(c, basal, emax, pec50, nh) + scatter * (chance() - 0.5);
    if (chance.less_than(0.2)) y = std::round(y);
    points.push_back({Molar(c), y, chance.less_than(0.8) ? 1.0 : std::exp(3.0 * chance())});
  }
  return points;
}

/// Finite numbers, limits on their own sides of the estimate, flags of the closed list with a sentence each.
bool is_sound(const CurveFit& fit) {
  for (const auto* list : {&fit.parameters, &fit.derived}) {
    for (const NamedEstimate& one : *list) {
      const Estimate& e = one.value;
      for (const auto& value : {e.estimate, e.se, e.ci_low, e.ci_high}) {
        if (value && !std::isfinite(*value)) return false;
      }
      const double slack = 1e-9 * std::abs(e.estimate.value_or(0.0)) + 1e-12;
      if (e.estimate && e.ci_low && *e.ci_low > *e.estimate + slack) return false;
      if (e.estimate && e.ci_high && *e.ci_high < *e.estimate - slack) return false;
      if (e.ci_low && e.ci_high && *e.ci_low > *e.ci_high + slack) return false;
    }
  }
  std::size_t known = 0;
  for (const FlagMeaning& meaning : flag_meanings())
    known += fit.has_flag(meaning.flag) ? 1U : 0U;
  return known == fit.flags.size() && fit.reasons.size() == fit.flags.size() &&
         fit.reason.empty() == fit.flags.empty();
}

} // namespace

TEST_CASE("whatever the points, a fit is sound or says why there is none", "[pharmacology][random]") {
  Chance chance(7);
  int fitted = 0, lost = 0;
  for (int i = 0; i < 300; ++i) {
    const std::vector<CurvePoint> points = random_curve(chance);
    FitOptions options;
    if (chance.less_than(0.3)) options.response_level = 0.0;
    for (const ModelMeaning& meaning : model_meanings()) {
      const CurveFit fit = fit_curve(points, meaning.model, options);
      CAPTURE(i, std::string(meaning.name));
      CHECK(is_sound(fit));
      if (meaning.model != Model::hill || fit.has_flag(flags::kDeclined)) continue;
      ++fitted;
      if (fit.has_flag(flags::kNotConverged)) ++lost;
    }
    const std::vector<CensoredPoint> limit{
        {Molar(1e-5), points.back().response, i % 2 == 0 ? LimitSide::at_least : LimitSide::at_most}};
    CHECK(is_sound(fit_censored(points, limit, Model::hill, options)));
  }
  CHECK(fitted > 250);
  CHECK(lost <= 3); // one percent: shallow curves without scatter, whose best slope is almost 0
}

TEST_CASE("a basal response tied by a control is limited on both sides", "[pharmacology][random]") {
  // Hardly a response at all, so that the profile of basal has several valleys; the control at 93 counts
  // once.
  std::vector<CurvePoint> points =
      curves::points({0, 1e-9, 3.16e-9, 3.16e-8, 1e-7, 1e-6}, {93, 87.9412, 95.8443, 92.622, 94.6552, 96});
  points[1].weight = points[4].weight = 2.0;
  points[3].weight = 2.82399;
  FitOptions options;
  options.response_level = 0.0;
  const CurveFit fit = fit_curve(points, Model::hill, options);
  CHECK(fit.find("basal")->ci_low.has_value());
  CHECK(fit.find("basal")->ci_high.has_value());
}

TEST_CASE("an asymmetry at its limit is held there, and the rest keeps its errors",
          "[pharmacology][random]") {
  // exp(-C0 / C) is the limit of the asymmetric curve for s without end (Gompertz).
  std::vector<double> c, y;
  for (int k = 0; k < 14; ++k) {
    c.push_back(1e-9 * std::pow(10.0, k / 2.5));
    y.push_back(100.0 + 80.0 * std::exp(-3e-8 / c.back()) + 0.3 * curves::kScatter.at(c.size() % 10));
  }
  const CurveFit fit = fit_curve(curves::points(c, y), Model::richards);
  REQUIRE(fit.converged);
  CHECK(is_sound(fit));
  CHECK(fit.find("pec50")->se.has_value());
  CHECK(fit.find("asymmetry")->ci_method == "fixed");
  CHECK(fit.has_flag(flags::kNotSeparable));
  CHECK(std::abs(std::log(fit.find("asymmetry")->estimate.value())) <= 3.0 + 1e-12);
  // Half of the effect at 3e-8 / ln 2.
  CHECK(std::abs(fit.find("pec50")->estimate.value() + std::log10(3e-8 / std::log(2.0))) < 0.05);
}
