// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include <cmath>

#include "pharmacology/censored_fit.h"
#include "pharmacology/levels.h"
#include "pharmacology/model_comparison.h"
#include "reference/pharmacology/reference_fits.h"

using namespace chronodrome;
using namespace chronodrome::pharmacology;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;
using reference::expected;

namespace {

double value(const CurveFit& fit, const char* name) {
  return fit.find(name)->estimate.value();
}
double error(const CurveFit& fit, const char* name) {
  return fit.find(name)->se.value();
}

std::vector<CurvePoint> dnase_run1() {
  return reference::points(reference::table("dnase_run1.csv"), "conc", "density");
}

} // namespace

TEST_CASE("the asymmetric curve is fitted by its EC50", "[reference][pharmacology]") {
  SECTION("noise-free") {
    const reference::Json truth = expected(reference::json("exact_hill5.json"), "exact_hill5");
    const CurveFit fit = fit_curve(
        reference::points(reference::table("exact_hill5.csv"), "conc_M", "rate_bpm"), Model::richards);
    // The file's rule.
    CHECK_THAT(value(fit, "pec50"), WithinRel(-truth.at("logEC50").get<double>(), 1e-9));
    CHECK_THAT(value(fit, "nh"), WithinRel(1.2, 1e-9));
    CHECK_THAT(value(fit, "asymmetry"), WithinRel(0.5, 1e-9));
    CHECK_THAT(value(fit, "basal"), WithinRel(180.0, 1e-9));
    CHECK_THAT(value(fit, "emax"), WithinRel(320.0, 1e-9));
    CHECK_THAT(std::log10(value(fit, "inflection_mol_per_l")),
               WithinRel(truth.at("inflection").get<double>(), 1e-9));
  }
  SECTION("the symmetric curve fitted to asymmetric data") {
    const reference::Json four = expected(reference::json("exact_hill5.json"), "hill4_fitted_to_it");
    const CurveFit fit =
        fit_curve(reference::points(reference::table("exact_hill5.csv"), "conc_M", "rate_bpm"), Model::hill);
    CHECK_THAT(fit.rss.value(), WithinRel(four.at("hill4_rss").get<double>(), 1e-9));
    CHECK_THAT(value(fit, "pec50"), WithinRel(-four.at("hill4_fit").at("logEC50").get<double>(), 1e-7));
    CHECK_THAT(value(fit, "nh"), WithinRel(four.at("hill4_fit").at("nH").get<double>(), 1e-6));
  }
  SECTION("published data") {
    // Source: Davidian & Giltinan 1995. The reference fits the location Lb instead of the EC50.
    const reference::Json five = expected(reference::json("dnase_run1.json"), "dnase1_hill5");
    const CurveFit fit = fit_curve(dnase_run1(), Model::richards);
    CHECK_THAT(fit.rss.value(), WithinRel(five.at("rss").get<double>(), 1e-9));
    CHECK(fit.df == five.at("df").get<int>());
    const double se = five.at("standard_errors").at("logEb");
    CHECK_THAT(value(fit, "pec50"), WithinAbs(-five.at("logEC50").get<double>(), 1e-5 * se));
    for (const auto& [ours, theirs] :
         {std::pair{"basal", "basal"}, {"emax", "Emax"}, {"nh", "nH"}, {"asymmetry", "s"}}) {
      CAPTURE(ours);
      const double reference_se = five.at("standard_errors").at(theirs);
      CHECK_THAT(value(fit, ours),
                 WithinAbs(five.at("estimates").at(theirs).get<double>(), 1e-5 * reference_se));
      CHECK_THAT(error(fit, ours), WithinRel(reference_se, 1e-6));
    }
    CHECK(fit.find("pec50")->ci_method == "wald");
  }
}

