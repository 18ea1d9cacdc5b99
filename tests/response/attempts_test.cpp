// Chronodrome, GPL-3.0-or-later.
// Which activations count as attempts to conduct, and what a window says that holds none or too few.
#include <algorithm>
#include <catch2/catch.hpp>

#include "response/hearts.h"

using namespace chronodrome;
using namespace chronodrome::tests;
using Catch::Matchers::WithinRel;
using conduction::DelayState;
using response::Response;
using response::Status;

namespace {

/// One step of 300 s: its window is the last 30 s.
struct Heart {
  activation::ChannelActivations atrium, ventricle;
  conduction::PathwayDelays pathway;
  protocol::CurvePlan plan = plan_of({0}, 300);
};

/// Beats every 0.5 s until `end`, all conducted in 60 ms.
Heart heart_until(double end) {
  Heart heart;
  std::vector<Attempt> attempts;
  std::vector<double> ventricular;
  for (const double time : regular(0, end, 0.5)) {
    attempts.push_back({time, 60.0});
    ventricular.push_back(time + 0.06);
  }
  heart.pathway = pathway_of(attempts);
  heart.atrium = channel_of("RA", regular(0, end, 0.5));
  heart.ventricle = channel_of("RV", ventricular);
  return heart;
}

/// Takes the answers from the beats of [from, to) s.
void block(Heart& heart, double from, double to, bool unseen = false) {
  for (auto& row : heart.pathway.rows) {
    if (*row.from_time < Seconds(from) || *row.from_time >= Seconds(to)) continue;
    row.state = DelayState::blocked;
    row.delay.reset();
    row.to_time.reset();
    row.answer_unseen = unseen;
  }
}

/// Makes the ventricle lead by 50 ms in the beats of [from, to) s.
void reverse(Heart& heart, double from, double to) {
  for (auto& row : heart.pathway.rows) {
    if (*row.from_time < Seconds(from) || *row.from_time >= Seconds(to)) continue;
    row.state = DelayState::retrograde;
    row.delay = milliseconds(-50.0);
    row.to_time = *row.from_time + *row.delay;
  }
}

Response read(const Heart& heart, const std::string& measure) {
  response::Inputs inputs;
  inputs.plan = &heart.plan;
  inputs.channels = {{&heart.atrium, recording::Role::atrial, "mV"},
                     {&heart.ventricle, recording::Role::ventricular, "mV"}};
  inputs.pathways = {{&heart.pathway, millimetres(12.0)}};
  inputs.measures = {measure};
  const auto responses = response::compute(inputs, {});
  REQUIRE(responses.ok());
  return responses->rows.front();
}

bool says(const Response& row, const std::string& words) {
  return std::any_of(row.flags.begin(), row.flags.end(),
                     [&](const std::string& flag) { return flag.find(words) != std::string::npos; });
}

} // namespace

TEST_CASE("beats whose answer is unseen count neither as conducted nor as blocked", "[response]") {
  // 20 of 30 s of the window: as blocked beats they would be complete block.
  Heart heart = heart_until(300.0);
  block(heart, 280.0, 300.0, true);
  const auto delay = read(heart, "delay:AV");
  CHECK(delay.status == Status::ok);
  CHECK_THAT(*delay.value, WithinRel(60.0, 1e-12));
  CHECK(delay.n_beats == 20);
  CHECK_FALSE(says(delay, "conducted beats only"));
  const auto share = read(heart, "conducted:AV");
  CHECK(*share.value == 1.0);
  CHECK(share.n_beats == 20);
  CHECK_FALSE(says(read(heart, "rate:RV"), "activations of RA conducted to RV"));
  block(heart, 280.0, 300.0); // seen: the same beats are block
  CHECK(read(heart, "delay:AV").status == Status::censored);
  CHECK(says(read(heart, "rate:RV"), "20 of 60 activations of RA conducted to RV"));
}

TEST_CASE("a window whose every answer is unseen is unreadable, not blocked and not arrested", "[response]") {
  Heart heart = heart_until(300.0);
  block(heart, 270.0, 300.0, true);
  for (const std::string measure : {"delay:AV", "velocity:AV", "conducted:AV"}) {
    const auto row = read(heart, measure);
    INFO(measure);
    CHECK(row.status == Status::unreadable);
    CHECK_FALSE(row.value.has_value());
    CHECK_FALSE(row.limit.has_value());
    CHECK(says(row, "antegrade conduction was not tested: the answer to no activation of RA could be seen"));
  }
}

TEST_CASE("a ventricular rhythm that conducts back tests no antegrade conduction", "[response]") {
  Heart heart = heart_until(300.0);
  reverse(heart, 260.0, 300.0);
  for (const std::string measure : {"delay:AV", "velocity:AV", "conducted:AV"}) {
    const auto row = read(heart, measure);
    INFO(measure);
    CHECK(row.status == Status::unreadable);
    CHECK_FALSE(row.value.has_value());
    CHECK_FALSE(row.limit.has_value());
    CHECK(says(row, "antegrade conduction was not tested"));
    CHECK(says(row, "(junctional or ventricular rhythm)"));
    CHECK_FALSE(says(row, "complete block"));
  }
  CHECK(says(read(heart, "rate:RV"), "activations of RV were not conducted from RA"));
  CHECK_FALSE(says(read(heart, "rate:RV"), "activations of RA conducted to RV"));
}

