// Chronodrome, GPL-3.0-or-later.
#include "simulation/truth.h"

#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <map>
#include <numbers>
#include <set>

#include "scenarios.h"
#include "simulation/bath_effects.h"
#include "simulation/simulate.h"

using namespace chronodrome;
using namespace chronodrome::test_simulation;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;

namespace {

std::set<std::string> kinds(const Truth& truth) {
  std::set<std::string> found;
  for (const TrueEpisode& episode : truth.rhythm)
    found.insert(episode.kind);
  return found;
}

std::vector<TrueResponse> responses(const Truth& truth, const std::string& measure) {
  std::vector<TrueResponse> found;
  for (const TrueResponse& row : truth.responses) {
    if (row.measure == measure) found.push_back(row);
  }
  return found;
}

/// Each activation of the two channels stands in exactly one row.
void check_rows(const Simulated& made) {
  std::multiset<double> from, to;
  for (const TrueDelay& row : made.truth.pathways[0].rows) {
    if (row.from) from.insert(row.from->value());
    if (row.to) to.insert(row.to->value());
    CHECK((row.from || row.to));
    if (row.kind == DelayKind::blocked) CHECK((row.from && !row.to));
    if (row.kind == DelayKind::unpaired) CHECK((!row.from && row.to));
    if (row.kind == DelayKind::conducted) CHECK(row.delay().value() > Seconds(0));
    if (row.kind == DelayKind::retrograde) CHECK(row.delay().value() < Seconds(0));
  }
  const auto compare = [](const std::multiset<double>& rows, const TrueActivations& channel) {
    REQUIRE(rows.size() == channel.times.size());
    auto at = rows.begin();
    for (const Seconds time : channel.times)
      CHECK(*at++ == time.value());
  };
  compare(from, made.truth.activations[0]);
  compare(to, made.truth.activations[1]);
}

} // namespace

TEST_CASE("every activation stands in exactly one row of its pathway", "[simulation][truth]") {
  SECTION("under 4:3 Wenckebach") {
    const Simulated made = simulate(quiet_heart(150, 30)).value();
    check_rows(made);
    std::map<std::string, int> states;
    for (const TrueDelay& row : made.truth.pathways[0].rows)
      ++states[name_of(row.kind)];
    CHECK(std::abs(states["conducted"] - 150) <= 2); // three of four of 200 beats
    CHECK(std::abs(states["blocked"] - 50) <= 2);
  }
  SECTION("with escape, premature and retrograde beats") {
    Scenario scenario = quiet_heart(350, 40);
    scenario.retrograde = AvNode{Seconds(0.055), Seconds(0.0), Seconds(0.07), Seconds(0.03)};
    scenario.escape.ventricular = Seconds(0.9);
    scenario.sinus.pauses = {{Seconds(20), Seconds(3)}};
    scenario.premature = {{Seconds(10.07), Chamber::ventricular, true},
                          {Seconds(15.11), Chamber::atrial, true}};
    const Simulated made = simulate(scenario).value();
    check_rows(made);
    const auto found = kinds(made.truth);
    for (const char* kind : {"ventricular_escape", "premature_ventricular", "premature_atrial", "retrograde"})
      CHECK(found.count(kind) == 1);
  }
}

TEST_CASE("conduction offsets of the electrodes enter times and delays", "[simulation][truth]") {
  Scenario scenario = quiet_heart(300, 10);
  scenario.channels[0].offset = milliseconds(4);
  scenario.channels[1].offset = milliseconds(11);
  const Simulated made = simulate(scenario).value();
  const double node = steady_delay(scenario.node, milliseconds(300)).value().value();
  const auto& rows = made.truth.pathways[0].rows;
  CHECK_THAT(rows[20].delay()->value(), WithinAbs(node + 0.007, 3e-9)); // times on 1e-9 s
}

TEST_CASE("a His electrode divides the delay", "[simulation][truth]") {
  Scenario scenario = quiet_heart(300, 10);
  scenario.his_to_ventricle = milliseconds(14);
  scenario.channels.push_back(electrode("H", recording::Role::his, recording::Lead::bipolar));
  scenario.pathways = {{"AH", "RA", "H", std::nullopt}, {"HV", "H", "RV", 7.0}};
  scenario.agents = {{"nothing", {}, {}}};
  scenario.protocol = {addition(5, "nothing", 1e-6)};
  scenario.measures = {"delay:AH", "delay:HV", "velocity:HV"};
  const Simulated made = simulate(scenario).value();
  const double node = in_milliseconds(steady_delay(scenario.node, milliseconds(300)).value());
  CHECK_THAT(in_milliseconds(*made.truth.pathways[0].rows[20].delay()), WithinAbs(node - 14, 3e-6));
  CHECK_THAT(in_milliseconds(*made.truth.pathways[1].rows[20].delay()), WithinAbs(14, 3e-6));
  CHECK_THAT(*responses(made.truth, "delay:AH")[0].value, WithinRel(node - 14, 1e-9));
  CHECK_THAT(*responses(made.truth, "delay:HV")[1].value, WithinRel(14, 1e-9));
  CHECK_THAT(*responses(made.truth, "velocity:HV")[1].value, WithinRel(0.5, 1e-9)); // 7 mm in 14 ms
}

