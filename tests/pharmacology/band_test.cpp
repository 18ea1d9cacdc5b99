// Chronodrome, GPL-3.0-or-later.
#include <catch2/catch.hpp>

#include <cmath>

#include "pharmacology/band.h"
#include "pharmacology/fit.h"
#include "reference/reference_data.h"

using namespace chronodrome;
using namespace chronodrome::pharmacology;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;

namespace {

std::vector<CurvePoint> points_of(const reference::Json& one) {
  std::vector<CurvePoint> points;
  for (std::size_t i = 0; i < one.at("points").size(); ++i) {
    const auto& pair = one.at("points").at(i);
    const double weight = one.at("weights").is_null() ? 1.0 : one.at("weights").at(i).get<double>();
    points.push_back({Molar(pair.at(0).get<double>()), pair.at(1).get<double>(), weight});
  }
  return points;
}

std::vector<CurvePoint> of(std::initializer_list<std::pair<double, double>> pairs) {
  std::vector<CurvePoint> points;
  for (const auto& [concentration, response] : pairs)
    points.push_back({Molar(concentration), response});
  return points;
}

const std::vector<Molar> kAt{Molar(0.0), Molar(1e-8), Molar(1e-6)};

} // namespace

TEST_CASE("the band of every model agrees with the reference", "[pharmacology][band]") {
  const reference::Json file = reference::json("fit_band.json");
  REQUIRE(file.at("cases").size() == 8);
  for (const reference::Json& one : file.at("cases")) {
    CAPTURE(one.at("id").get<std::string>());
    const std::vector<CurvePoint> points = points_of(one);
    FitOptions options;
    options.response_level = 0.0;
    if (one.contains("fixed_basal")) options.fixed_basal = one.at("fixed_basal").get<double>();
    const CurveFit fit = fit_curve(points, *model_named(one.at("model").get<std::string>()), options);
    REQUIRE(fit.df == one.at("df").get<int>());
    REQUIRE_THAT(fit.rss.value(), WithinRel(one.at("rss").get<double>(), 1e-9));
    std::vector<Molar> at;
    for (const auto& place : one.at("band"))
      at.emplace_back(place.at("concentration").get<double>());
    const std::vector<BandLimits> band = confidence_band(fit, points, at);
    REQUIRE(band.size() == at.size());
    for (std::size_t i = 0; i < at.size(); ++i) {
      const auto& place = one.at("band").at(i);
      CAPTURE(at[i].value());
      const double low = place.at("low"), high = place.at("high"), half = (high - low) / 2.0;
      // The file's rule: a limit is off by no more than the estimates may be.
      CHECK_THAT(band[i].low, WithinAbs(low, 1e-5 * half));
      CHECK_THAT(band[i].high, WithinAbs(high, 1e-5 * half));
    }
  }
}

TEST_CASE("at the control the band is the interval of basal", "[pharmacology][band]") {
  const auto points = of(
      {{0, 281.2}, {1e-9, 279.1}, {1e-8, 271.9}, {1e-7, 220.3}, {1e-6, 118.2}, {1e-5, 92.1}, {1e-4, 93.4}});
  const CurveFit fit = fit_curve(points, Model::richards);
  const auto band = confidence_band(fit, points, kAt);
  REQUIRE(band.size() == 3);
  CHECK_THAT(band[0].low, WithinAbs(fit.find("basal")->ci_low.value(), 1e-6));
  CHECK_THAT(band[0].high, WithinAbs(fit.find("basal")->ci_high.value(), 1e-6));
}

