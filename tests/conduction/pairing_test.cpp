// Chronodrome, GPL-3.0-or-later.
// The sequences are the textbooks' (Wenckebach 4:3, 2:1, dissociation with a regular escape rhythm); their
// delays follow by arithmetic.
#include "conduction/pairing.h"

#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <functional>
#include <random>

#include "conduction/assignment.h"
#include "conduction/dissociation.h"
#include "support/paired_marks.h"

using namespace chronodrome;
using Catch::Matchers::WithinAbs;
using conduction::ConductionSettings;
using conduction::DelayState;
using conduction::PathwayDelays;
using recording::Role;
using test_support::marks_at;

namespace {

PathwayDelays pair_av(const activation::ChannelActivations& a, const activation::ChannelActivations& v,
                      const ConductionSettings& settings = {}) {
  const auto result = conduction::pair("AV", {&a, Role::atrial}, {&v, Role::ventricular}, settings);
  REQUIRE(result.ok());
  return *result;
}

PathwayDelays pair_av(const std::vector<double>& a, const std::vector<double>& v,
                      const ConductionSettings& settings = {}) {
  return pair_av(marks_at(a), marks_at(v), settings);
}

/// Delay of each atrial beat in ms; nothing: not conducted.
std::vector<std::optional<double>> delays_of(const PathwayDelays& paired) {
  std::vector<std::optional<double>> delays;
  for (const auto& row : paired.rows) {
    if (!row.from) continue;
    if (delays.size() <= *row.from) delays.resize(*row.from + 1);
    if (row.state == DelayState::conducted) delays[*row.from] = in_milliseconds(*row.delay);
  }
  return delays;
}

std::size_t count(const PathwayDelays& paired, DelayState state) {
  return static_cast<std::size_t>(std::count_if(paired.rows.begin(), paired.rows.end(),
                                                [&](const auto& row) { return row.state == state; }));
}

/// Each activation of both channels stands in exactly one row.
void check_complete(const PathwayDelays& paired, std::size_t from, std::size_t to) {
  std::vector<int> a(from, 0);
  std::vector<int> v(to, 0);
  for (const auto& row : paired.rows) {
    if (row.from) ++a.at(*row.from);
    if (row.to) ++v.at(*row.to);
    CHECK((row.from || row.to));
    CHECK((row.state == DelayState::conducted || row.state == DelayState::retrograde) ==
          row.delay.has_value());
  }
  CHECK(std::all_of(a.begin(), a.end(), [](int n) { return n == 1; }));
  CHECK(std::all_of(v.begin(), v.end(), [](int n) { return n == 1; }));
}

std::vector<double> every(double step, std::size_t count, double first = 0.0) {
  std::vector<double> times;
  for (std::size_t i = 0; i < count; ++i)
    times.push_back(first + step * static_cast<double>(i));
  return times;
}

ConductionSettings with_control(double ms) {
  ConductionSettings settings;
  settings.control_delay = milliseconds(ms);
  settings.antegrade = conduction::DelayWindow{milliseconds(20.0), milliseconds(300.0)};
  return settings;
}

} // namespace

TEST_CASE("one to one conduction pairs each beat", "[pairing]") {
  const auto paired = pair_av(every(200, 20), every(200, 20, 50));
  check_complete(paired, 20, 20);
  for (const auto& delay : delays_of(paired))
    CHECK_THAT(delay.value(), WithinAbs(50.0, 1e-9));
  CHECK_THAT(in_milliseconds(paired.control_delay), WithinAbs(50.0, 1e-9));
  CHECK(paired.dissociated.empty());
}

TEST_CASE("two to one conduction leaves every other atrial beat blocked", "[pairing]") {
  const auto paired = pair_av({0, 200, 400, 600, 800}, {60, 460, 860});
  check_complete(paired, 5, 3);
  const auto delays = delays_of(paired);
  for (const std::size_t i : {0U, 2U, 4U})
    CHECK_THAT(delays[i].value(), WithinAbs(60.0, 1e-9));
  CHECK_FALSE(delays[1]);
  CHECK_FALSE(delays[3]);
}