TEST_CASE("rhythm episodes carry the names of what the node does", "[simulation][truth]") {
  const auto kinds_at = [](double cycle_ms) {
    return kinds(simulate(quiet_heart(cycle_ms, 60)).value().truth);
  };
  CHECK(kinds_at(300) == std::set<std::string>{"regular"});
  CHECK(kinds_at(150).count("wenckebach") == 1);
  // At 100 ms the rested node passes two beats once (3:2) before it settles to 2:1.
  const Truth half = simulate(quiet_heart(100, 60)).value().truth;
  double settled = 0;
  for (const TrueEpisode& episode : half.rhythm) {
    if (episode.kind == "two_to_one") settled += (episode.end - episode.start).value();
  }
  CHECK(settled > 59);
  Scenario blocked = quiet_heart(300, 60);
  blocked.node.recovery_min = Seconds(1e10);
  blocked.escape.junctional = Seconds(1.0);
  const auto found = kinds(simulate(blocked).value().truth);
  CHECK(found.count("complete_av_block") == 1);
  CHECK(found.count("junctional_escape") == 1);
  CHECK(found.count("two_to_one") == 0);
}

TEST_CASE("a pause and an arrest are told apart by their length", "[simulation][truth]") {
  Scenario scenario = quiet_heart(300, 60);
  scenario.sinus.pauses = {{Seconds(20), Seconds(1)}, {Seconds(30), Seconds(6)}};
  const Truth truth = simulate(scenario).value().truth;
  std::size_t pauses = 0, arrests = 0;
  for (const TrueEpisode& episode : truth.rhythm) {
    const double length = (episode.end - episode.start).value();
    if (episode.kind == "sinus_pause") {
      ++pauses;
      CHECK((length > 1.0 && length < 1.35));
      CHECK(episode.end == Seconds(21));
    }
    if (episode.kind == "arrest") {
      ++arrests;
      CHECK((length > 6.0 && length < 6.35));
    }
  }
  CHECK(pauses == 1);
  CHECK(arrests == 1);
}

TEST_CASE("each stimulus is a paced row of at most a second", "[simulation][truth]") {
  Scenario scenario = quiet_heart(300, 20);
  PacingTrain train;
  train.start = Seconds(5);
  train.cycle = Seconds(0.25);
  train.beats = 4;
  scenario.pacing = {train};
  std::vector<double> lengths;
  const Truth truth = simulate(scenario).value().truth;
  for (const TrueEpisode& episode : truth.rhythm) {
    if (episode.kind == "paced") lengths.push_back((episode.end - episode.start).value());
  }
  REQUIRE(lengths.size() == 4);
  CHECK_THAT(lengths[0], WithinAbs(0.25, 2e-9));
  CHECK_THAT(lengths[3], WithinAbs(1.0, 2e-9));
}

TEST_CASE("steps and curves follow the drug log", "[simulation][truth]") {
  Scenario scenario = quiet_heart(300, 1000);
  scenario.preparation.arrival_delay = Seconds(5);
  scenario.agents = {{"carbachol", {effect_on(EffectTarget::rate, 0.4, 6.5, 1.2)}, {}},
                     {"atropine", {}, {{"carbachol", 9.0, 1.0}}}};
  LoggedEvent washout;
  washout.time = Seconds(300);
  washout.kind = protocol::EventKind::washout;
  LoggedEvent block = addition(500, "atropine", 1e-8);
  block.kind = protocol::EventKind::antagonist;
  scenario.protocol = {addition(100, "carbachol", 1e-7), addition(200, "carbachol", 1e-6), washout, block,
                       addition(700, "carbachol", 1e-6)};
  scenario.measures = {"rate:RA"};
  const Truth truth = simulate(scenario).value().truth;
  const auto rows = responses(truth, "rate:RA");
  REQUIRE(rows.size() == 5); // control and two, control and one
  CHECK(rows[0].concentration == 0.0);
  CHECK(rows[0].step_end == Seconds(100));
  CHECK(rows[1].step_start == Seconds(105));
  CHECK(rows[1].step_end == Seconds(200));
  CHECK(rows[2].step_end == Seconds(300));
  CHECK(rows[3].curve == 2);
  CHECK(rows[3].background == "atropine 1e-08 M");
  CHECK(rows[3].step_start == Seconds(505));
  CHECK(rows[4].step_end == Seconds(1000));
  const auto rate = [](double molar, double pec50) {
    return 200.0 * (1 - 0.6 * hill_fraction(molar, pec50, 1.2));
  };
  CHECK_THAT(*rows[2].value, WithinRel(rate(1e-6, 6.5), 1e-12));
  CHECK_THAT(*rows[4].value, WithinRel(rate(1e-6, 6.5 - std::log10(11.0)), 1e-12));
  REQUIRE(truth.curves.size() == 2);
  CHECK(truth.curves[0].basal == 200.0);
  CHECK_THAT(truth.curves[0].emax, WithinRel(80.0, 1e-12));
  CHECK(truth.curves[0].pec50 == 6.5);
  CHECK_THAT(truth.curves[1].pec50, WithinRel(6.5 - std::log10(11.0), 1e-12));
}

