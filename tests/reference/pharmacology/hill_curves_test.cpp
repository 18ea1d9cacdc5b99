// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include <cmath>

#include "pharmacology/limit_models.h"
#include "reference/pharmacology/reference_fits.h"

using namespace chronodrome;
using namespace chronodrome::pharmacology;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;
using reference::check_fit;
using reference::expected;

namespace {

struct Case {
  const char* file;
  const char* id;
  const char* concentration;
  const char* response;
  Model model;
};

FitOptions without_lack_of_fit() {
  FitOptions options;
  options.lack_of_fit_level = 0.0;
  return options;
}

} // namespace

TEST_CASE("four-parameter and unit-slope Hill curves agree with the 50-digit reference",
          "[reference][pharmacology]") {
  // Source: dnase_run1, Davidian & Giltinan 1995 (R datasets::DNase); the others are seeded simulations.
  const Case one =
      GENERATE(Case{"dnase_run1", "dnase1_hill4", "conc", "density", Model::hill},
               Case{"noisy_inhib4", "noisy_inhib4", "conc_M", "rate_bpm", Model::hill},
               Case{"noisy_inhib4", "noisy_inhib4_nH1", "conc_M", "rate_bpm", Model::hill_unit_slope},
               Case{"outlier_inhib4", "outlier_ols", "conc_M", "rate_bpm", Model::hill},
               Case{"noplateau_stim4", "noplateau_hill4", "conc_M", "rate_bpm", Model::hill},
               Case{"noplateau_stim4", "noplateau_hill_nH1", "conc_M", "rate_bpm", Model::hill_unit_slope});
  CAPTURE(one.id);
  const reference::Json file = reference::json(std::string(one.file) + ".json");
  REQUIRE(file.at("tolerance").at("estimates") == "abs(est-ref) <= 1e-5 * reference SE");
  // noplateau_stim4 states 1e-3 SE for its limits; all files are held to 1e-4 here.
  const reference::Table table = reference::table(std::string(one.file) + ".csv");
  check_fit(fit_curve(reference::points(table, one.concentration, one.response), one.model),
            expected(file, one.id));
}

TEST_CASE("Hill curves with basal fixed at zero agree with the reference", "[reference][pharmacology]") {
  FitOptions options;
  options.fixed_basal = 0.0;
  const reference::Json dnase = reference::json("dnase_run1.json");
  const reference::Table table = reference::table("dnase_run1.csv");
  std::vector<CurvePoint> points = reference::points(table, "conc", "density");

  SECTION("unweighted") {
    // Source: also Pinheiro & Bates 2000 (from memory): Asym 2.345, xmid 1.483, scal 1.041.
    const CurveFit fit = fit_curve(points, Model::hill, options);
    check_fit(fit, expected(dnase, "dnase1_hill3"));
    // Half of the last printed digit, and R's stopping rule (1e-5 of an SE of 0.03 to 0.08).
    CHECK_THAT(-fit.find("pec50")->estimate.value() * std::log(10.0), WithinAbs(1.48309, 6e-6));
    CHECK_THAT(1.0 / fit.find("nh")->estimate.value(), WithinAbs(1.04146, 6e-6));
    CHECK(fit.find("basal")->ci_method == "fixed");
  }
  SECTION("weights 1/y") {
    for (CurvePoint& point : points)
      point.weight = 1.0 / point.response;
    check_fit(fit_curve(points, Model::hill, options), expected(dnase, "dnase1_hill3_w_1_over_y"));
    for (CurvePoint& point : points)
      point.weight *= 1e6; // the scale of the weights does not matter
    const CurveFit scaled = fit_curve(points, Model::hill, options);
    const double se = expected(dnase, "dnase1_hill3_w_1_over_y").at("standard_errors").at("logEC50");
    CHECK_THAT(scaled.find("pec50")->se.value(), WithinRel(se, 1e-6));
  }
}

