// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include <cmath>
#include <limits>
#include <string>
#include <vector>

#include <nlohmann/json.hpp>

#include "pharmacology/fit.h"
#include "results/curves_json.h"

using namespace chronodrome;
using results::curves_json;
using results::LabelledFit;
// Keeps the order of the text.
using Json = nlohmann::ordered_json;
using Catch::Matchers::WithinRel;

namespace {

std::vector<pharmacology::CurvePoint> points() {
  const double c[] = {0, 1e-9, 3e-9, 1e-8, 3e-8, 1e-7, 3e-7, 1e-6};
  const double y[] = {281, 278.5, 274, 262.2, 234, 188.1, 146, 118};
  std::vector<pharmacology::CurvePoint> result;
  for (std::size_t i = 0; i < 8; ++i)
    result.push_back({Molar(c[i]), y[i], 1.0});
  return result;
}

LabelledFit labelled(pharmacology::CurveFit fit) {
  return {1, "acetylcholine", "", "GP-03", "rate:RA", std::move(fit)};
}

std::vector<std::string> keys(const Json& object) {
  std::vector<std::string> result;
  for (const auto& [key, value] : object.items())
    result.push_back(key);
  return result;
}

using Words = std::vector<std::string>;

} // namespace

TEST_CASE("a fit is written with the keys of the contract, in their order", "[results][curves_json]") {
  const pharmacology::CurveFit fit = pharmacology::fit_curve(points(), pharmacology::Model::hill);
  REQUIRE(fit.converged);
  const Json list = Json::parse(curves_json(std::vector<LabelledFit>{labelled(fit)}));
  REQUIRE(list.is_array());
  REQUIRE(list.size() == 1);
  const Json& one = list[0];
  CHECK(keys(one) == Words{"curve", "agent", "background", "preparation", "measure", "model", "likelihood",
                           "n_points", "parameters", "derived", "fit", "flags"});
  CHECK(keys(one["parameters"]) == Words{"basal", "emax", "pec50", "nh"});
  CHECK(keys(one["parameters"]["pec50"]) == Words{"estimate", "se", "ci_low", "ci_high", "ci_method"});
  CHECK(keys(one["derived"]) == Words{"ec50_mol_per_l", "effect_max"});
  CHECK(keys(one["derived"]["ec50_mol_per_l"]) == Words{"estimate", "ci_low", "ci_high"});
  CHECK(keys(one["derived"]["effect_max"]) == Words{"estimate", "se", "ci_low", "ci_high", "ci_method"});
  CHECK(keys(one["fit"]) == Words{"residual_sd", "df", "rss", "aicc", "converged"});
  CHECK(one["curve"] == 1);
  CHECK(one["agent"] == "acetylcholine");
  CHECK(one["background"] == "");
  CHECK(one["measure"] == "rate:RA");
  CHECK(one["model"] == "hill");
  CHECK(one["likelihood"] == "gaussian");
  CHECK(one["n_points"] == 8);
  CHECK(one["fit"]["df"] == 4);
  CHECK(one["fit"]["converged"] == true);
  CHECK(one["parameters"]["nh"]["ci_method"] == "profile");
  // Twelve significant digits.
  CHECK_THAT(one["parameters"]["pec50"]["estimate"].get<double>(),
             WithinRel(fit.find("pec50")->estimate.value(), 1e-11));
  CHECK_THAT(one["fit"]["rss"].get<double>(), WithinRel(fit.rss.value(), 1e-11));
}

TEST_CASE("what the data do not give is null, and a declined fit is an entry", "[results][curves_json]") {
  auto few = points();
  few.resize(3);
  const auto declined = pharmacology::fit_curve(few, pharmacology::Model::hill);
  const Json list = Json::parse(curves_json(std::vector<LabelledFit>{labelled(declined)}));
  const Json& one = list.at(0);
  for (const char* name : {"basal", "emax", "pec50", "nh"}) {
    CAPTURE(name);
    for (const char* key : {"estimate", "se", "ci_low", "ci_high"})
      CHECK(one["parameters"][name][key].is_null());
    CHECK(one["parameters"][name]["ci_method"] == "");
  }
  CHECK(one["derived"]["ec50_mol_per_l"]["estimate"].is_null());
  CHECK(one["fit"]["rss"].is_null());
  CHECK(one["fit"]["converged"] == false);
  CHECK(one["flags"] == Json{"declined", "few_points"});
}

TEST_CASE("numbers that are none never reach the file", "[results][curves_json]") {
  pharmacology::CurveFit fit = pharmacology::fit_curve(points(), pharmacology::Model::hill);
  fit.rss = std::numeric_limits<double>::infinity();
  fit.parameters[0].value.se = std::nan("");
  const std::string text = curves_json(std::vector<LabelledFit>{labelled(fit)});
  const Json one = Json::parse(text).at(0); // JSON has no such words: parsing would throw
  CHECK(one["fit"]["rss"].is_null());
  CHECK(one["parameters"]["basal"]["se"].is_null());
}

TEST_CASE("labels with quotes and other scripts survive", "[results][curves_json]") {
  LabelledFit fit = labelled(pharmacology::fit_curve(points(), pharmacology::Model::constant));
  fit.agent = "\"A\"\\\n\xce\xb2";
  fit.background = "atropine 1e-07";
  fit.curve = 12;
  const Json one = Json::parse(curves_json(std::vector<LabelledFit>{fit})).at(0);
  CHECK(one["agent"] == "\"A\"\\\n\xce\xb2");
  CHECK(one["background"] == "atropine 1e-07");
  CHECK(one["curve"] == 12);
  CHECK(keys(one["parameters"]) == Words{"basal"});
  CHECK(one["derived"] == Json::object());
}

TEST_CASE("no fits are an empty list, several keep their order, the bytes are the same each time",
          "[results][curves_json]") {
  CHECK(Json::parse(curves_json({})) == Json::array());
  LabelledFit first = labelled(pharmacology::fit_curve(points(), pharmacology::Model::hill)), second = first;
  second.curve = 2;
  second.fit.likelihood = "censored";
  const std::vector<LabelledFit> both{first, second};
  const std::string text = curves_json(both);
  CHECK(text == curves_json(both));
  const Json list = Json::parse(text);
  REQUIRE(list.size() == 2);
  CHECK(list[0]["curve"] == 1);
  CHECK(list[1]["likelihood"] == "censored");
}
