// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cmath>
#include <cstddef>
#include <initializer_list>
#include <optional>
#include <string>
#include <vector>

#include "activation/activation.h"

namespace chronodrome::test_support {

/// Activations at times in milliseconds.
inline activation::ChannelActivations marks_at(const std::vector<double>& times_ms,
                                               const std::string& label = "X") {
  activation::ChannelActivations channel;
  channel.channel = label;
  for (const double t : times_ms) {
    activation::Activation mark;
    mark.time = milliseconds(t);
    mark.confidence = 1.0;
    channel.marks.push_back(mark);
  }
  return channel;
}

/// Atrial beats every `pp` ms through a node that recovers: a beat that comes RT after the last ventricular
/// one takes shortest + a exp(-RT / tau), or is blocked if RT does not exceed dead. Times in ms.
struct RecoveringNode {
  double shortest = 60.0, a = 200.0, tau = 50.0, dead = 30.0;
};
struct NodeRun {
  std::vector<double> atrial, ventricular;
  std::vector<std::optional<double>> delay; ///< of each atrial beat
};
inline NodeRun run_node(double pp, std::size_t beats, const RecoveringNode& node = {}) {
  NodeRun run;
  double last = -1e9;
  for (std::size_t i = 0; i < beats; ++i) {
    const double t = pp * static_cast<double>(i);
    run.atrial.push_back(t);
    const double rest = t - last;
    if (rest <= node.dead) {
      run.delay.push_back(std::nullopt);
      continue;
    }
    const double delay = node.shortest + node.a * std::exp(-rest / node.tau);
    run.delay.push_back(delay);
    last = t + delay;
    run.ventricular.push_back(last);
  }
  return run;
}

} // namespace chronodrome::test_support
