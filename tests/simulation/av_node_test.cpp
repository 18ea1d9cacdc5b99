// Chronodrome, GPL-3.0-or-later.
// Expected numbers: closed forms of the recovery curve d(r) = 60 + 200 exp(-r / 50) ms, blocked to r = 30 ms.
// Sequences are the fixed cycles of the map r' = n PP - d(r) - r, worked out independently with a numeric
// library to three decimals; those also follow by hand from the formula, beat by beat.
#include <catch2/catch.hpp>
#include <cmath>
#include <vector>

#include "simulation/av_node.h"
#include "simulation/golden.h"

using namespace chronodrome;
using namespace chronodrome::simulation;
using Catch::Matchers::WithinAbs;

namespace {

// Tables are printed to 0.001 ms.
constexpr double kPrinted = 0.0006;

std::vector<std::optional<Seconds>> at_cycle(double cycle_ms, std::size_t beats) {
  std::vector<Seconds> atrial;
  for (std::size_t i = 0; i < beats; ++i)
    atrial.push_back(milliseconds(cycle_ms * static_cast<double>(i)));
  return conduct(AvNode{}, atrial);
}

/// The delays between the last two dropped beats.
std::vector<double> last_group(const std::vector<std::optional<Seconds>>& delays) {
  std::vector<double> group;
  std::size_t end = delays.size();
  while (end > 0 && delays[end - 1])
    --end;
  for (std::size_t i = end - 1; i-- > 0 && delays[i];)
    group.insert(group.begin(), in_milliseconds(*delays[i]));
  return group;
}

} // namespace

TEST_CASE("the recovery curve gives its closed form", "[simulation][node]") {
  const AvNode node;
  CHECK_THAT(in_milliseconds(*node.delay(milliseconds(50))), WithinAbs(60 + 200 * std::exp(-1.0), 1e-9));
  CHECK_THAT(in_milliseconds(*node.delay(milliseconds(100))), WithinAbs(87.067057, 1e-6));
  CHECK_THAT(in_milliseconds(*node.delay(milliseconds(150))), WithinAbs(69.957414, 1e-6));
  CHECK_FALSE(node.delay(milliseconds(30)).has_value());
  CHECK(node.delay(milliseconds(30.001)).has_value());
  CHECK_FALSE(node.delay(milliseconds(-10)).has_value());
}

TEST_CASE("steady 1:1 delays are the fixed points of the recovery curve", "[simulation][node]") {
  CHECK_THAT(in_milliseconds(*steady_delay(AvNode{}, milliseconds(250))), WithinAbs(64.94, 0.005));
  CHECK_THAT(in_milliseconds(*steady_delay(AvNode{}, milliseconds(200))), WithinAbs(77.1322, 0.00006));
  CHECK_THAT(in_milliseconds(*steady_delay(AvNode{}, milliseconds(180))), WithinAbs(102.172, kPrinted));
  for (const double cycle : {182.0, 200.0, 237.5, 400.0}) {
    const double delay = in_milliseconds(*steady_delay(AvNode{}, milliseconds(cycle)));
    // Accuracy of the bisection: 1e-12 s.
    CHECK_THAT(delay, WithinAbs(60 + 200 * std::exp(-(cycle - delay) / 50), 1e-8));
  }
}

TEST_CASE("1:1 conduction is lost at the tangent point", "[simulation][node]") {
  // delay_min + tau (1 + ln(span / tau)) = 60 + 50 (1 + ln 4) ms.
  const double lost = 60 + 50 * (1 + std::log(4.0));
  CHECK_THAT(in_milliseconds(shortest_one_to_one(AvNode{})), WithinAbs(lost, 1e-9));
  CHECK_THAT(lost, WithinAbs(179.314718, 1e-6));
  CHECK(steady_delay(AvNode{}, milliseconds(179.32)).has_value());
  CHECK_FALSE(steady_delay(AvNode{}, milliseconds(179.31)).has_value());
  // Transients near the tangent point take thousands of beats.
  const auto holds = [](double cycle) {
    for (const auto& delay : at_cycle(cycle, 6000)) {
      if (!delay) return false;
    }
    return true;
  };
  CHECK(holds(179.32));
  CHECK_FALSE(holds(179.31));
}

TEST_CASE("delay_min can be solved for a wanted steady delay", "[simulation][node]") {
  AvNode node;
  node.delay_min = delay_min_for(node, milliseconds(90), milliseconds(240));
  CHECK_THAT(in_milliseconds(*steady_delay(node, milliseconds(240))), WithinAbs(90.0, 1e-8));
}

TEST_CASE("Wenckebach periods emerge at constant cycles", "[simulation][node]") {
  const auto [cycle, expected] = GENERATE(table<double, std::vector<double>>({
      {170, {63.941, 83.978, 95.797, 105.343, 114.882, 126.417, 143.652}},
      {165, {64.099, 86.583, 101.679, 116.367, 135.616}},
      {160, {64.674, 89.719, 109.043, 132.181}},
      {150, {66.734, 97.826, 130.446}},
      {130, {73.250, 124.285}},
      {100, {77.132}},
  }));
  CAPTURE(cycle);
  const auto group = last_group(at_cycle(cycle, 4001));
  REQUIRE(group.size() == expected.size());
  for (std::size_t i = 0; i < group.size(); ++i)
    CHECK_THAT(group[i], WithinAbs(expected[i], kPrinted));
  // The pause is 2 PP - (last delay - first delay): shorter than two cycles by the delay that was gained.
  if (group.size() > 1) CHECK(2 * cycle - (group.back() - group.front()) < 2 * cycle);
}