TEST_CASE("a classic 4:3 Wenckebach keeps its rising delays and its dropped beat", "[pairing]") {
  std::vector<double> v;
  for (int group = 0; group < 6; ++group) {
    for (const double t : {80.0, 320.0, 540.0})
      v.push_back(t + 800.0 * group);
  }
  const auto paired = pair_av(every(200, 24), v, GENERATE(ConductionSettings{}, with_control(80.0)));
  check_complete(paired, 24, 18);
  const auto delays = delays_of(paired);
  for (std::size_t group = 0; group < 6; ++group) {
    CHECK_THAT(delays[4 * group].value(), WithinAbs(80.0, 1e-9));
    CHECK_THAT(delays[4 * group + 1].value(), WithinAbs(120.0, 1e-9));
    CHECK_THAT(delays[4 * group + 2].value(), WithinAbs(140.0, 1e-9));
    CHECK_FALSE(delays[4 * group + 3]);
  }
}

TEST_CASE("a recovering node is read back beat by beat down to the cycle that cannot be told", "[pairing]") {
  // The cause of every ventricular beat is known from the simulation. At these cycles the assignment finds
  // it, also where the delay exceeds the cycle a little (155 ms: delay 166 ms).
  const double pp = GENERATE(170.0, 165.0, 160.0, 155.0, 150.0, 145.0, 140.0, 130.0);
  const auto run = test_support::run_node(pp, 40);
  const auto paired = pair_av(run.atrial, run.ventricular, with_control(64.0));
  check_complete(paired, run.atrial.size(), run.ventricular.size());
  const auto delays = delays_of(paired);
  INFO("PP " << pp);
  for (std::size_t i = 0; i < run.delay.size(); ++i) {
    INFO("atrial beat " << i);
    REQUIRE(delays[i].has_value() == run.delay[i].has_value());
    if (delays[i]) CHECK_THAT(*delays[i], WithinAbs(*run.delay[i], 1e-6));
  }
}

TEST_CASE("the simulated node shows the published patterns", "[pairing]") {
  // Fixed points of the map and group sequences of a node with shortest 60, a 200, tau 50, dead time 30 ms,
  // computed independently (NumPy).
  const auto settled = [](double pp) {
    const auto run = test_support::run_node(pp, 600);
    return run.delay.back();
  };
  CHECK_THAT(settled(250).value(), WithinAbs(64.94, 0.005));
  CHECK_THAT(settled(200).value(), WithinAbs(77.1322, 5e-5));
  CHECK_THAT(settled(180).value(), WithinAbs(102.172, 5e-4));
  const auto run = test_support::run_node(150, 43);
  // 4:3 with delays 66.734, 97.826, 130.446.
  const auto first = std::find_if(run.delay.begin() + 20, run.delay.end(), [](const auto& d) { return !d; });
  CHECK_THAT((first + 1)->value(), WithinAbs(66.734, 5e-4));
  CHECK_THAT((first + 2)->value(), WithinAbs(97.826, 5e-4));
  CHECK_THAT((first + 3)->value(), WithinAbs(130.446, 5e-4));
  CHECK_FALSE(*(first + 4));
}

TEST_CASE("delays beyond 0.9 of the cycle are marked as ambiguous", "[pairing]") {
  const auto long_delays = test_support::run_node(155, 40);
  const auto paired = pair_av(long_delays.atrial, long_delays.ventricular, with_control(64.0));
  CHECK(std::any_of(paired.rows.begin(), paired.rows.end(), [](const auto& row) { return row.ambiguous; }));
  const auto plain = pair_av(every(200, 20), every(200, 20, 50));
  CHECK(std::none_of(plain.rows.begin(), plain.rows.end(), [](const auto& row) { return row.ambiguous; }));
  // Steady 2:1 from start to end: delay and delay + cycle fit alike, nothing shows which.
  const auto half = pair_av(every(150, 40), every(300, 20, 60));
  CHECK(count(half, DelayState::conducted) == 20);
  CHECK(std::any_of(half.rows.begin(), half.rows.end(), [](const auto& row) { return row.ambiguous; }));
}

TEST_CASE("constant delays around a dropped beat are kept", "[pairing]") {
  std::vector<double> v;
  for (int group = 0; group < 8; ++group) {
    v.push_back(600.0 * group + 60.0);
    v.push_back(600.0 * group + 260.0);
  }
  const auto delays = delays_of(pair_av(every(200, 24), v));
  for (std::size_t i = 0; i < 24; ++i)
    CHECK(delays[i].has_value() == (i % 3 != 2));
}