TEST_CASE("published enzyme kinetics agree with the reference, slope fixed and free",
          "[reference][pharmacology]") {
  // Source: Puromycin, Treloar 1974 in Bates & Watts 1988 (R datasets::Puromycin).
  const std::string state = GENERATE("treated", "untreated");
  const reference::Json file = reference::json("puromycin.json");
  const reference::Table table = reference::table("puromycin.csv");
  const std::vector<CurvePoint> points = reference::points(
      table, "conc", "rate", [&](std::size_t row) { return table.text(row, "state") == state; });
  FitOptions options;
  options.fixed_basal = 0.0;
  CAPTURE(state);
  const CurveFit unit = fit_curve(points, Model::hill_unit_slope, options);
  check_fit(unit, expected(file, "puromycin_hill_nH1_log_" + state));
  check_fit(fit_curve(points, Model::hill, options), expected(file, "puromycin_hill3_" + state));

  // The same fit in the form Vm C / (K + C): K is our EC50, and profile limits do not depend on the form.
  const reference::Json mm = expected(file, "puromycin_mm_" + state);
  const double se = mm.at("standard_errors").at("K");
  const Estimate& ec50 = *unit.find("ec50_mol_per_l");
  CHECK_THAT(ec50.estimate.value(), WithinAbs(mm.at("estimates").at("K").get<double>(), 1e-5 * se));
  CHECK_THAT(ec50.ci_low.value(), WithinAbs(mm.at("ci95_profile").at("K").at(0).get<double>(), 1e-4 * se));
  CHECK_THAT(ec50.ci_high.value(), WithinAbs(mm.at("ci95_profile").at("K").at(1).get<double>(), 1e-4 * se));
  const double vm_se = mm.at("standard_errors").at("Vm");
  CHECK_THAT(unit.find("emax")->ci_high.value(),
             WithinAbs(mm.at("ci95_profile").at("Vm").at(1).get<double>(), 1e-4 * vm_se));
}

TEST_CASE("noise-free curves give back their truth", "[reference][pharmacology]") {
  const std::string name = GENERATE("exact_inhib4", "exact_stim4");
  const reference::Json truth = expected(reference::json(name + ".json"), name).at("estimates");
  const CurveFit fit =
      fit_curve(reference::points(reference::table(name + ".csv"), "conc_M", "rate_bpm"), Model::hill);
  CAPTURE(name);
  REQUIRE(fit.converged);
  // The file's rule: relative 1e-9 (the responses carry 17 digits).
  CHECK_THAT(fit.find("basal")->estimate.value(), WithinRel(truth.at("basal").get<double>(), 1e-9));
  CHECK_THAT(fit.find("emax")->estimate.value(), WithinRel(truth.at("Emax").get<double>(), 1e-9));
  CHECK_THAT(fit.find("pec50")->estimate.value(), WithinRel(truth.at("pEC50").get<double>(), 1e-9));
  CHECK_THAT(fit.find("nh")->estimate.value(), WithinRel(truth.at("nH").get<double>(), 1e-9));
  CHECK(fit.rss.value() < 1e-18 * 280.0 * 280.0);
  CHECK_FALSE(fit.find("pec50")->se.has_value()); // not defined: there is no scatter
  CHECK_FALSE(fit.find("pec50")->ci_low.has_value());
  CHECK(fit.has_flag(flags::kExactFit));
}

TEST_CASE("each of the eleven published runs agrees with the reference", "[reference][pharmacology]") {
  const reference::Json file = reference::json("dnase_all.json");
  const reference::Table table = reference::table("dnase_all.csv");
  const reference::Json runs = expected(file, "per_run_hill4");
  REQUIRE(runs.size() == 11);
  double sum = 0.0;
  for (const reference::Json& run : runs) {
    const std::string label = std::to_string(run.at("run").get<int>());
    const CurveFit fit =
        fit_curve(reference::points(table, "conc", "density",
                                    [&](std::size_t row) { return table.text(row, "run") == label; }),
                  Model::hill);
    CAPTURE(label);
    for (const char* theirs : {"basal", "Emax", "logEC50", "nH"}) {
      const reference::Name name = reference::name_of(theirs);
      const double se = run.at(std::string("se_") + theirs);
      CAPTURE(theirs);
      CHECK_THAT(fit.find(name.ours)->estimate.value(),
                 WithinAbs(name.sign * run.at(theirs).get<double>(), 1e-5 * se));
      CHECK_THAT(fit.find(name.ours)->se.value(), WithinRel(se, 1e-6));
    }
    CHECK_THAT(fit.rss.value(), WithinRel(run.at("rss").get<double>(), 1e-9));
    sum += fit.find("pec50")->estimate.value();
  }
  const double mean = expected(file, "two_stage").at("summary").at("logEC50").at("mean");
  CHECK_THAT(-sum / 11.0, WithinRel(mean, 1e-7));
}

