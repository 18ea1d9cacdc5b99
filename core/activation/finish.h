// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <span>
#include <vector>

#include "activation/activation.h"
#include "activation/candidate.h"
#include "activation/channel_scan.h"
#include "activation/far_field.h"

namespace chronodrome::activation {

/// How the time of a channel's activations is defined.
enum class Fiducial { steepest_fall, steepest_rise, main_lobe };
/// unipolar: steepest fall; monophasic action potential: steepest rise; bipolar, ECG and leads of unknown
/// kind: main lobe.
Fiducial fiducial_of(const recording::Channel& channel);

/// Marks of an electrogram from the candidates that are left. Bipolar: the largest |V|, on the lobe that
/// dominates among the beats within +-10 s, so that the mark does not jump between lobes of nearly equal
/// size; where neither dominates by 5 %, the earlier one. Confidence = min(q_noise, q_level) * (0.6 + 0.4 *
/// q_shape) * (clipped: 0.7), where
///   q_noise = (height / N - 2.4) / (7 - 2.4), 2.4 N being what noise alone reaches as a rule,
///   q_level = height / (0.7 S), S the local level,
///   q_shape = (r - 0.6) / (max(0.8, r_usual) - 0.6), r the correlation with the mean shape of the eight
///     beats to either side, r_usual the median r of those beats: noise common to all counts once, in
///     q_noise,
/// each held between 0 and 1. An ectopic beat of another shape keeps 0.6.
/// timing_sd = max(1.5 noise / sqrt(sum of squared slopes), 0.05 sample periods): the Cramer-Rao bound with
/// the loss of a slope detector against it (simulated).
ChannelActivations finish_electrogram(const ChannelScan& scan, const CandidateTrain& train,
                                      const std::vector<Seconds>& steps);

/// Warnings that the marks themselves give rise to: beats at a fraction of the mains, lobes that changed.
std::vector<Warning> doubts_about(const ChannelActivations& channel, std::size_t lobe_changes);

/// Stretches in order of time without overlap; the earlier one keeps what two share.
std::vector<Unreadable> in_order(std::vector<Unreadable> stretches);

} // namespace chronodrome::activation