TEST_CASE("a premature ventricular beat has no cause, and the sinus beat behind it is blocked", "[pairing]") {
  SECTION("full pause") {
    const auto paired =
        pair_av({0, 200, 400, 600, 800, 1000}, {50, 250, 450, 580, 850, 1050}, with_control(50));
    check_complete(paired, 6, 6);
    const auto delays = delays_of(paired);
    CHECK_FALSE(delays[3]);
    for (const std::size_t i : {0U, 1U, 2U, 4U, 5U})
      CHECK_THAT(delays[i].value(), WithinAbs(50.0, 1e-9));
    CHECK(count(paired, DelayState::unpaired) == 1);
    CHECK(count(paired, DelayState::retrograde) == 0);
  }
  SECTION("interpolated") {
    const auto paired = pair_av({0, 200, 400, 600}, {50, 250, 350, 450, 650}, with_control(50));
    const auto delays = delays_of(paired);
    for (const auto& delay : delays)
      CHECK_THAT(delay.value(), WithinAbs(50.0, 1e-9));
    CHECK(count(paired, DelayState::unpaired) == 1);
  }
}

TEST_CASE("a blocked premature atrial beat and an escape beat are told", "[pairing]") {
  // Premature at 480, blocked; the next sinus beat conducts.
  const auto early = pair_av({0, 200, 400, 480, 690, 890}, {50, 250, 450, 740, 940}, with_control(50));
  CHECK_FALSE(delays_of(early)[3]);
  CHECK(count(early, DelayState::conducted) == 5);
  // Atrial pause; the ventricle escapes at 1000, far from any atrial beat.
  const auto escape = pair_av({0, 200, 400, 1500, 1700}, {50, 250, 450, 1000, 1550, 1750}, with_control(50));
  CHECK(count(escape, DelayState::unpaired) == 1);
  CHECK(count(escape, DelayState::conducted) == 5);
}

TEST_CASE("a regular escape rhythm that ignores the atria is dissociated", "[pairing]") {
  // Phases step by 0.35 of the atrial cycle: resultant length 0. Pairing by cost alone links all of them.
  std::vector<double> v = every(470, 20, 100);
  const auto paired = pair_av(every(200, 50), v);
  check_complete(paired, 50, 20);
  CHECK(count(paired, DelayState::conducted) == 0);
  CHECK(count(paired, DelayState::blocked) == 50);
  CHECK(count(paired, DelayState::unpaired) == 20);
  REQUIRE(paired.dissociated.size() == 1);
  CHECK_THAT(in_milliseconds(paired.dissociated[0].start), WithinAbs(100.0, 1e-9));
  CHECK_THAT(in_milliseconds(paired.dissociated[0].end), WithinAbs(100.0 + 19 * 470.0, 1e-9));
}

TEST_CASE("dissociation of the first minute leaves the conducted beats behind it alone", "[pairing]") {
  std::vector<double> a = every(200, 600);
  std::vector<double> v = every(200, 200, 50); // conducted until 40 s
  for (double t = 40300.0; t < 80000.0; t += 473.0)
    v.push_back(t); // escape rhythm
  for (std::size_t i = 401; i < 600; ++i)
    v.push_back(a[i] + 50.0);
  const auto paired = pair_av(a, v);
  check_complete(paired, a.size(), v.size());
  const auto delays = delays_of(paired);
  for (std::size_t i = 0; i < 198; ++i)
    REQUIRE_THAT(delays[i].value(), WithinAbs(50.0, 1e-9));
  for (std::size_t i = 203; i < 399; ++i)
    REQUIRE_FALSE(delays[i]);
  for (std::size_t i = 403; i < 600; ++i)
    REQUIRE_THAT(delays[i].value(), WithinAbs(50.0, 1e-9));
}

TEST_CASE("a ventricular rhythm near half the atrial rate drifts and is found by its long stretch",
          "[pairing]") {
  // 2.03 atrial cycles: the phase steps by 0.03 a beat, so that ten beats look locked.
  const auto paired = pair_av(every(200, 400), every(406, 190, 60));
  CHECK(count(paired, DelayState::conducted) == 0);
}

TEST_CASE("locked rhythms are no dissociation", "[pairing]") {
  ConductionSettings settings;
  for (const double ratio : {2.0, 3.0, 4.0}) {
    const auto a = every(0.2, 200);
    const auto v = every(0.2 * ratio, 40, 0.06);
    const auto lost = conduction::dissociated_beats(a, v, {}, settings);
    CHECK(std::none_of(lost.begin(), lost.end(), [](char c) { return c != 0; }));
  }
}

