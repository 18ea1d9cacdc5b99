// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include <algorithm>
#include <set>

#include "pharmacology/curves.h"
#include "pharmacology/hill_fit.h"
#include "pharmacology/model_comparison.h"

using namespace chronodrome;
using namespace chronodrome::pharmacology;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;
using curves::kHalfLog;
using curves::noisy_hill;
using curves::points;

TEST_CASE("every model has a word, and only models have", "[pharmacology][model]") {
  for (const ModelMeaning& meaning : model_meanings()) {
    const std::string name(meaning.name);
    CAPTURE(name);
    CHECK(model_named(name) == meaning.model);
    CHECK(model_name(meaning.model) == name);
    CHECK_FALSE(meaning.equation.empty());
    CHECK_FALSE(meaning.intervals.empty());
    CHECK(parameter_count(meaning.model) >= 1);
    const CurveFit fit = fit_curve(noisy_hill(kHalfLog, 280, 100, 7.0, 1.1), meaning.model);
    REQUIRE(fit.parameters.size() == meaning.parameters.size());
    for (std::size_t i = 0; i < fit.parameters.size(); ++i) {
      CHECK(fit.parameters[i].name == meaning.parameters[i].name);
    }
  }
  CHECK_FALSE(model_named("Hill").has_value());
  CHECK_FALSE(model_named("").has_value());
  CHECK(parameter_count(Model::hill) == 4);
  CHECK(parameter_count(Model::hill_unit_slope) == 3);
}

TEST_CASE("every flag has a meaning and advice, and stands once", "[pharmacology][flags]") {
  std::set<std::string> seen;
  for (const FlagMeaning& meaning : flag_meanings()) {
    CAPTURE(std::string(meaning.flag));
    CHECK(seen.insert(std::string(meaning.flag)).second);
    CHECK_FALSE(meaning.meaning.empty());
    CHECK_FALSE(meaning.advice.empty());
  }
  // What the caller knows of the responses comes before what the curve says of itself.
  std::vector<std::string> order;
  for (const FlagMeaning& meaning : flag_meanings())
    order.emplace_back(meaning.flag);
  CurveFit fit;
  add_flag(fit, flags::kExtrapolated, "outside");
  add_flag(fit, flags::kSelectedBeats, "conducted beats only");
  sort_flags(fit);
  CHECK(fit.flags == std::vector<std::string>{"selected_beats", "extrapolated"});
  CHECK(fit.reason == "conducted beats only");
  CHECK(std::find(order.begin(), order.end(), "selected_beats") -
            std::find(order.begin(), order.end(), "not_converged") ==
        1);
  // The words that other people's scripts rely on.
  for (const char* word :
       {"no_response", "few_points", "upper_plateau_open", "lower_plateau_open", "extrapolated",
        "slope_undetermined", "lack_of_fit", "not_separable", "declined", "selected_beats"}) {
    CAPTURE(word);
    CHECK(seen.count(word) == 1);
  }
}

TEST_CASE("a straight line by hand, with exact t limits", "[pharmacology][model]") {
  // C 0 1 2 3 (1e-6), y 1 2 2 4: slope 0.9, intercept 0.9, RSS 0.7, s^2 0.35; SE slope sqrt(0.35 / 5) =
  // 0.264575, SE intercept sqrt(0.35 x 0.7) = 0.494975; t(0.975, 2) = 4.302653.
  FitOptions options;
  options.response_level = 0.0; // four points: F = 11.6 with (1, 2) df, P = 0.077
  const CurveFit fit = fit_curve(points({0, 1e-6, 2e-6, 3e-6}, {1, 2, 2, 4}), Model::linear, options);
  CHECK_THAT(fit.find("basal")->estimate.value(), WithinRel(0.9, 1e-12));
  CHECK_THAT(fit.find("slope")->estimate.value(), WithinRel(0.9e6, 1e-12));
  CHECK_THAT(fit.find("slope")->se.value(), WithinRel(1e6 * std::sqrt(0.07), 1e-12));
  CHECK_THAT(fit.find("basal")->se.value(), WithinRel(std::sqrt(0.245), 1e-12));
  CHECK_THAT(fit.find("slope")->ci_high.value(),
             WithinRel(0.9e6 + 4.302652729749464 * 1e6 * std::sqrt(0.07), 1e-10));
  CHECK_THAT(fit.rss.value(), WithinRel(0.7, 1e-12));
  CHECK(fit.df == 2);
  CHECK_THAT(fitted_response(fit, Molar(2e-6)).value(), WithinRel(2.7, 1e-12));
  CHECK(fit_curve(points({0, 1e-6, 2e-6, 3e-6}, {1, 2, 2, 4}), Model::linear).has_flag(flags::kNoResponse));
}

TEST_CASE("a constant is the weighted mean with its t interval", "[pharmacology][model]") {
  std::vector<CurvePoint> data = points({0, 1e-8, 1e-7, 1e-6}, {1, 2, 3, 6});
  const CurveFit fit = fit_curve(data, Model::constant);
  CHECK(fit.find("basal")->estimate == 3.0);
  CHECK_THAT(fit.rss.value(), WithinRel(14.0, 1e-14));
  CHECK_THAT(fit.find("basal")->se.value(), WithinRel(std::sqrt(14.0 / 3.0 / 4.0), 1e-13));
  data[3].weight = 3.0;
  CHECK_THAT(fit_curve(data, Model::constant).find("basal")->estimate.value(), WithinRel(4.0, 1e-14));
}

