// Chronodrome, GPL-3.0-or-later.
#include "simulation/heart.h"

#include <catch2/catch.hpp>
#include <cmath>

#include "scenarios.h"

using namespace chronodrome;
using namespace chronodrome::test_simulation;
using Catch::Matchers::WithinAbs;

namespace {

// Times are kept on 1e-9 s, so an interval of two is right to 1e-9 s.
constexpr double kNanosecond = 1.5e-9;

Beats run(const Scenario& scenario) {
  const HeartState state{[&](Seconds) { return scenario.sinus.rate; },
                         [&](Seconds) { return scenario.node; }};
  return run_heart(scenario, state, scenario.duration);
}

std::size_t count(const Beats& beats, VentricularOrigin origin) {
  std::size_t found = 0;
  for (const VentricularBeat& beat : beats.ventricular)
    found += beat.origin == origin ? 1U : 0U;
  return found;
}

std::size_t blocked(const Beats& beats) {
  std::size_t found = 0;
  for (const AtrialBeat& beat : beats.atrial)
    found += beat.ventricular ? 0U : 1U;
  return found;
}

double delay_ms(const Beats& beats, const AtrialBeat& beat) {
  return in_milliseconds(beats.ventricular[*beat.ventricular].time - beat.time);
}

} // namespace

TEST_CASE("the whole heart gives the node's 4:3 Wenckebach at 150 ms", "[simulation][heart]") {
  const Beats beats = run(quiet_heart(150, 60));
  std::size_t first = 100;
  while (beats.atrial[first - 1].ventricular)
    ++first;
  // Delays of the node table, printed to 0.001 ms; times are kept on 1e-6 ms.
  const double expected[] = {66.734, 97.826, 130.446};
  for (std::size_t i = 0; i < 3; ++i)
    CHECK_THAT(delay_ms(beats, beats.atrial[first + i]), WithinAbs(expected[i], 0.0006));
  CHECK_FALSE(beats.atrial[first + 3].ventricular.has_value());
  const double pause = in_milliseconds(beats.ventricular[*beats.atrial[first + 4].ventricular].time -
                                       beats.ventricular[*beats.atrial[first + 2].ventricular].time);
  CHECK_THAT(pause, WithinAbs(236.289, 0.001)); // 2 * 150 - (130.446 - 66.734)
}

TEST_CASE("block appears as the cycle shortens: 1:1, Wenckebach, 2:1", "[simulation][heart]") {
  CHECK(blocked(run(quiet_heart(200, 60))) <= 1); // the last beat may still be under way
  const Beats wenckebach = run(quiet_heart(160, 60));
  CHECK_THAT(static_cast<double>(blocked(wenckebach)) / static_cast<double>(wenckebach.atrial.size()),
             WithinAbs(0.2, 0.01)); // 5:4, edges of 375 beats
  const Beats half = run(quiet_heart(100, 60));
  CHECK_THAT(static_cast<double>(blocked(half)) / static_cast<double>(half.atrial.size()),
             WithinAbs(0.5, 0.01)); // 2:1
  CHECK_THAT(delay_ms(half, half.atrial[half.ventricular[200].atrial.value()]), WithinAbs(77.132, 0.0006));
}

TEST_CASE("a quiet sinus node keeps its cycle exactly", "[simulation][heart]") {
  const Beats beats = run(quiet_heart(237, 30));
  for (std::size_t i = 1; i < beats.atrial.size(); ++i)
    CHECK_THAT((beats.atrial[i].time - beats.atrial[i - 1].time).value(), WithinAbs(0.237, kNanosecond));
  // The first beat comes within the first cycle, at a time that the seed draws: off the sample grid.
  CHECK(beats.atrial.front().time < Seconds(0.237));
  CHECK(std::abs(beats.atrial.front().time.value() * 1000.0 -
                 std::round(beats.atrial.front().time.value() * 1000.0)) > 1e-4);
}

TEST_CASE("the junction escapes when nothing conducts", "[simulation][heart]") {
  Scenario scenario = quiet_heart(300, 60);
  scenario.node.recovery_min = Seconds(1e10); // complete block: the node never recovers
  scenario.escape.junctional = Seconds(0.9);
  const Beats beats = run(scenario);
  REQUIRE(count(beats, VentricularOrigin::junctional_escape) == beats.ventricular.size());
  CHECK(beats.ventricular.size() == 66); // 60 s / 0.9 s
  for (std::size_t i = 1; i < beats.ventricular.size(); ++i)
    CHECK_THAT((beats.ventricular[i].time - beats.ventricular[i - 1].time).value(),
               WithinAbs(0.9, kNanosecond));
  // A junctional beat passes the His bundle on its way.
  CHECK_THAT((beats.ventricular[5].time - *beats.ventricular[5].his).value(), WithinAbs(0.010, kNanosecond));
}

