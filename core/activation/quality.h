// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <span>
#include <vector>

#include "activation/activation.h"
#include "activation/channel_scan.h"

namespace chronodrome::activation {

/// Quality of one channel in windows of 10 s of the recording's clock.
/// signal_to_noise = median peak to peak of the beats over (2 noise SD).
/// index = 100 * (0.35 q_snr + 0.25 q_shape + 0.15 q_hum + 0.15 q_readable + 0.10 q_agree), each between 0
/// and 1: q_snr = (SNR - 3) / 12; q_shape from the mean confidence of the beats; q_hum = 1 - hum rms over
/// half of the median beat's rms (a quarter of its peak to peak); q_readable = 1 - 5 times the unreadable and
/// clipped share; q_agree = share of beats that another electrode of the same chamber shows within 60 ms
/// (without such an electrode the other four are scaled up). Bands: 80 and more good, 50 to 79 usable, below
/// 50 doubtful. A window without beats cannot exceed 40. `agreeing`: for each mark whether another electrode
/// of the chamber shows it; nothing: there is none.
std::vector<QualityWindow> quality_of(const ChannelScan& scan, const ChannelActivations& channel,
                                      const std::optional<std::vector<char>>& agreeing);

/// For each mark of `channel` whether any of `others` has one within 60 ms.
std::vector<char> agreement(const ChannelActivations& channel,
                            std::span<const ChannelActivations* const> others);

} // namespace chronodrome::activation
