// Chronodrome, GPL-3.0-or-later.
#include "simulation/golden.h"

#include <initializer_list>

#include "simulation/av_node.h"

namespace chronodrome::simulation {
namespace {

std::vector<double> every(double cycle, std::size_t count) {
  std::vector<double> times;
  for (std::size_t i = 0; i < count; ++i)
    times.push_back(cycle * static_cast<double>(i));
  return times;
}

/// Repeats a period of delays over a constant cycle of 200; a negative delay is a dropped beat.
GoldenSequence periods_of(std::string name, std::initializer_list<double> delays, std::size_t periods) {
  GoldenSequence sequence{std::move(name), {}, {}};
  for (std::size_t p = 0; p < periods; ++p) {
    for (const double delay : delays) {
      const double time = 200.0 * static_cast<double>(sequence.atrial_ms.size());
      sequence.atrial_ms.push_back(time);
      if (delay >= 0.0) sequence.ventricular_ms.push_back(time + delay);
    }
  }
  return sequence;
}

std::vector<double> from_intervals(double start, std::initializer_list<double> intervals) {
  std::vector<double> times{start};
  for (const double interval : intervals)
    times.push_back(times.back() + interval);
  return times;
}

} // namespace

GoldenSequence golden_one_to_one(std::size_t beats) {
  return periods_of("one to one", {50.0}, beats);
}

GoldenSequence golden_two_to_one(std::size_t atrial_beats) {
  return periods_of("two to one", {60.0, -1.0}, atrial_beats / 2);
}

GoldenSequence golden_wenckebach(std::size_t periods) {
  return periods_of("Wenckebach 4:3", {80.0, 120.0, 140.0, -1.0}, periods);
}

GoldenSequence golden_fixed_delay_block(std::size_t periods) {
  return periods_of("second degree with fixed delay 3:2", {60.0, 60.0, -1.0}, periods);
}

GoldenSequence golden_node(double cycle_ms, std::size_t atrial_beats) {
  GoldenSequence sequence{"node at a constant cycle", every(cycle_ms, atrial_beats), {}};
  std::vector<Seconds> atrial;
  for (const double time : sequence.atrial_ms)
    atrial.push_back(milliseconds(time));
  const auto delays = conduct(AvNode{}, atrial);
  for (std::size_t i = 0; i < delays.size(); ++i) {
    if (delays[i]) sequence.ventricular_ms.push_back(sequence.atrial_ms[i] + in_milliseconds(*delays[i]));
  }
  return sequence;
}

GoldenSequence golden_dissociation() {
  GoldenSequence sequence{"complete block", every(200.0, 47), {}};
  for (std::size_t k = 0; k < 20; ++k)
    sequence.ventricular_ms.push_back(100.0 + 470.0 * static_cast<double>(k));
  return sequence;
}

GoldenSequence golden_compensatory_pause() {
  return {"premature ventricular beat, full pause", every(200.0, 6), {50, 250, 450, 580, 850, 1050}};
}

GoldenSequence golden_interpolated() {
  return {"interpolated premature ventricular beat", every(200.0, 3), {50, 250, 350, 450}};
}

GoldenSequence golden_reset() {
  GoldenSequence sequence{"premature atrial beat", {0, 200, 400, 520, 730, 930}, {}};
  for (const double time : sequence.atrial_ms)
    sequence.ventricular_ms.push_back(time + 50.0);
  return sequence;
}

GoldenSequence golden_exit_block() {
  return {"exit block type II", from_intervals(0.0, {200, 200, 400, 200}), {}};
}

GoldenSequence golden_sinus_wenckebach() {
  return {"exit block type I", from_intervals(0.0, {230, 215, 205, 380, 230, 215, 205, 380}), {}};
}

GoldenSequence golden_sinus_pause() {
  return {"sinus pause", from_intervals(0.0, {200, 200, 200, 200, 200, 200, 200, 200, 530, 200}), {}};
}

} // namespace chronodrome::simulation
