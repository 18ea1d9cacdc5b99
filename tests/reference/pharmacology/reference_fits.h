// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cmath>
#include <functional>
#include <numbers>
#include <string>
#include <vector>

#include <catch2/catch.hpp>

#include "numerics/distributions.h"
#include "pharmacology/fit.h"
#include "reference/reference_data.h"

/// Comparison of a fit with a reference case by the rules in the reference files. Reference values were
/// computed with 50 digits; the rules (and why they are what they are) stand in each file under "tolerance".
namespace reference {

using chronodrome::Molar;
using chronodrome::pharmacology::CurveFit;
using chronodrome::pharmacology::CurvePoint;
using chronodrome::pharmacology::Estimate;

inline std::vector<CurvePoint> points(
    const Table& table, const std::string& concentration, const std::string& response,
    const std::function<bool(std::size_t)>& wanted = [](std::size_t) { return true; }) {
  std::vector<CurvePoint> result;
  for (std::size_t row = 0; row < table.rows.size(); ++row) {
    if (!wanted(row)) continue;
    result.push_back({Molar(table.number(row, concentration)), table.number(row, response), 1.0});
  }
  REQUIRE_FALSE(result.empty());
  return result;
}

/// Our name for a parameter of the reference files, and +1 or -1 for its sign.
struct Name {
  std::string ours;
  double sign;
};
inline Name name_of(const std::string& theirs) {
  if (theirs == "logEC50") return {"pec50", -1.0};
  if (theirs == "Emax" || theirs == "Vm") return {"emax", 1.0};
  if (theirs == "nH") return {"nh", 1.0};
  return {theirs, 1.0};
}

constexpr double kEstimateInSe = 1e-5;
constexpr double kSeRelative = 1e-6;
constexpr double kRssRelative = 1e-9;
constexpr double kLimitInSe = 1e-4;

inline void check_limit(const std::optional<double>& ours, const Json& theirs, double sign, double se) {
  if (theirs.is_null()) {
    CHECK_FALSE(ours.has_value());
    return;
  }
  REQUIRE(ours.has_value());
  CHECK_THAT(*ours, Catch::Matchers::WithinAbs(sign * theirs.get<double>(), kLimitInSe * se));
}

/// Estimates, standard errors, t and profile limits, RSS, df, scatter and the information criterion.
inline void check_fit(const CurveFit& fit, const Json& expected) {
  using Catch::Matchers::WithinAbs;
  using Catch::Matchers::WithinRel;
  REQUIRE(fit.converged);
  CHECK(fit.df == expected.at("df").get<int>());
  CHECK(fit.n_points == expected.at("n").get<std::size_t>());
  CHECK_THAT(fit.rss.value(), WithinRel(expected.at("rss").get<double>(), kRssRelative));
  CHECK_THAT(fit.residual_sd.value(), WithinRel(expected.at("sigma").get<double>(), kRssRelative));
  for (const auto& [theirs, value] : expected.at("estimates").items()) {
    const Name name = name_of(theirs);
    const double se = expected.at("standard_errors").at(theirs).get<double>();
    CAPTURE(theirs);
    const Estimate* ours = fit.find(name.ours);
    REQUIRE(ours);
    CHECK_THAT(ours->estimate.value(), WithinAbs(name.sign * value.get<double>(), kEstimateInSe * se));
    CHECK_THAT(ours->se.value(), WithinRel(se, kSeRelative));
    const Json& wald = expected.at("ci95_wald").at(theirs);
    const double half = chronodrome::numerics::student_t_quantile(0.975, fit.df) * *ours->se;
    CHECK_THAT(*ours->estimate - name.sign * half,
               WithinAbs(name.sign * wald.at(0).get<double>(), kEstimateInSe * se));
    if (!expected.contains("ci95_profile") || !expected.at("ci95_profile").contains(theirs)) continue;
    const Json& profile = expected.at("ci95_profile").at(theirs);
    check_limit(name.sign > 0.0 ? ours->ci_low : ours->ci_high, profile.at(0), name.sign, se);
    check_limit(name.sign > 0.0 ? ours->ci_high : ours->ci_low, profile.at(1), name.sign, se);
  }
  if (expected.contains("AICc") && !expected.at("AICc").is_null()) {
    const double n = static_cast<double>(fit.n_points);
    const double constant = n * (1.0 + std::log(2.0 * std::numbers::pi)); // left out of our criterion
    CHECK_THAT(fit.aicc.value() + constant, WithinAbs(expected.at("AICc").get<double>(), 1e-7));
  }
}

} // namespace reference