TEST_CASE("the faster escape focus keeps the slower one silent", "[simulation][heart]") {
  Scenario scenario = quiet_heart(300, 60);
  scenario.node.recovery_min = Seconds(1e10);
  scenario.escape.junctional = Seconds(0.9);
  scenario.escape.ventricular = Seconds(1.6);
  CHECK(count(run(scenario), VentricularOrigin::ventricular_escape) == 0);
  scenario.escape.junctional = Seconds(0.0);
  const Beats beats = run(scenario);
  CHECK(count(beats, VentricularOrigin::ventricular_escape) == 37); // 60 / 1.6
  CHECK_FALSE(beats.ventricular[3].his.has_value());
}

TEST_CASE("an escape beat comes one escape interval into a pause and not before", "[simulation][heart]") {
  Scenario scenario = quiet_heart(250, 20);
  scenario.sinus.pauses = {{Seconds(10.0), Seconds(2.5)}};
  scenario.escape.ventricular = Seconds(1.2);
  const Beats beats = run(scenario);
  REQUIRE(count(beats, VentricularOrigin::ventricular_escape) == 2);
  for (std::size_t i = 1; i < beats.ventricular.size(); ++i) {
    if (beats.ventricular[i].origin == VentricularOrigin::ventricular_escape)
      CHECK_THAT((beats.ventricular[i].time - beats.ventricular[i - 1].time).value(),
                 WithinAbs(1.2, kNanosecond));
  }
  for (const AtrialBeat& beat : beats.atrial)
    CHECK((beat.time < Seconds(10.0) || beat.time >= Seconds(12.5)));
}

TEST_CASE("a premature atrial beat that resets the node gives less than a full pause",
          "[simulation][heart]") {
  Scenario scenario = quiet_heart(300, 10);
  const Beats before = run(scenario);
  const Seconds early = before.atrial[10].time + Seconds(0.18);
  scenario.premature = {{early, Chamber::atrial, true}};
  const Beats reset = run(scenario);
  CHECK(reset.atrial[11].origin == AtrialOrigin::premature);
  CHECK_THAT((reset.atrial[12].time - reset.atrial[11].time).value(), WithinAbs(0.3, kNanosecond));
  // Not reset: the node keeps its beat, and the pause compensates.
  scenario.premature[0].resets_sinus = false;
  const Beats kept = run(scenario);
  CHECK_THAT((kept.atrial[12].time - kept.atrial[10].time).value(), WithinAbs(0.3, kNanosecond));
}

TEST_CASE("a sinus impulse that meets a refractory atrium is lost: full compensatory pause",
          "[simulation][heart]") {
  Scenario scenario = quiet_heart(300, 10);
  scenario.atrial_refractory = Seconds(0.150);
  const Seconds early = run(scenario).atrial[10].time + Seconds(0.2);
  scenario.premature = {{early, Chamber::atrial, false}};
  const Beats beats = run(scenario);
  CHECK_THAT((beats.atrial[12].time - beats.atrial[10].time).value(), WithinAbs(0.6, kNanosecond));
}

TEST_CASE("a premature ventricular beat blocks the next atrial one and the pause compensates fully",
          "[simulation][heart]") {
  Scenario scenario = quiet_heart(300, 10);
  const Beats before = run(scenario);
  // 20 ms before the next atrial beat: the node has just been entered from below.
  scenario.premature = {{before.atrial[11].time - Seconds(0.02), Chamber::ventricular, true}};
  const Beats beats = run(scenario);
  CHECK_FALSE(beats.atrial[11].ventricular.has_value());
  REQUIRE(count(beats, VentricularOrigin::premature) == 1);
  const std::size_t next = beats.atrial[12].ventricular.value();
  const std::size_t last = beats.atrial[10].ventricular.value();
  CHECK(next == last + 2);
  // V before and V after stand two cycles apart, up to the node's better recovery after the pause.
  CHECK_THAT((beats.ventricular[next].time - beats.ventricular[last].time).value(), WithinAbs(0.6, 0.005));
}

TEST_CASE("retrograde conduction activates the atrium and resets the sinus node", "[simulation][heart]") {
  Scenario scenario = quiet_heart(400, 10);
  scenario.retrograde = AvNode{Seconds(0.055), Seconds(0.0), Seconds(0.07), Seconds(0.03)};
  const Beats before = run(scenario);
  scenario.premature = {{before.atrial[8].time + Seconds(0.2), Chamber::ventricular, true}};
  const Beats beats = run(scenario);
  const AtrialBeat& back = beats.atrial[9];
  REQUIRE(back.origin == AtrialOrigin::retrograde);
  const VentricularBeat& cause = beats.ventricular[back.ventricular.value()];
  CHECK(cause.origin == VentricularOrigin::premature);
  CHECK_THAT((back.time - cause.time).value(), WithinAbs(0.055, kNanosecond));
  CHECK(cause.atrial == std::optional<std::size_t>(9));
  CHECK_THAT((beats.atrial[10].time - back.time).value(), WithinAbs(0.4, kNanosecond));
}

