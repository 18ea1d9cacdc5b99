// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>

#include "activation/activation.h"
#include "base/result.h"
#include "conduction/conduction.h"
#include "conduction/settings.h"
#include "recording/recording.h"

namespace chronodrome::conduction {

/// One end of a pathway.
struct Electrode {
  const activation::ChannelActivations* activations = nullptr;
  recording::Role role = recording::Role::other;
  /// End of the channel's signal. Nothing: not known, then only its unreadable stretches hide answers.
  std::optional<Seconds> end = std::nullopt;
};

/// Which activation of `to` each activation of `from` caused.
/// Across chambers: the cheapest assignment that keeps the order (dynamic programming). A link of delay d
/// costs, with the control delay c, (d - c) / c if longer and (c - d) / (0.25 c) if shorter, at most 6; an
/// activation without partner costs 4. A retrograde link costs 2 + |d - r| / (0.25 r) with r the usual
/// retrograde delay, at most 6, and stands only if it is one of a run of three or more such beats in a row or
/// makes its atrial beat early (below 0.9 of the running cycle). No link spans a gap or a stretch that either
/// channel cannot read. Where the ventricle beats regularly, at least 1.2 times slower than the atrium and at
/// phases that spread evenly over the atrial cycle, the stretch is dissociated and all its links are undone,
/// for a minimum-cost assignment would link them happily.
/// `answer_unseen`: a blocked row whose time for an answer, from the activation to the longest antegrade
/// delay behind it, meets a stretch that `to` cannot read or the end of its signal. Within one chamber: each
/// activation with its nearest partner within +-60 ms, signed; both must choose each other. `ambiguous`:
/// about a delay longer than 0.9 of the atrial cycle (within five beats of it), and in steady 2:1 conduction
/// where no 1:1 stretch has shown the usual delay: the times alone then fit another atrial beat too. Rows in
/// order of their earliest time; each activation of both channels stands in exactly one. Errors: bad_usage
/// (settings; a missing end). Cost: n log n for the order, n k for the assignment, k the activations inside
/// one window. Source: order-preserving assignment, common practice of sequence alignment; phase test:
/// Rayleigh 1919 as in Mardia KV, Statistics of Directional Data, 1972.
Result<PathwayDelays> pair(const std::string& pathway, const Electrode& from, const Electrode& to,
                           const ConductionSettings& settings);

/// The usual delay, estimated conservatively: median over stretches of four or more cycles in which exactly
/// one activation of `to` follows each of `from` inside the window and delays change by less than 5 % (or 3
/// ms) from beat to beat (a cycle that meets what either channel cannot read breaks the stretch and counts
/// for nothing); of those in the first `control_period` if there are any, else of all. Without such
/// a stretch: the lower quartile of the delays to the next activation (`from_stretches` false); without any
/// delay the geometric mean of 1.5 times the shortest and a quarter of the longest delay of the window.
struct ControlDelay {
  Seconds delay;
  bool from_stretches = false;
};
ControlDelay control_delay_of(const activation::ChannelActivations& from,
                              const activation::ChannelActivations& to, const DelayWindow& window,
                              Seconds control_period);

} // namespace chronodrome::conduction