TEST_CASE("the ventricle that drives the atrium is retrograde", "[pairing]") {
  // Conducted for a while, then the ventricle leads at 300 ms with the atrium 60 ms behind it.
  std::vector<double> a = every(280, 30);
  std::vector<double> v = every(280, 30, 50);
  for (int k = 0; k < 20; ++k) {
    v.push_back(8500.0 + 300.0 * k);
    a.push_back(8560.0 + 300.0 * k);
  }
  const auto paired = pair_av(a, v);
  check_complete(paired, a.size(), v.size());
  CHECK(count(paired, DelayState::conducted) == 30);
  CHECK(count(paired, DelayState::retrograde) == 20);
  for (const auto& row : paired.rows) {
    if (row.state == DelayState::retrograde) CHECK_THAT(in_milliseconds(*row.delay), WithinAbs(-60.0, 1e-9));
  }
}

TEST_CASE("no pair spans a gap", "[pairing]") {
  auto a = marks_at(every(200, 20));
  auto v = marks_at(every(200, 20, 50));
  // Between the eleventh atrial beat (2000 ms) and its ventricular one (2050 ms).
  v.unreadable.push_back({{milliseconds(2010.0), milliseconds(2030.0)}, "gap"});
  const auto paired = pair_av(a, v);
  check_complete(paired, 20, 20);
  CHECK_FALSE(delays_of(paired)[10]);
  CHECK(count(paired, DelayState::conducted) == 19);
  CHECK(count(paired, DelayState::unpaired) == 1);
}

TEST_CASE("within one chamber the nearest beats are paired, signed", "[pairing]") {
  const auto a = marks_at({0, 200, 400, 600, 800});
  const auto b = marks_at({12, 195, 470, 610, 815, 1000});
  const auto result = conduction::pair("RA-LA", {&a, Role::atrial}, {&b, Role::atrial}, {});
  REQUIRE(result.ok());
  CHECK(result->within_chamber);
  check_complete(*result, 5, 6);
  const auto delays = delays_of(*result);
  CHECK_THAT(delays[0].value(), WithinAbs(12.0, 1e-9));
  CHECK_THAT(delays[1].value(), WithinAbs(-5.0, 1e-9));
  CHECK_FALSE(delays[2]); // 70 ms apart
  CHECK_THAT(delays[3].value(), WithinAbs(10.0, 1e-9));
  CHECK_THAT(delays[4].value(), WithinAbs(15.0, 1e-9));
  ConductionSettings mouse;
  mouse.species = "mouse";
  const auto near = marks_at({45});
  const auto far = marks_at({0});
  CHECK(conduction::pair("x", {&far, Role::ventricular}, {&near, Role::ventricular}, mouse)->rows.size() ==
        2);
  CHECK(conduction::pair("x", {&far, Role::ventricular}, {&near, Role::ventricular}, {})->rows.size() == 1);
}

TEST_CASE("pairing shifts, scales and mirrors with its input", "[pairing]") {
  const auto run = test_support::run_node(150, 60);
  const auto plain = pair_av(run.atrial, run.ventricular);
  auto a = run.atrial;
  auto v = run.ventricular;
  for (double& t : a)
    t += 123456.0;
  for (double& t : v)
    t += 123456.0;
  const auto shifted = pair_av(a, v);
  REQUIRE(shifted.rows.size() == plain.rows.size());
  for (std::size_t i = 0; i < plain.rows.size(); ++i) {
    CHECK(shifted.rows[i].state == plain.rows[i].state);
    CHECK(shifted.rows[i].from == plain.rows[i].from);
    CHECK(shifted.rows[i].to == plain.rows[i].to);
  }
}

TEST_CASE("a missed or a false beat unsettles only its neighbourhood", "[pairing]") {
  std::vector<double> a = every(200, 60);
  std::vector<double> v = every(200, 60, 50);
  v.erase(v.begin() + 20);
  a.insert(a.begin() + 41, a[40] + 110.0);
  const auto paired = pair_av(a, v);
  check_complete(paired, 61, 59);
  CHECK(count(paired, DelayState::conducted) == 59);
  CHECK(count(paired, DelayState::blocked) == 2);
}

