// Chronodrome, GPL-3.0-or-later.
#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>

#include "numerics/robust.h"
#include "response/hearts.h"

using namespace chronodrome;
using namespace chronodrome::tests;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;
using response::Response;
using response::Status;

namespace {

struct Heart {
  activation::ChannelActivations channel;
  protocol::CurvePlan plan;
  std::vector<response::Exclusion> excluded;
};

std::vector<Response> rates_of(const Heart& heart, const response::Settings& settings = {}) {
  response::Inputs inputs;
  inputs.plan = &heart.plan;
  inputs.channels = {{&heart.channel, recording::Role::atrial, "mV"}};
  inputs.excluded = heart.excluded;
  inputs.measures = {"rate:RA"};
  auto responses = response::compute(inputs, settings);
  REQUIRE(responses.ok());
  return responses->rows;
}

/// The one step 0 ... length with these marks.
Response rate_of_step(const std::vector<double>& times, double length,
                      const response::Settings& settings = {}) {
  return rates_of({channel_of("RA", times), plan_of({0.0}, length), {}}, settings).front();
}

bool says(const Response& row, const std::string& words) {
  return std::any_of(row.flags.begin(), row.flags.end(),
                     [&](const std::string& flag) { return flag.find(words) != std::string::npos; });
}

} // namespace

TEST_CASE("the rate is beats over time, not the mean of instantaneous rates", "[response]") {
  // Closed form: ten intervals of 0.3 s, then ten of 0.6 s: 60 x 20 / 9 s = 133.33 per minute; the mean of
  // the instantaneous rates would be 150.
  std::vector<double> times = {1000.0 - 9.5};
  for (int i = 0; i < 20; ++i)
    times.push_back(times.back() + (i < 10 ? 0.3 : 0.6));
  const auto row = rate_of_step(times, 1000.0);
  REQUIRE(row.value.has_value());
  CHECK_THAT(*row.value, WithinRel(400.0 / 3.0, 1e-12)); // sums of twenty rounded times
  CHECK(row.n_beats == 21);
  CHECK(row.unit == "bpm");
}

TEST_CASE("counting intervals does not quantise", "[response]") {
  // Closed form: a beat each 0.2 s from 0 to 60 s is 300 per minute, by 300 intervals between 301 beats.
  const auto row = rate_of_step(regular(0.0, 150.0, 0.2), 150.0, {Seconds(60.0)});
  CHECK_THAT(*row.value, WithinRel(300.0, 1e-12));
  CHECK(row.window_start == Seconds(90.0));
  CHECK(row.status == Status::ok);
}

TEST_CASE("the window is the last 30 s, or 20 beats where they take longer, at most 40 % of the step",
          "[response]") {
  const auto window = [](double cycle, double length) {
    const auto row = rate_of_step(regular(0.0, length, cycle), length);
    return std::pair(row.window_start.value(), says(row, "window cut"));
  };
  CHECK(window(0.25, 300.0) == std::pair(270.0, false)); // 20 beats: 5 s
  CHECK(window(2.0, 300.0) == std::pair(260.0, false));  // 20 beats: 40 s
  CHECK(window(8.0, 400.0) == std::pair(240.0, false));  // 20 beats: 160 s, exactly 40 %
  CHECK(window(8.0, 300.0) == std::pair(180.0, true));   // ... cut to 120 s
  CHECK(window(0.25, 60.0) == std::pair(36.0, true));    // 24 s
  const auto row = rate_of_step(regular(0.0, 60.0, 0.25), 60.0);
  CHECK(row.flags == std::vector<std::string>{"window cut from 30 s to 24 s: the step lasted 60 s"});
  CHECK(*row.value == 240.0); // exact: every time is a multiple of 2^-2
}

TEST_CASE("the window's beats are those at the end of the step", "[response]") {
  // 25 beats of 4 s at the end: the window takes 20 of them, however fast the heart beat before.
  auto times = regular(0.0, 200.0, 0.25);
  add_times(times, regular(200.0, 300.0, 4.0));
  CHECK(rate_of_step(times, 300.0).window_start == Seconds(220.0));
}

TEST_CASE("the plateau test of a short step takes its thirds", "[response]") {
  // 120 per minute for 40 s, then 100: the window of 24 s cannot stand three times in 60 s.
  auto times = regular(0.0, 40.0, 0.5);
  add_times(times, regular(40.0, 60.0, 0.6));
  CHECK(rate_of_step(times, 60.0).status == Status::not_steady);
}

