// Chronodrome, GPL-3.0-or-later.
#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <numbers>

#include "response/hearts.h"

using namespace chronodrome;
using namespace chronodrome::tests;
using Catch::Matchers::WithinAbs;
using Catch::Matchers::WithinRel;
using response::Response;
using response::Status;

namespace {

struct Heart {
  activation::ChannelActivations atrium, ventricle;
  conduction::PathwayDelays pathway;
  protocol::CurvePlan plan;
  std::optional<Metres> distance;
};

/// A heart of these atrial beats; the ventricle follows where they conduct.
Heart heart_of(const std::vector<Attempt>& attempts, protocol::CurvePlan plan) {
  std::vector<double> atrial;
  std::vector<double> ventricular;
  for (const auto& attempt : attempts) {
    atrial.push_back(attempt.time);
    if (attempt.delay_ms >= 0.0) ventricular.push_back(attempt.time + attempt.delay_ms * 1e-3);
  }
  return {channel_of("RA", atrial), channel_of("RV", ventricular), pathway_of(attempts), std::move(plan), {}};
}

std::vector<Response> read(const Heart& heart, const std::string& measure) {
  response::Inputs inputs;
  inputs.plan = &heart.plan;
  inputs.channels = {{&heart.atrium, recording::Role::atrial, "mV"},
                     {&heart.ventricle, recording::Role::ventricular, "mV"}};
  inputs.pathways = {{&heart.pathway, heart.distance}};
  inputs.measures = {measure};
  auto responses = response::compute(inputs, {});
  REQUIRE(responses.ok());
  return responses->rows;
}

/// Beats every `cycle` s from `from` to `to`; the k-th has delays[k mod size].
std::vector<Attempt> beats(double from, double to, double cycle, const std::vector<double>& delays) {
  std::vector<Attempt> attempts;
  for (const double time : regular(from, to, cycle))
    attempts.push_back({time, delays[attempts.size() % delays.size()]});
  return attempts;
}

void append(std::vector<Attempt>& all, const std::vector<Attempt>& more) {
  all.insert(all.end(), more.begin(), more.end());
}

bool says(const Response& row, const std::string& words) {
  return std::any_of(row.flags.begin(), row.flags.end(),
                     [&](const std::string& flag) { return flag.find(words) != std::string::npos; });
}

} // namespace

TEST_CASE("a delay is the median over conducted beats of the window", "[response]") {
  // Hand-made: eight delays in turn, 60 61 59 62 58 60 61 59 ms: median 60, n - 1 standard deviation 1.3093
  // over eight (closed form).
  const auto row =
      read(heart_of(beats(0, 300, 0.5, {60, 61, 59, 62, 58, 60, 61, 59}), plan_of({0}, 300)), "delay:AV")
          .front();
  CHECK_THAT(*row.value, WithinRel(60.0, 1e-12));
  CHECK(row.unit == "ms");
  CHECK(row.n_beats == 60);
  CHECK(row.status == Status::ok);
  // Computed apart in Python from the definition: the sixty delays have n - 1 standard deviation 1.2346229324
  // and lag-1 correlation -0.6334, which is clipped to 0; sem = sqrt(pi/2) sd / sqrt(60). Delays are
  // differences of times of some 300 s in ms: 1e-9 of their scatter.
  CHECK_THAT(*row.sem, WithinRel(0.199764656489, 1e-8));
}

TEST_CASE("an outlying delay does not move the median", "[response]") {
  auto attempts = beats(0, 300, 0.5, {60});
  attempts[580].delay_ms = 240.0;
  const auto row = read(heart_of(attempts, plan_of({0}, 300)), "delay:AV").front();
  CHECK_THAT(*row.value, WithinRel(60.0, 1e-12));
}

TEST_CASE("two to one block is measured from the beats that conduct, and flagged", "[response]") {
  const auto heart = heart_of(beats(0, 300, 0.25, {100, -1}), plan_of({0}, 300));
  auto row = read(heart, "delay:AV").front();
  CHECK(row.status == Status::ok);
  CHECK_THAT(*row.value, WithinRel(100.0, 1e-12));
  CHECK(row.n_beats == 60);
  CHECK(says(row, "60 of 120 activations of RA conducted: a delay of conducted beats alone is biased low"));
  // The terminal marks such rows by how the flag begins.
  CHECK(std::any_of(row.flags.begin(), row.flags.end(),
                    [](const std::string& flag) { return flag.rfind("conducted beats only", 0) == 0; }));
  row = read(heart, "conducted:AV").front();
  CHECK(*row.value == 0.5);
  CHECK(row.unit == "1");
  CHECK(row.n_beats == 120);
  CHECK(*read(heart, "rate:RA").front().value == 240.0);
  row = read(heart, "rate:RV").front();
  CHECK_THAT(*row.value, WithinRel(120.0, 1e-12));
  CHECK(row.status == Status::ok);
  CHECK(says(row, "60 of 120 activations of RA conducted to RV: its rate is not the rate of RA"));
}

