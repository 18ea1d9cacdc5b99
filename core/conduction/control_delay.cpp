// Chronodrome, GPL-3.0-or-later.
#include <algorithm>
#include <cmath>
#include <vector>

#include "conduction/dissociation.h"
#include "conduction/pairing.h"
#include "numerics/robust.h"

namespace chronodrome::conduction {
namespace {

constexpr std::size_t kShortestStretch = 4;
constexpr double kSteadyShare = 0.05;
constexpr double kSteady_s = 3e-3;
constexpr double kWithinCycle = 0.9;

/// A `from` that exactly one `to` follows before the next `from`.
struct Cycle {
  Seconds start;
  double delay = 0.0;
  bool usable = false;
};

std::vector<Cycle> cycles_of(const activation::ChannelActivations& from,
                             const activation::ChannelActivations& to, const DelayWindow& window) {
  // A beat of either channel may lie where that cannot be read: what is left would pair with the wrong one.
  const std::vector<recording::Span> unreadable = unreadable_of({&from, &to});
  std::vector<Cycle> cycles;
  std::size_t j = 0;
  for (std::size_t i = 0; i + 1 < from.marks.size(); ++i) {
    const Seconds start = from.marks[i].time;
    const Seconds next = from.marks[i + 1].time;
    while (j < to.marks.size() && to.marks[j].time <= start)
      ++j;
    std::size_t end = j;
    while (end < to.marks.size() && to.marks[end].time < next)
      ++end;
    Cycle cycle{start, 0.0, false};
    if (end == j + 1) {
      cycle.delay = (to.marks[j].time - start).value();
      cycle.usable = cycle.delay >= window.shortest.value() && cycle.delay <= window.longest.value() &&
                     cycle.delay < kWithinCycle * (next - start).value() &&
                     !meets_any(unreadable, start.value(), next.value());
    }
    cycles.push_back(cycle);
  }
  return cycles;
}

/// Delays of the steady stretches whose cycles all begin before `until`.
std::vector<double> steady_delays(const std::vector<Cycle>& cycles, Seconds until) {
  std::vector<double> found;
  std::size_t i = 0;
  while (i < cycles.size()) {
    std::size_t j = i;
    while (j < cycles.size() && cycles[j].usable && cycles[j].start <= until) {
      const double change = j > i ? std::abs(cycles[j].delay - cycles[j - 1].delay) : 0.0;
      if (change > std::max(kSteady_s, kSteadyShare * cycles[j].delay)) break;
      ++j;
    }
    if (j - i >= kShortestStretch) {
      for (std::size_t k = i; k < j; ++k)
        found.push_back(cycles[k].delay);
    }
    i = std::max(j, i + 1);
  }
  return found;
}

} // namespace

ControlDelay control_delay_of(const activation::ChannelActivations& from,
                              const activation::ChannelActivations& to, const DelayWindow& window,
                              Seconds control_period) {
  const std::vector<Cycle> cycles = cycles_of(from, to, window);
  if (!cycles.empty()) {
    const Seconds until = cycles.front().start + control_period;
    std::vector<double> delays = steady_delays(cycles, until);
    if (delays.empty()) delays = steady_delays(cycles, cycles.back().start);
    if (!delays.empty()) return {Seconds(numerics::median(delays)), true};
    for (const Cycle& cycle : cycles) {
      if (cycle.usable) delays.push_back(cycle.delay);
    }
    if (!delays.empty()) return {Seconds(numerics::quantile(delays, 0.25)), false};
  }
  return {Seconds(std::sqrt(1.5 * window.shortest.value() * 0.25 * window.longest.value())), false};
}

} // namespace chronodrome::conduction