TEST_CASE("a flat series is reported as no response, with its mean", "[reference][pharmacology]") {
  const reference::Json truth = expected(reference::json("null_response.json"), "null_const");
  const CurveFit fit =
      fit_curve(reference::points(reference::table("null_response.csv"), "conc_M", "rate_bpm"), Model::hill);
  CHECK(fit.flags == std::vector<std::string>{"no_response"});
  CHECK_THAT(fit.find("basal")->estimate.value(), WithinRel(truth.at("mean").get<double>(), 1e-12));
  CHECK_THAT(fit.rss.value(), WithinRel(truth.at("rss").get<double>(), 1e-9));
  CHECK(fit.df == truth.at("df").get<int>());
  for (const char* name : {"emax", "pec50", "nh", "ec50_mol_per_l", "effect_max"}) {
    CAPTURE(name);
    CHECK_FALSE(fit.find(name)->estimate.has_value());
  }
  // Without the test the optimiser would print a number here all the same.
  FitOptions blind = without_lack_of_fit();
  blind.response_level = 0.0;
  CHECK_FALSE(fit_curve(reference::points(reference::table("null_response.csv"), "conc_M", "rate_bpm"),
                        Model::hill, blind)
                  .has_flag(flags::kNoResponse));
}

TEST_CASE("without a plateau the limit models, not the search, decide that a side is open",
          "[reference][pharmacology]") {
  const reference::Json file = reference::json("noplateau_stim4.json");
  const std::vector<CurvePoint> points =
      reference::points(reference::table("noplateau_stim4.csv"), "conc_M", "rate_bpm");
  const Levels levels = gather(points);
  const reference::Json power = expected(file, "limit_model_power_law");
  const HillLimits free(levels, std::nullopt, std::nullopt);
  CHECK_THAT(free.location_up(), WithinRel(power.at("rss").get<double>(), 1e-9));
  // The exponent is a minimum of the RSS in one dimension: known to the root of 1e-16 and better.
  CHECK_THAT(free.power(0).nh.value(), WithinRel(power.at("theta").at(2).get<double>(), 1e-6));
  CHECK_THAT(free.power(0).asymptote, WithinRel(power.at("theta").at(0).get<double>(), 1e-7));
  const HillLimits unit(levels, 1.0, std::nullopt);
  CHECK_THAT(unit.location_up(),
             WithinRel(expected(file, "limit_model_linear").at("rss").get<double>(), 1e-9));

  for (const Model model : {Model::hill, Model::hill_unit_slope}) {
    const CurveFit fit = fit_curve(points, model);
    CHECK(fit.has_flag(flags::kUpperPlateauOpen));
    CHECK_FALSE(fit.has_flag(flags::kLowerPlateauOpen));
    CHECK_FALSE(fit.find("pec50")->ci_low.has_value());
    CHECK_FALSE(fit.find("emax")->ci_high.has_value());
    CHECK_FALSE(fit.find("effect_max")->ci_high.has_value());
    CHECK(fit.find("pec50")->estimate.has_value()); // the optimum is finite all the same
  }
  // pEC50 <= 7.12 with the slope free, <= 6.83 with unit slope.
  CHECK_THAT(fit_curve(points, Model::hill).find("pec50")->ci_high.value(), WithinAbs(7.12, 0.005));
  CHECK_THAT(fit_curve(points, Model::hill_unit_slope).find("pec50")->ci_high.value(),
             WithinAbs(6.83, 0.005));
}

TEST_CASE("basal fixed at zero where it is not ruins EC50 and slope", "[reference][pharmacology]") {
  // exact_stim4 rises from 180: reference values with two digits, pEC50 9.05, nH 0.31, Emax 345.
  FitOptions options;
  options.fixed_basal = 0.0;
  const CurveFit fit = fit_curve(reference::points(reference::table("exact_stim4.csv"), "conc_M", "rate_bpm"),
                                 Model::hill, options);
  CHECK_THAT(fit.find("pec50")->estimate.value(), WithinAbs(9.05, 0.01));
  CHECK_THAT(fit.find("nh")->estimate.value(), WithinAbs(0.31, 0.005));
  CHECK_THAT(fit.find("emax")->estimate.value(), WithinAbs(345.0, 0.5));
}