TEST_CASE("true responses under block are those of the conducted beats", "[simulation][truth]") {
  Scenario scenario = quiet_heart(200, 400);
  scenario.agents = {{"blocker", {effect_on(EffectTarget::recovery_min, 4.2, 6.0, 4.0)}, {}}};
  scenario.protocol = {addition(100, "blocker", 1e-4)};
  scenario.measures = {"delay:AV", "conducted:AV", "rate:RV", "rate:RA"};
  const Truth truth = simulate(scenario).value().truth;
  // Blocked to r = 126 ms, above the 1:1 fixed point of 122.87. After a drop the node is rested (delay 60.2),
  // then r = 139.8 (delay 72.2), r = 127.8 (delay 75.5), r = 124.5: blocked. That is 4:3, median delay 72.2.
  const auto share = responses(truth, "conducted:AV");
  CHECK(*share[0].value == 1.0);
  CHECK_THAT(*share[1].value, WithinAbs(0.75, 0.001));                      // ends of 1500 beats
  CHECK_THAT(*responses(truth, "delay:AV")[1].value, WithinAbs(72.2, 0.1)); // worked by hand to 0.1
  CHECK_THAT(*responses(truth, "rate:RV")[1].value, WithinRel(300.0 * *share[1].value, 0.002)); // 1500 beats
  CHECK(*responses(truth, "rate:RA")[1].value == 300.0);
  for (const TrueCurve& curve : truth.curves)
    CHECK(curve.measure != "delay:AV"); // no Hill curve shapes it
}

TEST_CASE("complete block censors the delay and silence arrests the rate", "[simulation][truth]") {
  Scenario scenario = quiet_heart(300, 400);
  scenario.agents = {{"blocker", {effect_on(EffectTarget::recovery_min, 1e6, 6.0, 1.0)}, {}},
                     {"stopper", {effect_on(EffectTarget::rate, 0.0, 6.0, 1.0)}, {}}};
  scenario.protocol = {addition(100, "blocker", 1e-3), addition(250, "stopper", 1e-2)};
  scenario.escape.ventricular = Seconds(1.5);
  const Truth truth = simulate(scenario).value().truth;
  const auto delays = responses(truth, "delay:AV");
  CHECK(delays[1].status == "censored");
  CHECK_FALSE(delays[1].value.has_value());
  CHECK(delays[3].status == "arrested"); // no atrial beat
  CHECK(responses(truth, "rate:RA")[3].status == "arrested");
  CHECK_THAT(*responses(truth, "rate:RV")[1].value, WithinRel(40.0, 1e-6)); // escape every 1.5 s
  CHECK(kinds(truth).count("arrest") == 1);
}

TEST_CASE("developed pressure and its steepest rise have their closed forms", "[simulation][truth]") {
  Scenario scenario = quiet_heart(300, 300);
  ChannelPlan pressure = electrode("LVP", recording::Role::pressure, recording::Lead::none);
  pressure.unit = "mmHg";
  pressure.amplitude = 80.0;
  pressure.rise = milliseconds(50);
  scenario.channels.push_back(pressure);
  scenario.agents = {{"isoprenaline", {effect_on(EffectTarget::pressure, 1.5, 8.0, 1.0)}, {}}};
  scenario.protocol = {addition(100, "isoprenaline", 1e-8)};
  const Truth truth = simulate(scenario).value().truth;
  CHECK(*responses(truth, "pressure:LVP")[0].value == 80.0);
  CHECK_THAT(*responses(truth, "pressure:LVP")[1].value, WithinRel(100.0, 1e-12));
  CHECK_THAT(*responses(truth, "dpdt_max:LVP")[1].value, WithinRel(100.0 * std::numbers::pi / 0.1, 1e-12));
  CHECK(responses(truth, "dpdt_max:LVP")[0].unit == "mmHg/s");
}
