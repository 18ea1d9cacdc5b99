// Chronodrome, GPL-3.0-or-later.
// Small made-up hearts for the tests of responses.
#pragma once

#include <functional>
#include <string>
#include <vector>

#include "response/response.h"

namespace chronodrome::tests {

/// A channel whose marks stand at these times (s).
inline activation::ChannelActivations channel_of(const std::string& label, const std::vector<double>& times) {
  activation::ChannelActivations channel;
  channel.channel = label;
  for (const double time : times) {
    activation::Activation mark;
    mark.time = Seconds(time);
    mark.confidence = 1.0;
    channel.marks.push_back(mark);
  }
  return channel;
}

/// Times from `from` up to (not with) `to`, `cycle` apart. Exact where all three are multiples of 2^-k.
inline std::vector<double> regular(double from, double to, double cycle) {
  std::vector<double> times;
  for (std::size_t i = 0; from + static_cast<double>(i) * cycle < to; ++i)
    times.push_back(from + static_cast<double>(i) * cycle);
  return times;
}

/// Times of a heart whose cycle length (s) is a function of time.
inline std::vector<double> beating(double from, double to, const std::function<double(double)>& cycle) {
  std::vector<double> times;
  for (double time = from; time < to; time += cycle(time))
    times.push_back(time);
  return times;
}

inline void add_times(std::vector<double>& times, const std::vector<double>& more) {
  times.insert(times.end(), more.begin(), more.end());
}

/// Steps of one agent: the control, then one step a concentration, `length` s each, from time 0 on.
inline protocol::CurvePlan plan_of(const std::vector<double>& concentrations, double length) {
  protocol::Curve curve;
  curve.number = 1;
  curve.agent = "acetylcholine";
  double time = 0.0;
  for (const double concentration : concentrations) {
    protocol::Step step;
    step.concentration = Molar(concentration);
    step.start = Seconds(time);
    step.end = Seconds(time += length);
    curve.steps.push_back(step);
  }
  protocol::CurvePlan plan;
  plan.curves.push_back(curve);
  return plan;
}

/// One activation of `from`: when, and its delay in ms; below zero: blocked.
struct Attempt {
  double time = 0.0;
  double delay_ms = 0.0;
};

inline conduction::PathwayDelays pathway_of(const std::vector<Attempt>& attempts) {
  conduction::PathwayDelays pathway;
  pathway.pathway = "AV";
  pathway.from = "RA";
  pathway.to = "RV";
  pathway.control_delay = Seconds(0.06);
  for (const auto& attempt : attempts) {
    conduction::DelayRow row;
    row.from_time = Seconds(attempt.time);
    row.state = attempt.delay_ms < 0.0 ? conduction::DelayState::blocked : conduction::DelayState::conducted;
    if (attempt.delay_ms >= 0.0) {
      row.delay = milliseconds(attempt.delay_ms);
      row.to_time = *row.from_time + *row.delay;
    }
    pathway.rows.push_back(row);
  }
  return pathway;
}

} // namespace chronodrome::tests