TEST_CASE("two NIST problems are Hill curves in other letters", "[reference][pharmacology]") {
  FitOptions options;
  options.fixed_basal = 0.0;
  SECTION("Misra1d: unit slope, EC50 = 1 / b2") {
    // Source: NIST StRD Misra1d.
    const reference::Json hp = reference::json("nist_misra1d.json").at("hp");
    const CurveFit fit = fit_curve(reference::points(reference::table("nist_misra1d.csv"), "x", "y"),
                                   Model::hill_unit_slope, options);
    const auto number = [](const reference::Json& text) { return std::stod(text.get<std::string>()); };
    const double b1 = number(hp.at("estimates").at("b1")), b2 = number(hp.at("estimates").at("b2"));
    const double se1 = number(hp.at("standard_errors").at("b1"));
    const double se2 = number(hp.at("standard_errors").at("b2"));
    CHECK_THAT(fit.find("emax")->estimate.value(), WithinAbs(b1, 1e-5 * se1));
    CHECK_THAT(fit.find("emax")->se.value(), WithinRel(se1, 1e-6));
    CHECK_THAT(1.0 / fit.find("ec50_mol_per_l")->estimate.value(), WithinAbs(b2, 1e-5 * se2));
    CHECK_THAT(fit.find("pec50")->se.value(), WithinRel(se2 / b2 / std::log(10.0), 1e-6));
    const reference::Json& b2_limits = hp.at("ci95_profile_exact").at("b2");
    CHECK_THAT(1.0 / fit.find("ec50_mol_per_l")->ci_high.value(),
               WithinAbs(number(b2_limits.at(0)), 1e-4 * se2));
    CHECK_THAT(1.0 / fit.find("ec50_mol_per_l")->ci_low.value(),
               WithinAbs(number(b2_limits.at(1)), 1e-4 * se2));
    CHECK_THAT(fit.rss.value(), WithinRel(number(hp.at("rss")), 1e-9));
  }
  SECTION("Rat42: a logistic in x is a Hill curve in 10^(x/20)") {
    // Source: NIST StRD Rat42. b1 / (1 + exp(b2 - b3 x)): nH = 20 b3 / ln 10, log EC50 = b2 / b3 / 20.
    const reference::Json hp = reference::json("nist_rat42.json").at("hp");
    const reference::Table table = reference::table("nist_rat42.csv");
    std::vector<CurvePoint> points;
    for (std::size_t row = 0; row < table.rows.size(); ++row) {
      points.push_back({Molar(std::pow(10.0, table.number(row, "x") / 20.0)), table.number(row, "y"), 1.0});
    }
    const CurveFit fit = fit_curve(points, Model::hill, options);
    const auto number = [](const reference::Json& text) { return std::stod(text.get<std::string>()); };
    const double b3 = number(hp.at("estimates").at("b3")), se3 = number(hp.at("standard_errors").at("b3"));
    const double scale = 20.0 / std::log(10.0);
    CHECK_THAT(fit.find("nh")->estimate.value(), WithinAbs(scale * b3, 1e-5 * scale * se3));
    CHECK_THAT(fit.find("nh")->se.value(), WithinRel(scale * se3, 1e-6));
    CHECK_THAT(fit.find("nh")->ci_low.value(),
               WithinAbs(scale * number(hp.at("ci95_profile_exact").at("b3").at(0)), 1e-4 * scale * se3));
    CHECK_THAT(fit.find("nh")->ci_high.value(),
               WithinAbs(scale * number(hp.at("ci95_profile_exact").at("b3").at(1)), 1e-4 * scale * se3));
    CHECK_THAT(-fit.find("pec50")->estimate.value(),
               WithinRel(number(hp.at("estimates").at("b2")) / b3 / 20.0, 1e-7));
    CHECK_THAT(fit.rss.value(), WithinRel(number(hp.at("rss")), 1e-9));
  }
}