TEST_CASE("a heart without a beat in the window is arrested, never 0", "[response]") {
  // Stops at 140 s of a step of 180 s: its last 20 beats lie outside the last 30 s, and the window is not
  // stretched back to them.
  const auto row = rate_of_step(regular(0.0, 140.0, 0.5), 180.0);
  CHECK(row.status == Status::arrested);
  CHECK_FALSE(row.value.has_value());
  CHECK_FALSE(row.sem.has_value());
  CHECK(row.n_beats == 0);
  CHECK(row.window_start == Seconds(150.0));
  CHECK(row.limit == 2.0); // 60 / 30 s
  CHECK(row.limit_side == "at_most");
  CHECK(rate_of_step({}, 180.0).status == Status::arrested);
}

TEST_CASE("a silence at the end of the window is said and makes the value doubtful", "[response]") {
  const auto row = rate_of_step(regular(0.0, 160.0, 0.5), 180.0);
  CHECK(row.status == Status::not_steady);
  CHECK(*row.value == 120.0);
  CHECK(says(row, "no beat in the last 20.5 s of the window"));
  // Five seconds and six cycles are no silence yet (at most: the common definition of arrest).
  CHECK_FALSE(says(rate_of_step(regular(0.0, 175.5, 0.5), 180.0), "no beat"));
  CHECK(says(rate_of_step(regular(0.0, 174.5, 0.5), 180.0), "no beat in the last 6 s"));
}

TEST_CASE("a single beat in the window bounds the rate by the longer silence beside it", "[response]") {
  auto times = regular(0.0, 140.0, 0.5);
  times.push_back(160.0); // window 150 to 180 s: 10 s before it, 20 s after
  const auto row = rate_of_step(times, 180.0);
  CHECK(row.status == Status::censored);
  CHECK_FALSE(row.value.has_value());
  CHECK(row.n_beats == 1);
  CHECK(row.limit == 3.0); // 60 / 20 s
  CHECK(row.limit_side == "at_most");
}

TEST_CASE("intervals across a gap or an exclusion do not count, the beats around do", "[response]") {
  // 120 per minute; from 280 to 285 s there is nothing to read. Without the rule the rate would be 102.
  auto times = regular(0.0, 280.0, 0.5);
  add_times(times, regular(285.0, 300.0, 0.5));
  Heart heart{channel_of("RA", times), plan_of({0.0}, 300.0), {}};
  heart.channel.unreadable = {{{Seconds(279.75), Seconds(284.75)}, "gap"}};
  auto row = rates_of(heart).front();
  CHECK(*row.value == 120.0);
  CHECK(row.n_beats == 50);
  CHECK(row.status == Status::ok);
  CHECK(says(row, "16.7 % of the window cannot be read"));
  heart.channel.unreadable.clear();
  heart.excluded = {{"RA", {Seconds(279.75), Seconds(284.75)}}};
  CHECK(*rates_of(heart).front().value == 120.0);
  heart.excluded[0].channel = "RV"; // another channel's: then it is a pause
  CHECK(*rates_of(heart).front().value < 110.0);
  heart.excluded.clear();
  heart.plan.excluded = {{Seconds(279.75), Seconds(284.75)}};
  CHECK(*rates_of(heart).front().value == 120.0);
}

TEST_CASE("a window mostly excluded or unreadable has no value", "[response]") {
  Heart heart{channel_of("RA", regular(0.0, 300.0, 0.5)), plan_of({0.0}, 300.0), {}};
  heart.channel.unreadable = {{{Seconds(270.0), Seconds(286.0)}, "saturation"}};
  auto row = rates_of(heart).front();
  CHECK(row.status == Status::unreadable);
  CHECK_FALSE(row.value.has_value());
  heart.channel.unreadable[0].span.end = Seconds(285.0); // half: still read
  CHECK(rates_of(heart).front().status == Status::ok);
  heart.excluded = {{"", {Seconds(260.0), Seconds(280.0)}}, {"RA", {Seconds(275.0), Seconds(290.0)}}};
  row = rates_of(heart).front();
  CHECK(row.status == Status::excluded); // 20 of 30 s, overlap counted once; it goes before unreadable
  CHECK(says(row, "66.7 % of the window is excluded"));
}