TEST_CASE("pacing captures with its latency, and a late extrastimulus does not conduct",
          "[simulation][heart]") {
  Scenario scenario = quiet_heart(320, 10);
  PacingTrain train;
  train.start = Seconds(4.1); // away from the sinus beat at 3.996 s, which would refuse the first capture
  train.cycle = Seconds(0.2);
  train.beats = 12;
  train.premature = milliseconds(105); // the refractory period of this node after 200 ms is 107.13 ms
  scenario.pacing = {train};
  const Beats beats = run(scenario);
  REQUIRE(beats.stimuli.size() == 13);
  std::vector<std::size_t> paced;
  for (std::size_t i = 0; i < beats.atrial.size(); ++i) {
    if (beats.atrial[i].origin == AtrialOrigin::paced) paced.push_back(i);
  }
  REQUIRE(paced.size() == 13);
  for (std::size_t i = 0; i < paced.size(); ++i)
    CHECK_THAT((beats.atrial[paced[i]].time - beats.stimuli[i].time).value(), WithinAbs(0.009, kNanosecond));
  CHECK_THAT((beats.atrial[paced[12]].time - beats.atrial[paced[11]].time).value(),
             WithinAbs(0.105, kNanosecond));
  CHECK(beats.atrial[paced[11]].ventricular.has_value());
  CHECK_FALSE(beats.atrial[paced[12]].ventricular.has_value());
  scenario.pacing[0].premature = milliseconds(112);
  const Beats later = run(scenario);
  CHECK(later.atrial[paced[12]].ventricular.has_value());
}

TEST_CASE("overdrive lengthens the first spontaneous cycle and the excess fades", "[simulation][heart]") {
  Scenario scenario = quiet_heart(300, 20);
  PacingTrain train;
  train.start = Seconds(3.0);
  train.cycle = Seconds(0.22);
  train.beats = 30;
  scenario.pacing = {train};
  scenario.sinus.overdrive = {0.5, 10.0};
  const Beats beats = run(scenario);
  std::size_t last = 0;
  for (std::size_t i = 0; i < beats.atrial.size(); ++i) {
    if (beats.atrial[i].origin == AtrialOrigin::paced) last = i;
  }
  // 1 + 0.5 (1 - exp(-30 / 10)), then its excess times exp(-1/5).
  const double excess = 0.5 * (1 - std::exp(-3.0));
  CHECK_THAT((beats.atrial[last + 1].time - beats.atrial[last].time).value(),
             WithinAbs(0.3 * (1 + excess), kNanosecond));
  CHECK_THAT((beats.atrial[last + 2].time - beats.atrial[last + 1].time).value(),
             WithinAbs(0.3 * (1 + excess * std::exp(-0.2)), kNanosecond));
}

TEST_CASE("a tired node conducts more slowly, with the stated half-time", "[simulation][heart]") {
  Scenario scenario = quiet_heart(200, 200);
  scenario.node.delay_span = Seconds(0.0);
  scenario.fatigue = {milliseconds(12), Seconds(25.0), Seconds(0.15)};
  const Beats beats = run(scenario);
  const auto delay_at = [&](double time) {
    std::size_t i = 0;
    while (beats.atrial[i].time < Seconds(time))
      ++i;
    return delay_ms(beats, beats.atrial[i]);
  };
  // 12 (1 - exp(-t / tau)): half at tau ln 2, nearly all after 7 tau. One cycle of 0.2 s is 0.1 ms here.
  CHECK_THAT(delay_at(25.0 * std::log(2.0)) - 60.0, WithinAbs(6.0, 0.1));
  CHECK_THAT(delay_at(180) - 60.0, WithinAbs(12.0, 0.02));
}

TEST_CASE("below its slowest rate the sinus node is silent", "[simulation][heart]") {
  Scenario scenario = quiet_heart(300, 60);
  scenario.sinus.slowest = BeatsPerMinute(20.0);
  const HeartState state{
      [](Seconds time) { return BeatsPerMinute(time > Seconds(20) && time < Seconds(40) ? 5.0 : 200.0); },
      [&](Seconds) { return scenario.node; }};
  const Beats beats = run_heart(scenario, state, scenario.duration);
  for (const AtrialBeat& beat : beats.atrial)
    CHECK((beat.time < Seconds(20.31) || beat.time > Seconds(40)));
  CHECK(beats.atrial.back().time > Seconds(59));
}