TEST_CASE("at 200 ms the node conducts 1:1 at 77.132 ms", "[simulation][node]") {
  const auto delays = at_cycle(200, 200);
  for (const auto& delay : delays)
    REQUIRE(delay.has_value());
  CHECK_THAT(in_milliseconds(*delays.back()), WithinAbs(77.132, kPrinted));
}

TEST_CASE("an extrastimulus finds the node as recovered as its coupling lets it", "[simulation][node]") {
  // After a steady drive at 200 ms (delay 77.1322): coupling, delay and V1V2, printed to 0.01 ms.
  const auto [coupling, delay, interval] = GENERATE(table<double, double, double>({
      {190, 80.93, 193.79},
      {180, 85.56, 188.43},
      {170, 91.22, 184.08},
      {160, 98.13, 181.00},
      {150, 106.57, 179.44},
      {140, 116.88, 179.75},
      {130, 129.47, 182.34},
      {120, 144.86, 187.72},
      {110, 163.64, 196.51},
  }));
  const Seconds exit = *steady_delay(AvNode{}, milliseconds(200));
  const std::vector<Seconds> early{milliseconds(coupling)};
  const auto delays = conduct(AvNode{}, early, exit);
  REQUIRE(delays[0].has_value());
  CHECK_THAT(in_milliseconds(*delays[0]), WithinAbs(delay, 0.006));
  CHECK_THAT(coupling + in_milliseconds(*delays[0] - exit), WithinAbs(interval, 0.006));
}

TEST_CASE("the refractory period and the shortest interval passed follow", "[simulation][node]") {
  const Seconds exit = *steady_delay(AvNode{}, milliseconds(200));
  const auto conducts = [&](double coupling) {
    const std::vector<Seconds> early{milliseconds(coupling)};
    return conduct(AvNode{}, early, exit)[0].has_value();
  };
  CHECK_FALSE(conducts(100));
  CHECK_FALSE(conducts(105));
  CHECK_FALSE(conducts(107.13)); // 77.1322 + 30 = 107.1322
  CHECK(conducts(107.14));
  // A memoryless node passes no interval shorter than the cycle at which it loses 1:1 conduction.
  double shortest = 1e9;
  for (double coupling = 140; coupling < 155; coupling += 0.001) {
    const std::vector<Seconds> early{milliseconds(coupling)};
    shortest = std::min(shortest, coupling + in_milliseconds(*conduct(AvNode{}, early, exit)[0] - exit));
  }
  CHECK_THAT(shortest, WithinAbs(179.314718, 1e-5)); // step 0.001 at a minimum: error of second order
}

TEST_CASE("golden sequences say what their names say", "[simulation][golden]") {
  const auto wenckebach = golden_wenckebach(3);
  CHECK(wenckebach.atrial_ms.size() == 12);
  CHECK(wenckebach.ventricular_ms[3] - wenckebach.ventricular_ms[2] == 340.0); // 2 * 200 - (140 - 80)
  const auto fixed = golden_fixed_delay_block(2);
  CHECK(fixed.ventricular_ms[2] - fixed.ventricular_ms[1] == 400.0);
  const auto half = golden_two_to_one(10);
  CHECK(half.ventricular_ms.size() == 5);
  const auto node = golden_node(150, 400);
  CHECK_THAT(static_cast<double>(node.ventricular_ms.size()), WithinAbs(300, 2)); // 4:3
  // Phases of the ventricle in the atrial cycle step by 0.35: their resultant over 20 beats is 0.
  double x = 0, y = 0;
  for (const double time : golden_dissociation().ventricular_ms) {
    x += std::cos(2 * 3.14159265358979323846 * time / 200);
    y += std::sin(2 * 3.14159265358979323846 * time / 200);
  }
  CHECK_THAT(std::hypot(x, y), WithinAbs(0.0, 1e-9)); // rounding of 20 terms
  const auto vpb = golden_compensatory_pause().ventricular_ms;
  CHECK(vpb[4] - vpb[2] == 400.0);
  CHECK(golden_interpolated().ventricular_ms[3] - golden_interpolated().ventricular_ms[1] == 200.0);
  const auto reset = golden_reset().atrial_ms;
  CHECK(reset[4] - reset[2] == 330.0);
  const auto hidden = golden_sinus_wenckebach().atrial_ms;
  CHECK((hidden[4] - hidden[0]) / 5 == 206.0);
  CHECK(golden_exit_block().atrial_ms[3] - golden_exit_block().atrial_ms[2] == 400.0);
  CHECK(golden_sinus_pause().atrial_ms[9] - golden_sinus_pause().atrial_ms[8] == 530.0);
  CHECK(golden_one_to_one(5).ventricular_ms.back() == 850.0);
}
