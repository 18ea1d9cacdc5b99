// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <functional>
#include <span>
#include <vector>

#include "activation/activation.h"
#include "activation/settings.h"
#include "base/result.h"
#include "recording/recording.h"

namespace chronodrome::activation {

/// Activations of one channel, without a look at the others (compute_all is what a session uses).
/// Electrograms: conditioning, detection, acceptance by the local threshold, fiducial point on the least
/// filtered signal. Tension and pressure: steepest rises with the measures of each beat. Other roles: no
/// marks, quality and unreadable stretches only. Marks depend on the signal within 30 s of them and on
/// nothing else: a file that is cut gives the same marks away from the cut. (Beside other channels one thing
/// reaches farther: during a standstill a far field is compared with the chamber's last own beats.) Errors:
/// bad_usage (settings), not_enough_data (no samples). Accuracy: for trains at 240/min with peak to peak of
/// 10 noise SD sensitivity and positive predictivity of 0.999 and a timing SD of 0.22 ms at 1 kHz; see
/// tests/activation.
Result<ChannelActivations> compute(const recording::Channel& channel, const ActivationSettings& settings);

/// Asked about once a block while channels are read, with the samples of `channel` that have passed since it
/// was asked before; together they are the samples of all channels. Called from several threads at a time.
/// False: the work is to end.
using Proceed = std::function<bool(const recording::Channel& channel, std::size_t samples)>;

/// Activations of all channels of a session, in their order. Stimulus channels are read first and their
/// pulses blanked on the electrograms (stimuli are no activations); then each channel is read by itself, on
/// up to `threads` threads (0: as many as the machine has); then far fields are told by looking across
/// channels, and agreement between electrodes of one chamber enters the quality. Warns where an atrial and a
/// ventricular channel read one signal, and where more than half of the atrial marks lie within 2 ms of
/// ventricular ones. The same for any number of threads and, for each channel, for any order of channels.
/// `proceed` may be left empty; where it says no, every entry is the error cancelled.
std::vector<Result<ChannelActivations>> compute_all(std::span<const recording::Channel> channels,
                                                    const ActivationSettings& settings, unsigned threads,
                                                    const Proceed& proceed = {});

} // namespace chronodrome::activation