TEST_CASE("complete block censors the delay at the longest that this preparation conducted", "[response]") {
  auto attempts = beats(0, 300, 0.5, {60, 70, 150});
  append(attempts, beats(300, 600, 0.5, {-1}));
  Heart heart = heart_of(attempts, plan_of({0, 1e-6}, 300));
  auto rows = read(heart, "delay:AV");
  CHECK(rows[0].status == Status::ok);
  CHECK(rows[1].status == Status::censored);
  CHECK_FALSE(rows[1].value.has_value());
  CHECK_THAT(*rows[1].limit, WithinRel(150.0, 1e-12));
  CHECK(rows[1].limit_side == "at_least");
  CHECK(rows[1].n_beats == 0);
  CHECK(says(rows[1], "complete block: 0 of 60 activations of RA conducted"));
  rows = read(heart, "conducted:AV");
  CHECK(*rows[1].value == 0.0); // a share of none is measured
  CHECK(rows[1].status == Status::ok);
  heart.distance = millimetres(15.0);
  rows = read(heart, "velocity:AV");
  CHECK(rows[1].status == Status::censored);
  CHECK_THAT(*rows[1].limit, WithinRel(0.1, 1e-12)); // 15 mm / 150 ms
  CHECK(rows[1].limit_side == "at_most");
  // The ventricle is silent: its rate is arrested, with a bound.
  rows = read(heart, "rate:RV");
  CHECK(rows[1].status == Status::arrested);
}

TEST_CASE("an escape rhythm under complete block is a measured rate, flagged in words", "[response]") {
  auto attempts = beats(0, 300, 0.25, {-1});
  Heart heart = heart_of(attempts, plan_of({0}, 300));
  heart.ventricle = channel_of("RV", regular(0.1, 300.0, 1.25));
  for (const auto& mark : heart.ventricle.marks) {
    conduction::DelayRow row;
    row.to_time = mark.time;
    row.state = conduction::DelayState::unpaired;
    heart.pathway.rows.push_back(row);
  }
  const auto row = read(heart, "rate:RV").front();
  CHECK(row.status == Status::ok);
  CHECK_THAT(*row.value, WithinRel(48.0, 1e-12));
  CHECK(says(row, "0 of 120 activations of RA conducted to RV"));
  CHECK(says(row, "24 of 24 activations of RV were not conducted from RA (escape or premature)"));
  CHECK(read(heart, "delay:AV").front().status == Status::censored);
  CHECK_FALSE(read(heart, "delay:AV").front().limit.has_value()); // nothing ever conducted
}

TEST_CASE("complete block anywhere in the window censors the delay, a single dropped beat is flagged",
          "[response]") {
  // Window 270 to 300 s, 60 beats; blocked from 290 s on: 20 in a row. Or one of them at 299.5 s.
  for (const auto& [from, status] : {std::pair{290.0, Status::censored}, std::pair{299.5, Status::ok}}) {
    auto attempts = beats(0, from, 0.5, {60});
    append(attempts, beats(from, 300, 0.5, {-1}));
    const auto row = read(heart_of(attempts, plan_of({0}, 300)), "delay:AV").front();
    CHECK(row.status == status);
    CHECK(row.is_selected == (status == Status::ok));
    CHECK(says(row, "activations of RA conducted"));
    if (status != Status::censored) continue;
    CHECK_FALSE(row.value.has_value());
    CHECK_THAT(*row.limit, WithinRel(60.0, 1e-9));
    CHECK(row.limit_side == "at_least");
  }
}

TEST_CASE("a pathway without a beat of its first chamber is arrested", "[response]") {
  const auto row = read(heart_of(beats(0, 200, 0.5, {60}), plan_of({0}, 300)), "delay:AV").front();
  CHECK(row.status == Status::arrested);
  CHECK_FALSE(row.limit.has_value());
}

TEST_CASE("a beat whose answer could not be seen is not taken for a blocked one", "[response]") {
  auto attempts = beats(0, 300, 0.5, {60});
  for (auto& attempt : attempts) {
    if (attempt.time >= 280.0 && attempt.time < 290.0) attempt.delay_ms = -1.0;
  }
  Heart heart = heart_of(attempts, plan_of({0}, 300));
  CHECK_THAT(*read(heart, "conducted:AV").front().value, WithinRel(2.0 / 3.0, 1e-12));
  heart.ventricle.unreadable = {{{Seconds(279.9), Seconds(290.1)}, "saturation"}};
  const auto row = read(heart, "conducted:AV").front();
  CHECK(*row.value == 1.0);
  CHECK(row.n_beats == 40);
}