TEST_CASE("richer models say when the data do not carry them", "[pharmacology][model]") {
  const std::vector<CurvePoint> plain = noisy_hill(kHalfLog, 280, 100, 7.0, 1.0);
  SECTION("two components on a curve that has one") {
    CHECK(fit_curve(plain, Model::biphasic).has_flag(flags::kNotSeparable));
  }
  SECTION("a bell on a curve that only falls") {
    const CurveFit bell = fit_curve(plain, Model::bell);
    CHECK(bell.has_flag(flags::kNotSeparable));
    CHECK_FALSE(bell.has_flag(flags::kNotConverged));
    if (!bell.converged) {
      for (const NamedEstimate& one : bell.parameters)
        CHECK_FALSE(one.value.estimate.has_value());
    }
  }
  SECTION("an asymmetry from symmetric data is 1 within its error") {
    const CurveFit fit = fit_curve(plain, Model::richards);
    const Estimate& s = *fit.find("asymmetry");
    CHECK(s.ci_low.value() < 1.0);
    CHECK(s.ci_high.value() > 1.0);
  }
  SECTION("few concentrations for many parameters") {
    CHECK(fit_curve(noisy_hill({0, 1e-8, 1e-7, 1e-6, 1e-5}, 280, 100, 7, 1), Model::richards)
              .has_flag(flags::kDeclined));
    CHECK(fit_curve(noisy_hill({0, 1e-9, 1e-8, 1e-7, 1e-6, 1e-5, 1e-4}, 280, 100, 7, 1), Model::richards)
              .has_flag(flags::kFewPoints));
  }
}

TEST_CASE("two components on one Hill curve are not separable, whatever its slope", "[pharmacology][model]") {
  // A slope above 1 drives the two components onto each other with opposite weights without an end.
  std::vector<double> wide = kHalfLog;
  wide.insert(wide.end(), {3e-5, 1e-4, 1e-3});
  for (const double nh : {0.8, 1.0, 1.2, 1.5, 2.5}) {
    for (const double pec50 : {7.5, 6.5, 5.5}) {
      const std::vector<CurvePoint> plain = noisy_hill(wide, 200, 100, pec50, nh);
      for (const Model model : {Model::biphasic, Model::bell}) {
        const CurveFit fit = fit_curve(plain, model);
        CAPTURE(nh, pec50, fit.model, fit.reason);
        CHECK_FALSE(fit.has_flag(flags::kNotConverged));
        if (nh >= 1.2) CHECK(fit.has_flag(flags::kNotSeparable));
        if (fit.condition) CHECK(std::isfinite(*fit.condition));
        if (fit.converged) continue;
        CHECK(fit.has_flag(flags::kNotSeparable));
        for (const NamedEstimate& one : fit.parameters)
          CHECK_FALSE(one.value.estimate.has_value());
      }
    }
  }
}

TEST_CASE("a bell of the other direction is found as well", "[pharmacology][model]") {
  // Slowing, then recovery.
  std::vector<double> c{0}, y{200};
  for (int k = -20; k <= -8; ++k) {
    const double one = std::pow(10.0, k / 2.0);
    c.push_back(one);
    y.push_back(curves::hill(one, 200, 120, 8.0, 1.0) + curves::hill(one, 0, 50, 5.5, 1.5) +
                0.2 * curves::kScatter.at(c.size() % 10));
  }
  const CurveFit fit = fit_curve(points(c, y), Model::bell);
  REQUIRE(fit.converged);
  // Scatter of 0.2 on limbs of 80 and 50: the locations are known to a few hundredths.
  CHECK_THAT(fit.find("pec50_1")->estimate.value(), WithinAbs(8.0, 0.1));
  CHECK_THAT(fit.find("pec50_2")->estimate.value(), WithinAbs(5.5, 0.1));
  CHECK_THAT(fit.find("effect_1")->estimate.value(), WithinAbs(-80.0, 4.0));
  CHECK(fit.find("effect_2")->estimate.value() > 0.0);
}

TEST_CASE("model comparison has its closed forms and its limits", "[pharmacology][model]") {
  // F = ((10 - 4) / 2) / (4 / 8) = 6.
  const auto test = nested_test(10.0, 10, 4.0, 8);
  REQUIRE(test.has_value());
  CHECK(test->f == 6.0);
  // Upper tail of F(2, n) is (1 + 2 F / n)^(-n/2): (1 + 12/8)^-4.
  CHECK_THAT(test->p, WithinRel(std::pow(2.5, -4.0), 1e-12));
  CHECK_FALSE(nested_test(10.0, 8, 4.0, 8).has_value());
  CHECK_FALSE(nested_test(10.0, 8, 4.0, 0).has_value());
  CHECK(nested_test(10.0, 10, 0.0, 8)->p == 0.0);
  CHECK(nested_test(4.0, 10, 4.0, 8)->p == 1.0);

  CHECK_THAT(aicc(8.0, 10, 2).value(), WithinRel(10.0 * std::log(0.8) + 6.0 + 24.0 / 6.0, 1e-14));
  CHECK_FALSE(aicc(8.0, 6, 4).has_value()); // n = K + 1
  CHECK(aicc(8.0, 7, 4).has_value());
  CHECK_FALSE(aicc(0.0, 10, 2).has_value());
  CHECK_FALSE(lack_of_fit_test(5.0, 6, 1.0, 0).has_value());
  CHECK_FALSE(lack_of_fit_test(5.0, 6, 1.0, 6).has_value());
}