TEST_CASE("the assignment is the cheapest of all that keep the order", "[pairing]") {
  // Against trying every set of links, on small random inputs.
  std::mt19937_64 engine(17);
  const auto uniform = [&] { return static_cast<double>(engine() >> 11) * 0x1.0p-53; };
  const auto cost = [](double d) -> std::optional<double> {
    if (d >= 0.025 && d <= 0.35) return std::min(6.0, d >= 0.06 ? (d - 0.06) / 0.06 : (0.06 - d) / 0.015);
    if (-d >= 0.015 && -d <= 0.25) return std::min(6.0, 2.0 + std::abs(-d - 0.07) / 0.0175);
    return std::nullopt;
  };
  const auto total_of = [&](const std::vector<double>& a, const std::vector<double>& v,
                            const std::vector<std::optional<std::size_t>>& partner) {
    double sum = 0.0;
    std::size_t links = 0;
    for (std::size_t i = 0; i < a.size(); ++i) {
      if (partner[i]) sum += cost(v[*partner[i]] - a[i]).value(), ++links;
    }
    return sum + 4.0 * static_cast<double>(a.size() + v.size() - 2 * links);
  };
  for (int trial = 0; trial < 60; ++trial) {
    std::vector<double> a, v;
    for (int i = 0; i < 6; ++i)
      a.push_back(uniform() * 1.2);
    for (int i = 0; i < 5; ++i)
      v.push_back(uniform() * 1.2);
    std::sort(a.begin(), a.end());
    std::sort(v.begin(), v.end());
    // Least cost of settling a from i and v from j on.
    const std::function<double(std::size_t, std::size_t)> least = [&](std::size_t i,
                                                                      std::size_t j) -> double {
      if (i == a.size()) return 4.0 * static_cast<double>(v.size() - j);
      if (j == v.size()) return 4.0 * static_cast<double>(a.size() - i);
      double best = std::min(least(i + 1, j), least(i, j + 1)) + 4.0;
      if (const auto link = cost(v[j] - a[i])) best = std::min(best, least(i + 1, j + 1) + *link);
      return best;
    };
    const auto partner = conduction::assign(a, v, 0.25, 0.35, 4.0,
                                            [&](std::size_t i, std::size_t j) { return cost(v[j] - a[i]); });
    CHECK_THAT(total_of(a, v, partner), WithinAbs(least(0, 0), 1e-9));
    std::size_t last = 0;
    for (const auto& link : partner) {
      if (!link) continue;
      CHECK(*link + 1 > last);
      last = *link + 1;
    }
  }
}

TEST_CASE("windows follow the species; an unknown one is a guinea pig", "[pairing]") {
  const auto window = conduction::antegrade_window("guinea pig", Role::atrial, Role::ventricular);
  CHECK_THAT(in_milliseconds(window.shortest), WithinAbs(25.0, 1e-9));
  CHECK_THAT(in_milliseconds(window.longest), WithinAbs(350.0, 1e-9));
  const auto unknown = conduction::antegrade_window("axolotl", Role::atrial, Role::ventricular);
  CHECK(unknown.longest == window.longest);
  CHECK_THAT(in_milliseconds(conduction::antegrade_window("frog", Role::atrial, Role::ventricular).longest),
             WithinAbs(1500.0, 1e-9));
  CHECK_THAT(in_milliseconds(conduction::antegrade_window("rat", Role::his, Role::ventricular).longest),
             WithinAbs(40.0, 1e-9));
  CHECK_THAT(in_milliseconds(conduction::antegrade_window("rat", Role::atrial, Role::his).shortest),
             WithinAbs(10.0, 1e-9));
}

TEST_CASE("the control delay comes from steady 1:1 stretches of the first minute", "[pairing]") {
  // 70 s at 50 ms, then 70 s at 90 ms.
  std::vector<double> a = every(200, 700);
  std::vector<double> v;
  for (std::size_t i = 0; i < a.size(); ++i)
    v.push_back(a[i] + (i < 350 ? 50.0 : 90.0));
  CHECK_THAT(in_milliseconds(pair_av(a, v).control_delay), WithinAbs(50.0, 1e-9));
  const auto window = conduction::antegrade_window("", Role::atrial, Role::ventricular);
  const auto none = conduction::control_delay_of(marks_at({}), marks_at({}), window, Seconds(60.0));
  CHECK_FALSE(none.from_stretches);
  CHECK(none.delay > window.shortest);
  CHECK(none.delay < window.longest);
}