TEST_CASE("the band follows the response's unit, the order of points and the confidence",
          "[pharmacology][band]") {
  auto points = of({{0, 281.2}, {1e-9, 279.1}, {1e-8, 271.9}, {1e-7, 220.3}, {1e-6, 118.2}, {1e-5, 92.1}});
  const CurveFit fit = fit_curve(points, Model::hill);
  const auto band = confidence_band(fit, points, kAt);
  REQUIRE(band.size() == 3);
  SECTION("a change of unit scales it") {
    auto scaled = points;
    for (CurvePoint& point : scaled)
      point.response *= 4.0;
    const auto wide = confidence_band(fit_curve(scaled, Model::hill), scaled, kAt);
    REQUIRE(wide.size() == 3);
    CHECK_THAT(wide[1].high - wide[1].low, WithinRel(4.0 * (band[1].high - band[1].low), 1e-6));
  }
  SECTION("order does not matter") {
    std::swap(points[0], points[4]);
    const auto again = confidence_band(fit, points, kAt);
    CHECK_THAT(again[2].low, WithinRel(band[2].low, 1e-12));
  }
  SECTION("less confidence is narrower") {
    const auto half = confidence_band(fit, points, kAt, 0.5);
    CHECK(half[1].high - half[1].low < 0.4 * (band[1].high - band[1].low));
    CHECK(confidence_band(fit, points, kAt, 1.0).empty());
  }
}

TEST_CASE("a mean that stands for no response has the band of a mean", "[pharmacology][band]") {
  const auto points = of({{0, 10.0}, {1e-9, 12.0}, {1e-8, 9.0}, {1e-7, 11.0}, {1e-6, 10.0}, {1e-5, 11.5}});
  const CurveFit fit = fit_curve(points, Model::hill);
  REQUIRE(fit.has_flag("no_response"));
  const auto band = confidence_band(fit, points, kAt);
  REQUIRE(band.size() == 3);
  for (const BandLimits& limits : band) {
    CHECK_THAT(limits.low, WithinRel(fit.find("basal")->ci_low.value(), 1e-12));
    CHECK_THAT(limits.high, WithinRel(fit.find("basal")->ci_high.value(), 1e-12));
  }
}

TEST_CASE("there is no band where there is nothing to take it from", "[pharmacology][band]") {
  SECTION("declined") {
    const auto points = of({{0, 1.0}, {1e-8, 2.0}, {1e-7, 3.0}});
    CHECK(confidence_band(fit_curve(points, Model::hill), points, kAt).empty());
  }
  SECTION("no scatter") {
    std::vector<CurvePoint> points;
    for (const double c : {0.0, 1e-9, 1e-8, 1e-7, 1e-6, 1e-5})
      points.push_back({Molar(c), 100.0 + 50.0 * c / (c + 1e-7)});
    const CurveFit fit = fit_curve(points, Model::hill);
    REQUIRE(fit.has_flag("exact_fit"));
    CHECK(confidence_band(fit, points, kAt).empty());
  }
  SECTION("a parameter that is not finite: the plateau runs away") {
    const auto points = of({{0, 1.02}, {1e-9, 0.98}, {1e-8, 1.01}, {1e-7, 1.4}, {1e-6, 5.1}, {1e-5, 61.3}});
    const CurveFit fit = fit_curve(points, Model::hill);
    REQUIRE_FALSE(fit.find("emax")->estimate);
    CHECK(confidence_band(fit, points, kAt).empty());
  }
  SECTION("points that are not those of the fit") {
    auto points = of({{0, 281.2}, {1e-9, 279.1}, {1e-8, 271.9}, {1e-7, 220.3}, {1e-6, 118.2}, {1e-5, 92.1}});
    const CurveFit fit = fit_curve(points, Model::hill);
    points.pop_back();
    CHECK(confidence_band(fit, points, kAt).empty());
    CHECK(confidence_band(fit, {}, kAt).empty());
  }
}

TEST_CASE("the asymmetric curve gives its own responses back", "[pharmacology][band]") {
  // Closed form: half of the effect at the EC50, whatever the asymmetry.
  CurveFit fit;
  fit.model = "richards";
  fit.parameters = {{"basal", {180.0, {}, {}, {}, ""}},
                    {"emax", {320.0, {}, {}, {}, ""}},
                    {"pec50", {7.5, {}, {}, {}, ""}},
                    {"nh", {1.2, {}, {}, {}, ""}},
                    {"asymmetry", {0.4, {}, {}, {}, ""}}};
  CHECK_THAT(fitted_response(fit, Molar(0.0)).value(), WithinRel(180.0, 1e-12));
  CHECK_THAT(fitted_response(fit, Molar(std::pow(10.0, -7.5))).value(), WithinRel(250.0, 1e-12));
  CHECK_THAT(fitted_response(fit, Molar(1.0)).value(), WithinRel(320.0, 1e-6));
}