TEST_CASE("the standard error of a rate is the intervals' carried over", "[response]") {
  // Independent computation from the definition: sd / sqrt(n (1 - r)/(1 + r)) with r clipped at 0, times
  // 60 / mean^2. Alternating intervals have r < 0, so n stays n.
  std::vector<double> times = {0.0};
  std::vector<double> lengths;
  for (int i = 0; times.back() < 300.0; ++i)
    times.push_back(times.back() + (i % 2 == 0 ? 0.5 : 0.625));
  times.pop_back();
  const auto row = rate_of_step(times, 300.0);
  for (std::size_t i = 1; i < times.size(); ++i) {
    if (times[i - 1] >= 270.0) lengths.push_back(times[i] - times[i - 1]);
  }
  const double n = static_cast<double>(lengths.size());
  double mean = 0.0;
  for (const double length : lengths)
    mean += length / n;
  double squares = 0.0;
  for (const double length : lengths)
    squares += (length - mean) * (length - mean);
  const double expected = std::sqrt(squares / (n - 1.0) / n) * 60.0 / (mean * mean);
  CHECK_THAT(*row.sem, WithinRel(expected, 1e-10));
  CHECK(row.n_beats == lengths.size() + 1);
}

TEST_CASE("a rate still falling is measured, said to be not steady, and its end estimated", "[response]") {
  // Rate falls from 300 towards 200 with a time constant of 40 s from the addition at 300 s on.
  const auto cycle = [](double t) {
    const double rate = t < 300.0 ? 300.0 : 200.0 + 100.0 * std::exp(-(t - 300.0) / 40.0);
    return 60.0 / rate;
  };
  protocol::CurvePlan plan = plan_of({0.0, 1e-7}, 300.0);
  plan.curves[0].steps[1].end = Seconds(420.0);
  const auto rows = rates_of({channel_of("RA", beating(0.0, 420.0, cycle)), plan, {}});
  CHECK(rows[0].status == Status::ok);
  CHECK_THAT(*rows[0].value, WithinRel(300.0, 1e-9));
  CHECK(rows[1].status == Status::not_steady);
  // Mean of the exponential over the last 30 s: 200 + 100 (40/30)(e^(-90/40) - e^(-120/40)) = 207.414; a mean
  // over beats differs in the second order of the change within a window (here under 0.1).
  CHECK_THAT(*rows[1].value, WithinAbs(207.41, 0.1));
  REQUIRE(says(rows[1], "not at steady state: estimated remaining change "));
  const std::string flag = rows[1].flags.back();
  const auto towards = flag.find("towards ");
  REQUIRE(towards != std::string::npos);
  CHECK_THAT(std::stod(flag.substr(towards + 8)), WithinAbs(200.0, 0.5));
}

TEST_CASE("a drift that scatter explains, or a small share of the curve's range, counts as steady",
          "[response]") {
  response::Settings strict;
  strict.steady_tolerance = 0.0;
  strict.steady_standard_errors = 0.0;
  // Second step: 240 per minute, then 0.5 % faster in the last 30 s; the curve's range is 360.
  auto times = regular(0.0, 300.0, 0.1);
  add_times(times, regular(300.0, 570.0, 0.25));
  add_times(times, regular(570.0, 600.0, 0.25 / 1.005));
  const Heart heart{channel_of("RA", times), plan_of({0.0, 1e-7}, 300.0), {}};
  CHECK(rates_of(heart, strict)[1].status == Status::ok);
  strict.steady_range_share = 0.001;
  CHECK(rates_of(heart, strict)[1].status == Status::not_steady);
  strict.steady_tolerance = 0.01;
  CHECK(rates_of(heart, strict)[1].status == Status::ok);
}

TEST_CASE("a step without length has no value and says why", "[response]") {
  auto plan = plan_of({0.0, 1e-7}, 300.0);
  plan.curves[0].steps[0].end = Seconds(0.0);
  plan.curves[0].steps[1].start = plan.curves[0].steps[1].end;
  const auto rows = rates_of({channel_of("RA", regular(0.0, 600.0, 0.5)), plan, {}});
  CHECK(rows[0].status == Status::unreadable);
  CHECK(says(rows[0], "nothing was recorded before the first addition"));
  CHECK(rows[1].status == Status::unreadable);
  CHECK(says(rows[1], "over before the agent reached the tissue"));
}

TEST_CASE("pacing that begins or stops inside a window is said", "[response]") {
  Heart heart{channel_of("RA", regular(0.0, 300.0, 0.5)), plan_of({0.0}, 300.0), {}};
  heart.plan.paced = {{Seconds(100.0), Seconds(280.0)}};
  CHECK(says(rates_of(heart).front(), "pacing begins or stops inside the window"));
  heart.plan.paced = {{Seconds(100.0), Seconds(300.0)}};
  CHECK_FALSE(says(rates_of(heart).front(), "pacing"));
}

