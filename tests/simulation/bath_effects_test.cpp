// Chronodrome, GPL-3.0-or-later.
#include "simulation/bath_effects.h"

#include <catch2/catch.hpp>
#include <cmath>

#include "scenarios.h"
#include "simulation/conditions.h"

using namespace chronodrome;
using namespace chronodrome::test_simulation;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;

namespace {

Scenario with_agent(const Effect& effect) {
  Scenario scenario = quiet_heart(300, 600);
  scenario.agents = {{"acetylcholine", {effect}, {}}};
  return scenario;
}

} // namespace

TEST_CASE("the Hill curve passes its known points", "[simulation][effects]") {
  CHECK(hill_fraction(0.0, 7.0, 1.3) == 0.0);
  // Half at EC50 whatever the slope; rounding of one power of ten.
  for (const double nh : {0.8, 1.0, 2.5})
    CHECK_THAT(hill_fraction(1e-7, 7.0, nh), WithinRel(0.5, 1e-12));
  CHECK_THAT(hill_fraction(9e-7, 7.0, 1.0), WithinRel(0.9, 1e-12));
  CHECK_THAT(hill_fraction(1e-7 / 9.0, 7.0, 1.0), WithinRel(0.1, 1e-12));
  // EC90 / EC10 = 81^(1/nh) (standard property of the Hill equation).
  CHECK_THAT(hill_fraction(1e-7 * std::pow(81.0, 0.5 / 1.6), 7.0, 1.6), WithinRel(0.9, 1e-12));
  CHECK_THAT(hill_fraction(1.0, 7.0, 1.0), WithinAbs(1.0, 1.1e-7));
}

TEST_CASE("an effect starts at arrival and follows exponentially", "[simulation][effects]") {
  Scenario scenario = with_agent(effect_on(EffectTarget::rate, 0.4, 6.0, 1.0));
  scenario.preparation.arrival_delay = Seconds(5.0);
  scenario.agents[0].effects[0].onset_tau = Seconds(12.0);
  scenario.protocol = {addition(100, "acetylcholine", 1e-6)};
  const BathEffects effects(scenario);
  CHECK(effects.ratio_at(EffectTarget::rate, Seconds(104.9)) == 1.0);
  // Half of the maximal effect in the long run: 1 - 0.6 / 2 = 0.7.
  const auto expected = [](double since) { return 1.0 - 0.3 * (1.0 - std::exp(-since / 12.0)); };
  for (const double since : {0.0, 1.0, 12.0, 60.0})
    CHECK_THAT(effects.ratio_at(EffectTarget::rate, Seconds(105 + since)), WithinRel(expected(since), 1e-12));
  CHECK(effects.ratio_at(EffectTarget::delay, Seconds(300)) == 1.0);
}

TEST_CASE("a washout lets the effect wane with its own time constant", "[simulation][effects]") {
  Scenario scenario = with_agent(effect_on(EffectTarget::force, 2.0, 6.0, 1.0));
  scenario.agents[0].effects[0].washout_tau = Seconds(30.0);
  LoggedEvent washout;
  washout.time = Seconds(400);
  washout.kind = protocol::EventKind::washout;
  scenario.protocol = {addition(0, "acetylcholine", 1e-6), washout};
  const BathEffects effects(scenario);
  // 400 s are 40 time constants of the onset: the plateau of 1.5 is reached to 1e-17.
  CHECK_THAT(effects.ratio_at(EffectTarget::force, Seconds(430)),
             WithinRel(1.0 + 0.5 * std::exp(-1.0), 1e-12));
  CHECK(bath_after(scenario.protocol, 2).empty());
}

TEST_CASE("concentrations are cumulative totals, not increments", "[simulation][effects]") {
  Scenario scenario = with_agent(effect_on(EffectTarget::rate, 0.0, 6.0, 1.0));
  LoggedEvent second = addition(200, "Acetylcholine ", 3.0);
  second.unit = "uM";
  scenario.protocol = {addition(0, "acetylcholine", 1e-6), second};
  CHECK_THAT(bath_after(scenario.protocol, 2).at("acetylcholine"), WithinRel(3e-6, 1e-15));
  CHECK_THAT(BathEffects(scenario).ratio_at(EffectTarget::rate, Seconds(590)), WithinRel(0.25, 1e-9));
}

TEST_CASE("a competitive antagonist shifts the curve by its concentration ratio", "[simulation][effects]") {
  Scenario scenario = with_agent(effect_on(EffectTarget::rate, 0.4, 7.0, 1.2));
  scenario.agents.push_back({"atropine", {}, {{"acetylcholine", 9.0, 1.0}}});
  LoggedEvent block = addition(0, "atropine", 1e-8);
  block.kind = protocol::EventKind::antagonist;
  scenario.protocol = {block, addition(100, "acetylcholine", 1e-6)};
  const Bath bath = bath_after(scenario.protocol, 2);
  // Gaddum equation (IUPHAR usage): EC50 times 1 + [B]/KB = 11.
  CHECK_THAT(pec50_in(scenario.agents[0].effects[0], "acetylcholine", scenario, bath),
             WithinAbs(7.0 - std::log10(11.0), 1e-12));
  CHECK_THAT(BathEffects(scenario).settled_ratio(EffectTarget::rate, bath),
             WithinRel(1.0 - 0.6 * hill_fraction(1e-6, 7.0 - std::log10(11.0), 1.2), 1e-12));
}

TEST_CASE("an effect on the delay is a Hill curve of the steady delay at whatever rate",
          "[simulation][effects]") {
  Scenario scenario = with_agent(effect_on(EffectTarget::delay, 1.8, 6.0, 1.0));
  scenario.agents[0].effects.push_back(effect_on(EffectTarget::rate, 0.7, 6.3, 1.0));
  scenario.agents[0].effects.push_back(effect_on(EffectTarget::recovery_tau, 1.5, 6.0, 1.0));
  const Conditions conditions(scenario);
  const double basal = steady_delay(scenario.node, milliseconds(300)).value().value();
  for (const double molar : {1e-8, 1e-6, 1e-4}) {
    const Bath bath{{"acetylcholine", molar}};
    const Seconds cycle(60.0 / conditions.settled_rate(bath).value());
    const auto delay = steady_delay(conditions.settled_node(bath), cycle);
    REQUIRE(delay.has_value());
    const double expected = basal * (1.0 + 0.8 * hill_fraction(molar, 6.0, 1.0));
    CHECK_THAT(delay->value(), WithinAbs(expected, 1e-11)); // bisection to 1e-12 s
  }
}