TEST_CASE("two components and their share agree with the reference", "[reference][pharmacology]") {
  const reference::Json two = expected(reference::json("biphasic_reps.json"), "biphasic_two_site");
  FitOptions options;
  options.fixed_basal = 0.0;
  const CurveFit fit = fit_curve(reference::points(reference::table("biphasic_reps.csv"), "conc_M", "y"),
                                 Model::biphasic, options);
  CHECK_THAT(fit.rss.value(), WithinRel(two.at("rss").get<double>(), 1e-9));
  CHECK(fit.df == two.at("df").get<int>());
  struct Pair {
    const char *ours, *theirs;
    double sign;
  };
  for (const Pair& pair : {Pair{"emax", "Emax", 1.0}, Pair{"fraction_1", "frac_high", 1.0},
                           Pair{"pec50_1", "logEC50_1", -1.0}, Pair{"pec50_2", "logEC50_2", -1.0}}) {
    CAPTURE(pair.ours);
    const double se = two.at("standard_errors").at(pair.theirs);
    CHECK_THAT(value(fit, pair.ours),
               WithinAbs(pair.sign * two.at("estimates").at(pair.theirs).get<double>(), 1e-5 * se));
    CHECK_THAT(error(fit, pair.ours), WithinRel(se, 1e-6));
    const reference::Json& limits = two.at("ci95_wald").at(pair.theirs);
    CHECK_THAT(fit.find(pair.ours)->ci_low.value(),
               WithinAbs(pair.sign * limits.at(pair.sign > 0.0 ? 0 : 1).get<double>(), 1e-5 * se));
  }
  CHECK_FALSE(fit.has_flag(flags::kNotSeparable));
  CHECK_FALSE(fit.has_flag(flags::kLackOfFit));
}

TEST_CASE("a noise-free bell gives back all seven parameters", "[reference][pharmacology]") {
  const reference::Json truth = expected(reference::json("exact_bell.json"), "exact_bell").at("estimates");
  const CurveFit fit =
      fit_curve(reference::points(reference::table("exact_bell.csv"), "conc_M", "y"), Model::bell);
  // The file's rule: relative 1e-7.
  CHECK_THAT(value(fit, "basal"), WithinRel(truth.at("base").get<double>(), 1e-7));
  CHECK_THAT(value(fit, "effect_1"), WithinRel(truth.at("S1").get<double>(), 1e-7));
  CHECK_THAT(value(fit, "effect_2"), WithinRel(-truth.at("S2").get<double>(), 1e-7));
  CHECK_THAT(value(fit, "pec50_1"), WithinRel(-truth.at("logEC50_1").get<double>(), 1e-7));
  CHECK_THAT(value(fit, "pec50_2"), WithinRel(-truth.at("logEC50_2").get<double>(), 1e-7));
  CHECK_THAT(value(fit, "nh_1"), WithinRel(truth.at("n1").get<double>(), 1e-7));
  CHECK_THAT(value(fit, "nh_2"), WithinRel(truth.at("n2").get<double>(), 1e-7));
  // At the extremum the slopes of both limbs cancel.
  const double top = value(fit, "extremum_mol_per_l");
  const double here = fitted_response(fit, Molar(top)).value();
  CHECK(here > fitted_response(fit, Molar(top * 1.01)).value());
  CHECK(here > fitted_response(fit, Molar(top / 1.01)).value());
}

