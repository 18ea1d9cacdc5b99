// Chronodrome, GPL-3.0-or-later.
#include <algorithm>
#include <catch2/catch.hpp>

#include "response/hearts.h"

using namespace chronodrome;
using namespace chronodrome::tests;
using Catch::Matchers::WithinRel;
using response::Status;

namespace {

/// Contractions twice a second; the k-th develops developed[k mod size], rising at ten times that per second.
activation::ChannelActivations contracting(const std::string& label, double until,
                                           const std::vector<double>& developed) {
  auto channel = channel_of(label, regular(0.0, until, 0.5));
  for (const auto& mark : channel.marks) {
    activation::MechanicalBeat beat;
    beat.time = mark.time;
    beat.developed = developed[channel.beats.size() % developed.size()];
    beat.diastolic = 5.0;
    beat.systolic = beat.diastolic + beat.developed;
    beat.rate_of_rise = 10.0 * beat.developed;
    channel.beats.push_back(beat);
  }
  return channel;
}

response::Response read(const activation::ChannelActivations& channel, const std::string& unit,
                        const std::string& measure, recording::Role role = recording::Role::pressure) {
  const auto plan = plan_of({0.0}, 300.0);
  response::Inputs inputs;
  inputs.plan = &plan;
  inputs.channels = {{&channel, role, unit}};
  inputs.measures = {measure};
  const auto responses = response::compute(inputs, {});
  REQUIRE(responses.ok());
  return responses->rows.front();
}

response::FlowSeries flow_of(const std::vector<double>& values) {
  response::FlowSeries flow;
  flow.channel = "Q";
  flow.unit = "mL/min";
  flow.values = values;
  for (std::size_t i = 0; i < values.size(); ++i)
    flow.times.push_back(Seconds(static_cast<double>(i) + 0.5));
  return flow;
}

} // namespace

TEST_CASE("force and pressure are the median developed value, in the channel's own unit", "[response]") {
  const auto channel = contracting("LV", 300.0, {80, 90, 100});
  auto row = read(channel, "mmHg", "pressure:LV");
  CHECK(*row.value == 90.0);
  CHECK(row.unit == "mmHg");
  CHECK(row.n_beats == 60);
  CHECK(row.status == Status::ok);
  row = read(channel, "mmHg", "dpdt_max:LV");
  CHECK(*row.value == 900.0);
  CHECK(row.unit == "mmHg/s");
  row = read(channel, "g", "force:LV", recording::Role::tension);
  CHECK(*row.value == 90.0);
  CHECK(row.unit == "g");
}

TEST_CASE("a muscle that does not contract is arrested, its force is not 0", "[response]") {
  const auto row = read(contracting("F", 200.0, {10}), "mN", "force:F", recording::Role::tension);
  CHECK(row.status == Status::arrested);
  CHECK_FALSE(row.value.has_value());
  CHECK_FALSE(row.limit.has_value());
}

TEST_CASE("a change of unit changes values and standard errors by its factor, nothing else", "[response]") {
  // The factor is a power of two: exact in binary.
  const std::vector<double> developed = {80, 90, 100, 91, 87};
  std::vector<double> smaller = developed;
  for (double& value : smaller)
    value /= 8.0;
  const auto row = read(contracting("LV", 300.0, developed), "a", "pressure:LV");
  const auto other = read(contracting("LV", 300.0, smaller), "b", "pressure:LV");
  CHECK(*other.value * 8.0 == *row.value);
  CHECK_THAT(*other.sem * 8.0, WithinRel(*row.sem, 1e-14));
  CHECK(other.status == row.status);
  CHECK(other.n_beats == row.n_beats);
}

TEST_CASE("flow is the mean over the window", "[response]") {
  std::vector<double> values(300, 8.0);
  for (std::size_t i = 270; i < 300; ++i)
    values[i] = i % 2 == 0 ? 11.0 : 13.0;
  const auto plan = plan_of({0.0}, 300.0);
  response::Inputs inputs;
  inputs.plan = &plan;
  inputs.flows = {flow_of(values)};
  inputs.measures = {"flow:Q"};
  auto responses = response::compute(inputs, {});
  REQUIRE(responses.ok());
  auto row = responses->rows.front();
  CHECK(*row.value == 12.0);
  CHECK(row.unit == "mL/min");
  CHECK(row.n_beats == 0);
  CHECK(row.status == Status::not_steady); // it was 8 in the window before
  inputs.flows = {flow_of(std::vector<double>(200, 8.0))};
  responses = response::compute(inputs, {});
  CHECK(responses->rows.front().status == Status::unreadable); // no samples in the window
}

TEST_CASE("an exclusion takes out the beat at its start and keeps the one at its end", "[response]") {
  const auto channel = contracting("F", 300.0, {10});
  const auto plan = plan_of({0.0}, 300.0);
  response::Inputs inputs;
  inputs.plan = &plan;
  inputs.channels = {{&channel, recording::Role::tension, "mN"}};
  inputs.excluded = {{"F", {Seconds(280.0), Seconds(285.0)}}};
  inputs.measures = {"force:F"};
  CHECK(response::compute(inputs, {})->rows.front().n_beats == 50); // of 60: 280.0, 280.5 ... 284.5
}

TEST_CASE("an exclusion of a flow channel takes its samples out", "[response]") {
  std::vector<double> values(300, 8.0);
  for (std::size_t i = 275; i < 285; ++i)
    values[i] = 80.0; // a bubble
  const auto plan = plan_of({0.0}, 300.0);
  response::Inputs inputs;
  inputs.plan = &plan;
  inputs.flows = {flow_of(values)};
  inputs.excluded = {{"Q", {Seconds(275.0), Seconds(285.0)}}};
  inputs.measures = {"flow:Q"};
  const auto responses = response::compute(inputs, {});
  REQUIRE(responses.ok());
  CHECK(*responses->rows.front().value == 8.0);
  CHECK(responses->rows.front().status == Status::ok);
}