TEST_CASE("a recording shifted in time gives the same rates, shifted windows", "[response]") {
  // Times are multiples of 2^-3 and the shift a power of two: exact in binary.
  std::vector<double> times = regular(0.0, 300.0, 0.5);
  add_times(times, regular(300.0, 600.0, 0.625));
  Heart heart{channel_of("RA", times), plan_of({0.0, 1e-7}, 300.0), {}};
  const auto rows = rates_of(heart);
  for (auto& mark : heart.channel.marks)
    mark.time += Seconds(4096.0);
  for (auto& step : heart.plan.curves[0].steps) {
    step.start += Seconds(4096.0);
    step.end += Seconds(4096.0);
  }
  const auto later = rates_of(heart);
  for (std::size_t i = 0; i < rows.size(); ++i) {
    CHECK(later[i].value == rows[i].value);
    CHECK(later[i].sem == rows[i].sem);
    CHECK(later[i].status == rows[i].status);
    CHECK(later[i].window_start - rows[i].window_start == Seconds(4096.0));
  }
}

TEST_CASE("settings out of range and measures of nothing are refused", "[response]") {
  response::Settings settings;
  CHECK_FALSE(settings.check().has_value());
  settings.max_share = 0.0;
  REQUIRE(settings.check().has_value());
  CHECK(settings.check()->what == "the setting response.max_share is out of range");
  settings = {};
  settings.window = Seconds(std::nan(""));
  CHECK(settings.check().has_value());
  const auto plan = plan_of({0.0}, 100.0);
  response::Inputs inputs;
  inputs.plan = &plan;
  for (const std::string measure : {"rate:LA", "delay:AV", "flow:Q", "nonsense", "velocity:AV"}) {
    inputs.measures = {measure};
    const auto responses = response::compute(inputs, {});
    INFO(measure);
    REQUIRE_FALSE(responses.ok());
    CHECK(responses.error().code == ErrorCode::bad_usage);
    CHECK(responses.error().what.find(measure) != std::string::npos);
  }
}

TEST_CASE("every status has its word", "[response]") {
  const std::vector<std::string> words = {"ok",       "not_steady", "censored",
                                          "arrested", "unreadable", "excluded"};
  for (std::size_t i = 0; i < words.size(); ++i)
    CHECK(response::name_of(static_cast<Status>(i)) == words[i]);
}

TEST_CASE("the limit of a silent rate comes from the longest silence that nothing lost breaks",
          "[response]") {
  // Window 270 to 300 s without a beat. Lost from 280 to 286 s, and excluded from 290 to 292 s: a beat may
  // lie in either, so 10 s is the longest silence, not the 22 s that can be read.
  Heart heart{channel_of("RA", regular(0.0, 260.0, 0.5)), plan_of({0.0}, 300.0), {}};
  heart.channel.unreadable = {{{Seconds(280.0), Seconds(286.0)}, "gap"}};
  heart.excluded = {{"RA", {Seconds(290.0), Seconds(292.0)}}};
  auto row = rates_of(heart).front();
  CHECK(row.status == Status::arrested);
  CHECK(row.limit.value() == 6.0); // 60 / 10 s, exact
  // A beat at 275 s: 8 s from 292 s on is then the longest, before it 5 s and behind it 5 s.
  heart.channel = channel_of("RA", {275.0});
  heart.channel.unreadable = {{{Seconds(280.0), Seconds(286.0)}, "gap"}};
  row = rates_of(heart).front();
  CHECK(row.status == Status::censored);
  CHECK(row.limit.value() == 7.5); // 60 / 8 s, exact
  CHECK(row.limit_side == "at_most");
}

TEST_CASE("what is excluded and what cannot be read are lost together", "[response]") {
  // 13.5 s each of 30 s, 45 %: neither exceeds half, both leave 10 %.
  Heart heart{channel_of("RA", regular(0.0, 300.0, 0.5)), plan_of({0.0}, 300.0), {}};
  heart.channel.unreadable = {{{Seconds(270.0), Seconds(283.5)}, "saturation"}};
  heart.excluded = {{"RA", {Seconds(283.5), Seconds(297.0)}}};
  auto row = rates_of(heart).front();
  CHECK(row.status == Status::unreadable);
  CHECK_FALSE(row.value.has_value());
  heart.excluded[0].span.end = Seconds(297.5);
  CHECK(rates_of(heart).front().status == Status::excluded);
  heart.excluded[0].span = heart.channel.unreadable[0].span; // the same 45 %: 55 % is left
  CHECK(rates_of(heart).front().status == Status::ok);
}