TEST_CASE("empty channels pair to nothing, wrong settings are refused", "[pairing]") {
  CHECK(pair_av(std::vector<double>{}, {}).rows.empty());
  CHECK(count(pair_av({0, 200}, {}), DelayState::blocked) == 2);
  CHECK(count(pair_av({}, {0, 200}), DelayState::unpaired) == 2);
  CHECK_FALSE(conduction::pair("AV", {nullptr, Role::atrial}, {nullptr, Role::ventricular}, {}).ok());
  ConductionSettings settings;
  settings.longest_link_cost = 9.0;
  const auto a = marks_at({0});
  const auto refused = conduction::pair("AV", {&a, Role::atrial}, {&a, Role::ventricular}, settings);
  REQUIRE_FALSE(refused.ok());
  CHECK(refused.error().code == ErrorCode::bad_usage);
  settings = {};
  settings.antegrade = conduction::DelayWindow{milliseconds(50.0), milliseconds(50.0)};
  CHECK(settings.check());
}

TEST_CASE("an answer that could not be seen is no evidence of block", "[pairing]") {
  // 1:1 at 50 ms; the ventricular lead is off from 40 to 50 s. Atrial beats every 200 ms: those whose next
  // 350 ms (guinea pig) meet the loss run from 39.8 s to 49.8 s; the one at 39.8 s was answered.
  const auto a = marks_at(every(200, 400));
  std::vector<double> v;
  for (const double t : every(200, 400, 50)) {
    if (t < 40000.0 || t >= 50000.0) v.push_back(t);
  }
  auto ventricle = marks_at(v);
  ventricle.unreadable.push_back({{Seconds(40.0), Seconds(50.0)}, "flat"});
  auto paired = pair_av(a, ventricle);
  check_complete(paired, 400, v.size());
  for (const auto& row : paired.rows) {
    const bool lost = *row.from >= 200 && *row.from < 250;
    CHECK(row.state == (lost ? DelayState::blocked : DelayState::conducted));
    CHECK(row.answer_unseen == lost);
  }
  // What the atrial lead cannot read hides no answer.
  ventricle.unreadable.clear();
  auto atrium = a;
  atrium.unreadable.push_back({{Seconds(40.001), Seconds(40.01)}, "noise"});
  paired = pair_av(atrium, ventricle);
  CHECK(count(paired, DelayState::blocked) == 50);
  CHECK(std::none_of(paired.rows.begin(), paired.rows.end(), [](const auto& r) { return r.answer_unseen; }));
}

TEST_CASE("a beat whose answer would lie behind the end of the signal is not known to be blocked",
          "[pairing]") {
  // Beats at 0 ... 3.8 s, the last two without an answer. The signal ends at 4.1 s: 300 ms behind the last,
  // 500 ms behind the one before; an answer takes at most 350 ms (guinea pig).
  const auto a = marks_at(every(200, 20));
  const auto v = marks_at(every(200, 18, 50));
  const auto unseen = [&](std::optional<Seconds> end) {
    const auto paired =
        conduction::pair("AV", {&a, Role::atrial, {}}, {&v, Role::ventricular, end}, ConductionSettings{});
    REQUIRE(paired.ok());
    std::vector<std::size_t> found;
    for (const auto& row : paired->rows) {
      if (row.answer_unseen) found.push_back(*row.from);
    }
    CHECK(count(*paired, DelayState::blocked) == 2);
    return found;
  };
  CHECK(unseen(Seconds(4.1)) == std::vector<std::size_t>{19});
  CHECK(unseen(Seconds(3.9)) == std::vector<std::size_t>{18, 19});
  CHECK(unseen(Seconds(4.2)).empty()); // 400 ms behind the last
  CHECK(unseen(std::nullopt).empty()); // not known
}

TEST_CASE("cycles with a loss in them say nothing of the control delay", "[pairing]") {
  // True delay 60 ms, atrial cycle 200 ms. At first a loss in both channels from 40 to 240 ms of every 400 ms
  // hides the answer to one beat and the beat after: what is left looks like one to one at 260 ms.
  std::vector<double> a, v;
  std::vector<activation::Unreadable> losses;
  for (std::size_t i = 0; i < 100; ++i) {
    const double t = 200.0 * static_cast<double>(i);
    const bool lossy = i < 80;
    if (lossy && i % 2 == 0) losses.push_back({{milliseconds(t + 40.0), milliseconds(t + 240.0)}, "noise"});
    if (!lossy || i % 2 == 0) a.push_back(t);
    if (!lossy || i % 2 == 1) v.push_back(t + 60.0);
  }
  auto atrium = marks_at(a);
  auto ventricle = marks_at(v);
  atrium.unreadable = ventricle.unreadable = losses;
  CHECK_THAT(in_milliseconds(pair_av(atrium, ventricle).control_delay), WithinAbs(60.0, 1e-9));
}
