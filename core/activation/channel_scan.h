// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <cstdint>
#include <vector>

#include "activation/activation.h"
#include "activation/candidate.h"
#include "activation/settings.h"
#include "base/result.h"
#include "recording/recording.h"

namespace chronodrome::activation {

/// Noise and faults of one channel over one window of 10 s of the recording's clock.
struct WindowNoise {
  std::size_t window = 0;   ///< from window * 10 s on
  double noise_sd = 0.0;    ///< robust SD between the beats, in the channel's unit
  double mains_power = 0.0; ///< sum of squares of the removed hum over the samples
  double clipped = 0.0;     ///< samples
  double samples = 0.0;
};

/// A channel after its samples were read: everything that later decisions need.
struct ChannelScan {
  const recording::Channel* channel = nullptr;
  conditioning::SpeciesTraits traits;
  Seconds refractory;
  std::vector<Candidate> candidates;    ///< in order; electrograms
  std::vector<MechanicalBeat> twitches; ///< in order; tension and pressure, before the threshold
  std::vector<double> twitch_samples;   ///< position of the steepest rise of each twitch
  std::vector<double> twitch_floors;    ///< rise that noise alone could make, units/s
  std::vector<WindowNoise> noise;       ///< in order; windows without samples are missing
  conditioning::ConditioningReport report;
  std::vector<Warning> warnings;
};

constexpr Seconds kQualityWindow{10.0};

/// Refractory time of a channel by role and species, unless the settings say otherwise.
Seconds refractory_of(const recording::Channel& channel, const ActivationSettings& settings);

/// Reads an electrogram once, block by block. Errors: those of conditioning::condition.
Result<ChannelScan> scan_electrogram(const recording::Channel& channel, const ActivationSettings& settings,
                                     const conditioning::Proceed& proceed);

} // namespace chronodrome::activation
