// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <span>
#include <vector>

#include "base/quantity.h"

namespace chronodrome::simulation {

/// The atrioventricular node as a recovery curve: an impulse that reaches it a time r after the last one left
/// takes delay_min + delay_span exp(-r / recovery_tau), and is blocked where r <= recovery_min. Wenckebach
/// periods, 2:1 and higher block are not put in: they follow. The defaults are a round-numbered example with
/// the time constant of isolated rabbit nodes (50 +- 5 ms, Am J Physiol abstract of the Montreal Heart
/// Institute).
struct AvNode {
  Seconds delay_min{0.060};
  Seconds delay_span{0.200};
  Seconds recovery_tau{0.050};
  Seconds recovery_min{0.030};

  /// Nothing: blocked.
  [[nodiscard]] std::optional<Seconds> delay(Seconds recovery) const;
};

/// Delay of steady 1:1 conduction at cycle length `cycle`, or nothing where 1:1 conduction is not stable.
/// Solves d = delay(cycle - d) for its lowest root by bisection on the stable side of the tangent point
/// recovery = tau ln(span / tau). Accuracy: 1e-12 s.
std::optional<Seconds> steady_delay(const AvNode& node, Seconds cycle);

/// The delay_min that makes `delay` the steady delay at `cycle`. Requires: delay < cycle.
Seconds delay_min_for(const AvNode& node, Seconds delay, Seconds cycle);

/// Longest cycle length at which 1:1 conduction is lost: delay_min + tau (1 + ln(span / tau)), where the
/// recovery curve's slope reaches -1. Requires: span > tau, recovery_min below tau ln(span / tau).
Seconds shortest_one_to_one(const AvNode& node);

/// Delay of each of the atrial activations (in order of time), nothing where blocked. The first one finds the
/// node rested unless `last_exit` says when an impulse last left it.
std::vector<std::optional<Seconds>> conduct(const AvNode& node, std::span<const Seconds> atrial,
                                            std::optional<Seconds> last_exit = std::nullopt);

} // namespace chronodrome::simulation