TEST_CASE("retrograde beats are left out of a share, the attempts beside them count", "[response]") {
  // 270 to 285 s retrograde, then 30 beats of which the last 2 are blocked: too few for complete block.
  Heart heart = heart_until(300.0);
  reverse(heart, 260.0, 285.0);
  block(heart, 299.0, 300.0);
  const auto share = read(heart, "conducted:AV");
  CHECK_THAT(*share.value, WithinRel(28.0 / 30.0, 1e-12));
  CHECK(share.n_beats == 30);
  CHECK(read(heart, "delay:AV").status == Status::ok);
}

TEST_CASE("an escape rhythm without an atrium is unreadable for the pathway, silence is arrest",
          "[response]") {
  Heart heart = heart_until(200.0);
  CHECK(read(heart, "conducted:AV").status == Status::arrested);
  for (const double time : regular(201.0, 300.0, 1.5)) {
    conduction::DelayRow row;
    row.to_time = Seconds(time);
    heart.pathway.rows.push_back(row);
  }
  for (const std::string measure : {"delay:AV", "conducted:AV"}) {
    const auto row = read(heart, measure);
    CHECK(row.status == Status::unreadable);
    CHECK(says(row, "antegrade conduction was not tested"));
  }
  heart.plan.excluded = {{Seconds(286.0), Seconds(300.0)}}; // 14 of 30 s
  CHECK(read(heart, "delay:AV").status == Status::unreadable);
}

TEST_CASE("one blocked beat before an atrial arrest is no complete block", "[response]") {
  // The window begins with one beat that is blocked, or with ten beats and then one; the atrium is silent
  // behind it.
  Heart heart = heart_until(270.5);
  block(heart, 270.0, 270.5);
  auto row = read(heart, "delay:AV");
  CHECK(row.status == Status::unreadable);
  CHECK_FALSE(row.limit.has_value());
  CHECK(says(row, "0 of 1 activations of RA conducted: too few to say complete block"));
  heart = heart_until(270.5 + 0.5);
  block(heart, 270.5, 271.0);
  row = read(heart, "delay:AV"); // one conducted, one blocked, 29 s of nothing
  CHECK_THAT(row.value.value(), WithinRel(60.0, 1e-12));
  CHECK(says(row, "conducted beats only: 1 of 2"));
}

TEST_CASE("the time of complete block ends one cycle behind its last beat", "[response]") {
  // Cycle 0.5 s: three blocked beats last 1 s and a cycle, 1.5 s; four last exactly 2 s, which does not
  // exceed 2 s; five are block by their number. None conducted and the atrium silent behind them.
  for (const auto& [count, status] :
       {std::pair{3, Status::unreadable}, std::pair{4, Status::unreadable}, std::pair{5, Status::censored}}) {
    Heart heart = heart_until(270.0 + 0.5 * count);
    block(heart, 270.0, 300.0);
    INFO(count);
    CHECK(read(heart, "delay:AV").status == status);
  }
  // Two slow beats, 1.5 s apart: 3 s, block by their time.
  Heart slow = heart_until(260.0);
  for (const double time : {271.0, 272.5}) {
    conduction::DelayRow row;
    row.from_time = Seconds(time);
    row.state = DelayState::blocked;
    slow.pathway.rows.push_back(row);
  }
  CHECK(read(slow, "delay:AV").status == Status::censored);
}

TEST_CASE("blocked beats apart from each other stand in no row", "[response]") {
  // Two blocked beats 6 s apart with retrograde ones between: not 6 s of block.
  Heart heart = heart_until(300.0);
  reverse(heart, 270.0, 300.0);
  block(heart, 280.0, 280.5);
  block(heart, 286.0, 286.5);
  const auto row = read(heart, "delay:AV");
  CHECK(row.status == Status::unreadable);
  CHECK(says(row, "0 of 2 activations of RA conducted: too few to say complete block"));
}

TEST_CASE("a velocity is positive whichever electrode leads", "[response]") {
  // Closed form: 12 mm in 20 ms. Within one chamber a delay is signed, and so is its row.
  Heart heart = heart_until(300.0);
  heart.pathway.within_chamber = true;
  for (auto& row : heart.pathway.rows) {
    row.delay = milliseconds(-20.0);
    row.to_time = *row.from_time + *row.delay;
  }
  CHECK_THAT(read(heart, "delay:AV").value.value(), WithinRel(-20.0, 1e-12));
  CHECK_THAT(read(heart, "velocity:AV").value.value(), WithinRel(0.6, 1e-12));
  block(heart, 270.0, 300.0);
  const auto row = read(heart, "velocity:AV");
  CHECK(row.status == Status::censored);
  CHECK_THAT(row.limit.value(), WithinRel(0.6, 1e-12));
  CHECK(row.limit_side == "at_most");
}
