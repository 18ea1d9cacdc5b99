// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <string>
#include <vector>

#include "base/quantity.h"
#include "recording/recording.h"

namespace chronodrome::activation {

enum class Origin { detected, added, moved };
std::string name_of(Origin origin);

/// The moment a depolarisation front passes an electrode, or a twitch or pulse rises most steeply.
struct Activation {
  Seconds time;            ///< with the channel's skew
  double sample = 0.0;     ///< fractional position in the signal: leads back to the raw samples
  double amplitude = 0.0;  ///< peak to peak, in the channel's unit
  double confidence = 0.0; ///< 0 to 1
  Origin origin = Origin::detected;
};

/// One contraction, foot to foot. Pressure in mmHg, tension in mN or the channel's own unit.
struct MechanicalBeat {
  Seconds time; ///< steepest rise
  Seconds foot; ///< upstroke onset
  Seconds peak;
  double diastolic = 0.0; ///< at the foot (end-diastolic, not the minimum)
  double systolic = 0.0;
  double developed = 0.0;    ///< systolic - diastolic
  double rate_of_rise = 0.0; ///< maximum of the derivative, unit/s
  double rate_of_fall = 0.0; ///< minimum of the derivative, unit/s, negative
  Seconds time_to_peak;      ///< from the foot
  Seconds half_relaxation; ///< from the peak to half of the developed value; 0 if not reached before the next
                           ///< foot
};

/// Why a stretch of a channel cannot be read.
struct Unreadable {
  recording::Span span;
  std::string reason; ///< "gap", "saturation", "flat", "step", "noise" ...
};

/// Quality of one channel over one window.
struct QualityWindow {
  recording::Span span;
  double signal_to_noise = 0.0;  ///< median peak to peak of the beats over twice the noise; 0: no beats
  double noise_sd = 0.0;         ///< robust, between beats, in the channel's unit
  double mains_rms = 0.0;        ///< of what was removed, in the channel's unit
  double clipped_share = 0.0;    ///< 0 to 1
  double unreadable_share = 0.0; ///< 0 to 1
  int index = 0;                 ///< 0 to 100
};

/// Everything found on one channel. `marks` strictly increasing in time.
struct ChannelActivations {
  std::string channel; ///< label
  std::vector<Activation> marks;
  std::vector<MechanicalBeat> beats;  ///< tension and pressure: one a mark, same order
  std::vector<Unreadable> unreadable; ///< in order of time, not overlapping
  std::vector<QualityWindow> quality;
  Seconds timing_sd;     ///< standard deviation of one activation time from noise and sampling
  double mains_hz = 0.0; ///< frequency removed; 0: none
  std::string method;    ///< how the time is defined, for the report
  std::vector<Warning> warnings;
};

} // namespace chronodrome::activation