TEST_CASE("nested models are compared as in the reference", "[reference][pharmacology]") {
  const auto check = [](const std::optional<FTest>& test, const reference::Json& truth) {
    REQUIRE(test.has_value());
    CHECK(test->df1 == truth.at("df1").get<int>());
    CHECK(test->df2 == truth.at("df2").get<int>());
    // F takes the difference of two sums of squares, each good to 1e-9 or better.
    CHECK_THAT(test->f, WithinRel(truth.at("F").get<double>(), 1e-7));
    CHECK_THAT(test->p, WithinRel(truth.at("p").get<double>(), 1e-6));
  };
  const auto compare = [](const CurveFit& small, const CurveFit& large) {
    return nested_test(small.rss.value(), small.df, large.rss.value(), large.df);
  };
  FitOptions zero;
  zero.fixed_basal = 0.0;
  SECTION("three, four and five parameters") {
    const reference::Json file = reference::json("dnase_run1.json");
    const std::vector<CurvePoint> points = dnase_run1();
    const CurveFit three = fit_curve(points, Model::hill, zero), four = fit_curve(points, Model::hill);
    check(compare(three, four), expected(file, "dnase1_F_3v4"));
    check(compare(four, fit_curve(points, Model::richards)), expected(file, "dnase1_F_4v5"));
  }
  SECTION("unit slope against free slope") {
    const std::vector<CurvePoint> points =
        reference::points(reference::table("noisy_inhib4.csv"), "conc_M", "rate_bpm");
    check(compare(fit_curve(points, Model::hill_unit_slope), fit_curve(points, Model::hill)),
          expected(reference::json("noisy_inhib4.json"), "F_nH1"));
  }
  SECTION("one component against two") {
    const std::vector<CurvePoint> points =
        reference::points(reference::table("biphasic_reps.csv"), "conc_M", "y");
    const reference::Json file = reference::json("biphasic_reps.json");
    const CurveFit unit = fit_curve(points, Model::hill_unit_slope, zero),
                   hill = fit_curve(points, Model::hill, zero);
    check(compare(unit, hill), expected(file, "F_nH1_v_hill3"));
    check(compare(unit, fit_curve(points, Model::biphasic, zero)), expected(file, "F_nH1_v_two_site"));
  }
  SECTION("Michaelis-Menten against Hill") {
    const reference::Json file = reference::json("puromycin.json");
    const reference::Table table = reference::table("puromycin.csv");
    for (const std::string state : {"treated", "untreated"}) {
      const std::vector<CurvePoint> points = reference::points(
          table, "conc", "rate", [&](std::size_t row) { return table.text(row, "state") == state; });
      check(compare(fit_curve(points, Model::hill_unit_slope, zero), fit_curve(points, Model::hill, zero)),
            expected(file, "puromycin_F_mm_v_hill3_" + state));
    }
  }
}

TEST_CASE("lack of fit against repeats agrees with the reference", "[reference][pharmacology]") {
  FitOptions zero;
  zero.fixed_basal = 0.0;
  const CurveFit dnase = fit_curve(dnase_run1(), Model::hill);
  const reference::Json four = expected(reference::json("dnase_run1.json"), "dnase1_lof_hill4");
  CHECK_THAT(dnase.lack_of_fit_p.value(), WithinRel(four.at("p").get<double>(), 1e-7));
  CHECK(dnase.has_flag(flags::kLackOfFit));
  const Levels levels = gather(dnase_run1());
  CHECK_THAT(levels.pure_error, WithinRel(four.at("SS_pure_error").get<double>(), 1e-10));
  CHECK(levels.pure_error_df == four.at("df_pure_error").get<int>());

  const std::vector<CurvePoint> two = reference::points(reference::table("biphasic_reps.csv"), "conc_M", "y");
  const reference::Json file = reference::json("biphasic_reps.json");
  CHECK_THAT(fit_curve(two, Model::hill, zero).lack_of_fit_p.value(),
             WithinRel(expected(file, "lof_hill3").at("p").get<double>(), 1e-7));
  CHECK_THAT(fit_curve(two, Model::biphasic, zero).lack_of_fit_p.value(),
             WithinRel(expected(file, "lof_two_site").at("p").get<double>(), 1e-7));
}

