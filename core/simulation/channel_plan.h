// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <array>
#include <optional>
#include <string>
#include <vector>

#include "base/quantity.h"
#include "recording/recording.h"
#include "recording/time_base.h"

namespace chronodrome::simulation {

enum class Chamber { atrial, his, ventricular };
std::string name_of(Chamber chamber);
std::optional<Chamber> chamber_named(const std::string& name);

/// A deflection that follows another one: another chamber seen from afar, repolarisation, motion.
struct Companion {
  double ratio = 0.0;   ///< its height over the near field's
  Seconds width{0.008}; ///< as ChannelPlan::width
  Seconds offset;       ///< after the activation that causes it
};

/// What disturbs a channel. Amplitudes in the channel's unit.
struct Disturbance {
  double white_sd = 0.0;
  double pink_sd = 0.0;                ///< 1/f noise from 0.05 Hz up, starting from 0
  double mains_amplitude = 0.0;        ///< of the fundamental
  Hertz mains{50.0};                   ///< nominal frequency
  Hertz mains_offset{0.0};             ///< actual minus nominal
  double mains_phase_rad = 0.0;        ///< of the fundamental at time zero: a sin(2 pi f t + phase)
  std::vector<double> mains_harmonics; ///< amplitudes of the 2nd, 3rd ... harmonic over the fundamental's
  struct Step {
    Seconds time;
    double value = 0.0;
  };
  std::vector<Step> mains_steps; ///< from `time` on mains amplitude times `value` (someone touches the bath)
  double wander_amplitude = 0.0; ///< of a slow sinusoid (perfusion pump, bubbling)
  Hertz wander{0.5};
  double wander_phase_rad = 0.0;
  std::vector<Step> baseline_steps;      ///< from `time` on the baseline lies `value` higher
  std::vector<recording::Span> dropouts; ///< the lead is off: exactly 0
  double artefact_amplitude = 0.0;       ///< of each stimulus: 1 ms of it, then a tail of the opposite sign
  Seconds artefact_tau{0.004};           ///< of that tail, which starts at 0.3 of the amplitude
};

/// One recorded channel.
struct ChannelPlan {
  std::string label;                              ///< unique
  std::string source;                             ///< column name or EDF label; empty: the label
  recording::Role role = recording::Role::atrial; ///< `map` is not simulated
  recording::Lead lead = recording::Lead::none;   ///< electrograms: unipolar or bipolar
  std::string unit;
  Hertz rate{1000.0};
  std::optional<Chamber> chamber;  ///< default: by role (tension atrial, pressure and ECG ventricular)
  double amplitude = 1.0;          ///< electrogram: largest |V|; tension, pressure: basal developed value
  double amplitude_sd_ratio = 0.0; ///< from beat to beat, over the amplitude
  bool inverted = false;           ///< electrogram upside down (bipolar leads have no right way up)
  Seconds width{0.002};            ///< w of u = (t - t0) / w
  Seconds offset;                  ///< conduction time from the chamber's origin to the electrode
  struct FarField {
    Chamber from = Chamber::ventricular;
    Companion wave;
  };
  std::vector<FarField> far_fields;
  std::optional<Companion> repolarisation; ///< Gaussian of the same sign as the main deflection
  std::optional<Companion> motion;         ///< Gaussian, contraction moving the electrode
  double baseline = 0.0;                   ///< resting tension, diastolic pressure, flow, temperature
  Seconds latency{0.020};                  ///< mechanical: from the activation to the steepest rise
  Seconds rise{0.060};                     ///< mechanical: half cosine up
  Seconds plateau{0.0};                    ///< mechanical: at the top
  Seconds fall{0.090};                     ///< mechanical: half cosine down; shortens with the cycle
  Disturbance disturbance;
  std::optional<std::array<double, 2>> range; ///< converter's rails; nothing: none, values as computed
  int bits = 16;                              ///< of the converter, 2 to 16
  std::optional<std::array<double, 2>> position_mm;
};

struct PathwayPlan {
  std::string label, from, to; ///< labels of electrogram channels
  std::optional<double> distance_mm;
};

/// The chamber a channel belongs to.
Chamber chamber_of(const ChannelPlan& channel);

} // namespace chronodrome::simulation