TEST_CASE("a beat is not taken for blocked if the signal is lost before its answer is due", "[response]") {
  // The beat at 280 s is seen, its answer would come 60 ms later (the control delay), after the loss.
  auto attempts = beats(0, 300, 0.5, {60});
  attempts[560].delay_ms = -1.0;
  Heart heart = heart_of(attempts, plan_of({0}, 300));
  CHECK(read(heart, "conducted:AV").front().n_beats == 60);
  heart.ventricle.unreadable = {{{Seconds(280.03), Seconds(280.2)}, "artefact"}};
  CHECK(read(heart, "conducted:AV").front().n_beats == 59);
  CHECK(*read(heart, "conducted:AV").front().value == 1.0);
}

TEST_CASE("excluded beats count for nothing, the longest delay included", "[response]") {
  auto attempts = beats(0, 300, 0.5, {60});
  append(attempts, beats(300, 600, 0.5, {-1}));
  attempts[100].delay_ms = 300.0; // at 50 s
  Heart heart = heart_of(attempts, plan_of({0, 1e-6}, 300));
  CHECK_THAT(*read(heart, "delay:AV")[1].limit, WithinRel(300.0, 1e-12));
  heart.plan.excluded = {{Seconds(49.9), Seconds(50.1)}, {Seconds(270.0), Seconds(280.0)}};
  const auto rows = read(heart, "delay:AV");
  CHECK_THAT(*rows[1].limit, WithinRel(60.0, 1e-12));
  CHECK(rows[0].n_beats == 40);
}

TEST_CASE("a drift within the scatter of either window is steady", "[response]") {
  // Delays of 60 ms; in the window before the last they scatter by 10 ms around 62: median 2 ms off, standard
  // error sqrt(pi/2) 10/sqrt(60) = 1.6 ms, so 2 ms is less than two of them and more than 1 % of 60 ms.
  auto attempts = beats(0, 300, 0.5, {60});
  for (std::size_t i = 480; i < 540; ++i)
    attempts[i].delay_ms = 62.0 + (i % 2 == 0 ? 10.0 : -10.0);
  attempts[482].delay_ms = attempts[483].delay_ms = 62.0; // the middle values
  CHECK(read(heart_of(attempts, plan_of({0}, 300)), "delay:AV").front().status == Status::ok);
  for (std::size_t i = 480; i < 540; ++i)
    attempts[i].delay_ms = 62.0;
  CHECK(read(heart_of(attempts, plan_of({0}, 300)), "delay:AV").front().status == Status::not_steady);
}

TEST_CASE("a pathway within one chamber says nothing of where a rate comes from", "[response]") {
  Heart heart = heart_of(beats(0, 300, 0.25, {100, -1}), plan_of({0}, 300));
  heart.pathway.within_chamber = true;
  CHECK(read(heart, "rate:RV").front().flags.empty());
}

TEST_CASE("velocity is the electrodes' distance over the median delay", "[response]") {
  // Closed form: 12 mm in 20 ms is 0.6 m/s; its relative error is the delay's.
  Heart heart = heart_of(beats(0, 300, 0.5, {19.5, 20, 20, 20.5}), plan_of({0}, 300));
  heart.distance = millimetres(12.0);
  const auto velocity = read(heart, "velocity:AV").front();
  const auto delay = read(heart, "delay:AV").front();
  CHECK_THAT(*velocity.value, WithinRel(0.6, 1e-12));
  CHECK(velocity.unit == "m/s");
  CHECK_THAT(*velocity.sem / *velocity.value, WithinRel(*delay.sem / *delay.value, 1e-12));
}

TEST_CASE("ambiguous delays are counted and told", "[response]") {
  Heart heart = heart_of(beats(0, 300, 0.5, {60}), plan_of({0}, 300));
  heart.pathway.rows[590].ambiguous = true;
  CHECK(says(read(heart, "delay:AV").front(), "1 of 60 delays are ambiguous"));
}

TEST_CASE("rows come by curve, then by measure in the session's order, then by time", "[response]") {
  Heart heart = heart_of(beats(0, 1200, 0.5, {60}), plan_of({0, 1e-7}, 300));
  auto second = heart.plan.curves[0];
  second.number = 2;
  second.background = "atropine 1e-07 M";
  for (auto& step : second.steps) {
    step.start += Seconds(600);
    step.end += Seconds(600);
  }
  heart.plan.curves.push_back(second);
  response::Inputs inputs;
  inputs.plan = &heart.plan;
  inputs.channels = {{&heart.atrium, recording::Role::atrial, "mV"},
                     {&heart.ventricle, recording::Role::ventricular, "mV"}};
  inputs.pathways = {{&heart.pathway, {}}};
  inputs.measures = {"rate:RV", "delay:AV"};
  const auto responses = response::compute(inputs, {});
  REQUIRE(responses.ok());
  REQUIRE(responses->rows.size() == 8);
  std::string order;
  for (const auto& row : responses->rows)
    order += std::to_string(row.curve) + row.measure[0] + (row.concentration.value() > 0 ? "+" : "0") + " ";
  CHECK(order == "1r0 1r+ 1d0 1d+ 2r0 2r+ 2d0 2d+ ");
  CHECK(responses->rows[4].background == "atropine 1e-07 M");
}