TEST_CASE("limits in the likelihood, left out, and mistaken for values", "[reference][pharmacology]") {
  const reference::Json file = reference::json("censored_delay.json");
  const reference::Table table = reference::table("censored_delay.csv");
  const std::vector<CurvePoint> measured = reference::points(
      table, "conc_M", "delay_ms", [&](std::size_t row) { return table.text(row, "censored") == "0"; });
  std::vector<CensoredPoint> limits;
  for (std::size_t row = 0; row < table.rows.size(); ++row) {
    if (table.text(row, "censored") == "1") {
      limits.push_back(
          {Molar(table.number(row, "conc_M")), table.number(row, "delay_ms"), LimitSide::at_least});
    }
  }
  REQUIRE(limits.size() == 2);
  struct Pair {
    const char *ours, *theirs;
    double sign;
  };
  const std::vector<Pair> pairs{{"basal", "basal", 1.0}, {"emax", "Emax", 1.0}, {"pec50", "logEC50", -1.0}};

  const CurveFit ml = fit_censored(measured, limits, Model::hill_unit_slope);
  const reference::Json truth = expected(file, "censored_ML");
  CHECK(ml.likelihood == "censored");
  CHECK(ml.n_points == 8);
  CHECK(ml.converged);
  for (const Pair& pair : pairs) {
    CAPTURE(pair.ours);
    const double se = truth.at("se_observed_information").at(pair.theirs);
    // The file's rule is 1e-4 SE; Newton's method ends far below it.
    CHECK_THAT(value(ml, pair.ours),
               WithinAbs(pair.sign * truth.at("estimates").at(pair.theirs).get<double>(), 1e-7 * se));
    CHECK_THAT(error(ml, pair.ours), WithinRel(se, 1e-7));
    CHECK(ml.find(pair.ours)->ci_method == "wald");
  }
  CHECK_THAT(ml.residual_sd.value(), WithinRel(truth.at("estimates").at("sigma_ML").get<double>(), 1e-8));

  const CurveFit dropped = fit_curve(measured, Model::hill_unit_slope);
  std::vector<CurvePoint> mistaken = measured;
  for (const CensoredPoint& limit : limits)
    mistaken.push_back({limit.concentration, limit.limit, 1.0});
  const CurveFit entered = fit_curve(mistaken, Model::hill_unit_slope);
  for (const Pair& pair : pairs) {
    CAPTURE(pair.ours);
    const reference::Json without = expected(file, "dropped"), as_data = expected(file, "entered_as_150ms");
    CHECK_THAT(error(dropped, pair.ours), WithinRel(without.at("se").at(pair.theirs).get<double>(), 1e-6));
    CHECK_THAT(value(dropped, pair.ours),
               WithinRel(pair.sign * without.at("estimates").at(pair.theirs).get<double>(), 1e-7));
    CHECK_THAT(error(entered, pair.ours), WithinRel(as_data.at("se").at(pair.theirs).get<double>(), 1e-6));
  }
}

TEST_CASE("other percentages of the effect follow from EC50 and slope", "[reference][pharmacology]") {
  const reference::Json truth = expected(reference::json("noisy_inhib4.json"), "derived_delta_method");
  const CurveFit fit =
      fit_curve(reference::points(reference::table("noisy_inhib4.csv"), "conc_M", "rate_bpm"), Model::hill);
  // EC10 = EC50 (10/90)^(1/nH); a relative 1e-8 is 1e-5 of the standard errors.
  const double log_ec10 = -value(fit, "pec50") + std::log10(10.0 / 90.0) / value(fit, "nh");
  CHECK_THAT(log_ec10, WithinRel(truth.at("logEC10").at(0).get<double>(), 1e-7));
  CHECK_THAT(fitted_response(fit, Molar(1e-7)).value(),
             WithinRel(truth.at("fitted_at_1e_7").at(0).get<double>(), 1e-7));
  CHECK_THAT(value(fit, "effect_max"), WithinRel(truth.at("span").at(0).get<double>(), 1e-7));
  CHECK_THAT(error(fit, "effect_max"), WithinRel(truth.at("span").at(1).get<double>(), 1e-6));
}
