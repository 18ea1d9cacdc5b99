// Chronodrome, GPL-3.0-or-later.
#include "simulation/av_node.h"

#include <algorithm>
#include <cmath>

namespace chronodrome::simulation {

std::optional<Seconds> AvNode::delay(Seconds recovery) const {
  if (recovery <= recovery_min) return std::nullopt;
  return delay_min + delay_span * std::exp(-(recovery / recovery_tau));
}

std::optional<Seconds> steady_delay(const AvNode& node, Seconds cycle) {
  // h(r) = r + delay(r) - cycle rises for r above the tangent point, where the delay falls by less than r
  // rises: the root there, if any, is the stable one.
  const auto excess = [&](double r) {
    return r + node.delay_min.value() + node.delay_span.value() * std::exp(-r / node.recovery_tau.value()) -
           cycle.value();
  };
  const double tau = node.recovery_tau.value(), span = node.delay_span.value();
  double low = span > tau ? tau * std::log(span / tau) : 0.0;
  low = std::max(low, node.recovery_min.value());
  double high = cycle.value();
  if (excess(low) >= 0.0 || high <= low) return std::nullopt;
  while (high - low > 1e-13) {
    const double middle = 0.5 * (low + high);
    if (middle <= low || middle >= high) break;
    (excess(middle) < 0.0 ? low : high) = middle;
  }
  return cycle - Seconds(high);
}

Seconds delay_min_for(const AvNode& node, Seconds delay, Seconds cycle) {
  return delay - node.delay_span * std::exp(-((cycle - delay) / node.recovery_tau));
}

Seconds shortest_one_to_one(const AvNode& node) {
  return node.delay_min + node.recovery_tau * (1.0 + std::log(node.delay_span / node.recovery_tau));
}

std::vector<std::optional<Seconds>> conduct(const AvNode& node, std::span<const Seconds> atrial,
                                            std::optional<Seconds> last_exit) {
  std::vector<std::optional<Seconds>> delays;
  delays.reserve(atrial.size());
  for (const Seconds time : atrial) {
    const auto delay = last_exit ? node.delay(time - *last_exit) : std::optional<Seconds>(node.delay_min);
    if (delay) last_exit = time + *delay;
    delays.push_back(delay);
  }
  return delays;
}

} // namespace chronodrome::simulation
