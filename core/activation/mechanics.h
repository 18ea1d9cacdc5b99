// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <optional>
#include <span>
#include <vector>

#include "activation/activation.h"
#include "activation/channel_scan.h"
#include "activation/settings.h"
#include "recording/recording.h"

namespace chronodrome::activation {

/// A twitch or pulse in samples of a block, before its times are known.
struct Twitch {
  double rise_at = 0.0; ///< steepest rise, refined by a parabola
  double foot_at = 0.0;
  double peak_at = 0.0;
  double half_at = 0.0; ///< half relaxation; 0: not reached
  double foot = 0.0, peak = 0.0;
  double rate_of_rise = 0.0; ///< units/s
  double rate_of_fall = 0.0;
};

/// Measures the contraction whose steepest rise is at sample `rise` of a low-passed signal. The foot of a
/// tension is the last minimum before the steepest rise, that of a pressure the last sample before the
/// derivative exceeds 5 % of its maximum (end-diastolic, not the lowest pressure). The search ends at `from`
/// and `to`, the steepest rises of the neighbours.
/// Derivatives are central differences: of a sine of f Hz they show sin(2 pi f / rate) / (2 pi f / rate).
Twitch measure_twitch(std::span<const double> x, std::size_t rise, std::size_t from, std::size_t to,
                      Hertz rate, bool is_pressure);

/// The same with times.
MechanicalBeat beat_of(const Twitch& twitch, Seconds time, Seconds foot, Seconds peak,
                       Seconds half_relaxation);

/// Reads tension or pressure once: candidates for beats, spaced by the refractory time plus 20 ms.
/// Errors: those of conditioning::condition.
Result<ChannelScan> scan_mechanical(const recording::Channel& channel, const ActivationSettings& settings,
                                    const conditioning::Proceed& proceed);

/// The beats among the candidates: steepest rise of at least twitch_share times the local one (upper
/// quartile, within +-10 s, of those that reach a fifth of the second largest) and above six times what the
/// noise beyond the low-pass can make of it. Rhythm from force equals the electrical one only under 1:1
/// coupling: an early beat may not move anything. Confidence = (rise / (0.7 local rise)) * ((rise / floor -
/// 1) / 2), each held between 0 and 1.
ChannelActivations finish_mechanical(const ChannelScan& scan, const ActivationSettings& settings);

/// The beat about `time`, for a mark that was set by hand: its steepest rise within 20 ms. Nothing where the
/// channel has no signal.
std::optional<MechanicalBeat> beat_about(const recording::Channel& channel, Seconds time,
                                         const ActivationSettings& settings);

} // namespace chronodrome::activation
