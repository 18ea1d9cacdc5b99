// Chronodrome, GPL-3.0-or-later.
#include "simulation/signals.h"

#include <algorithm>
#include <cmath>

#include "simulation/disturb.h"
#include "simulation/random.h"
#include "simulation/waves.h"

namespace chronodrome::simulation {
namespace {

/// Beyond this many widths a deflection is below 1e-9 of its height.
constexpr double kReach = 7.0;
/// A beat that starts in the ventricle spreads more slowly and looks different.
constexpr double kEctopicWidth = 1.6;
constexpr double kEctopicHeight = -0.8;
/// Half width of a stimulus marker.
constexpr double kMarkerSeconds = 0.001;
/// A contraction ends before the next one starts: its plateau and fall take no more than this of the time.
constexpr double kRestShare = 0.95;

/// An activation of a chamber as an electrode sees it.
struct Passage {
  Seconds time;
  bool ectopic = false;
};

std::vector<Passage> passages_of(Chamber chamber, const Beats& beats) {
  std::vector<Passage> passages;
  if (chamber == Chamber::atrial) {
    for (const AtrialBeat& beat : beats.atrial)
      passages.push_back({beat.time, false});
    return passages;
  }
  for (const VentricularBeat& beat : beats.ventricular) {
    if (chamber == Chamber::his && beat.his) passages.push_back({*beat.his, false});
    if (chamber == Chamber::ventricular) passages.push_back({beat.time, !beat.his.has_value()});
  }
  return passages;
}

void add_electrogram(std::vector<double>& samples, const ChannelPlan& channel, const Scenario& scenario,
                     const Beats& beats) {
  const auto wave = channel.lead == recording::Lead::unipolar ? unipolar_wave : bipolar_wave;
  const double height = channel.inverted ? -channel.amplitude : channel.amplitude;
  Random random(scenario.seed, channel.label + "/amplitude");
  for (const Passage& passage : passages_of(chamber_of(channel), beats)) {
    double of_beat = height;
    if (channel.amplitude_sd_ratio > 0.0)
      of_beat *= std::max(0.2, 1.0 + channel.amplitude_sd_ratio * random.normal());
    const double form = passage.ectopic ? kEctopicHeight : 1.0;
    const Seconds width = passage.ectopic ? channel.width * kEctopicWidth : channel.width;
    const Seconds t0 = passage.time + channel.offset;
    add_wave(samples, channel.rate, wave, t0, width, of_beat * form, kReach);
    for (const auto& companion : {channel.repolarisation, channel.motion}) {
      if (!companion) continue;
      add_wave(samples, channel.rate, bump_wave, t0 + companion->offset, companion->width,
               of_beat * companion->ratio, kReach);
    }
  }
  for (const auto& far : channel.far_fields) {
    for (const Passage& passage : passages_of(far.from, beats)) {
      const double form = passage.ectopic ? kEctopicHeight : 1.0;
      add_wave(samples, channel.rate, wave, passage.time + far.wave.offset, far.wave.width,
               height * form * far.wave.ratio, kReach);
    }
  }
}

void add_contractions(std::vector<double>& samples, const ChannelPlan& channel, const Scenario& scenario,
                      const Beats& beats, const BathEffects& effects) {
  const auto passages = passages_of(chamber_of(channel), beats);
  const auto target = channel.role == recording::Role::tension ? EffectTarget::force : EffectTarget::pressure;
  const FluctuationPlan& plan = scenario.fluctuation;
  Fluctuation fluctuation(scenario.seed, channel.label + "/force", plan.force_sd_ratio, plan.force_tau);
  Random random(scenario.seed, channel.label + "/amplitude");
  for (std::size_t i = 0; i < passages.size(); ++i) {
    const Seconds time = passages[i].time;
    double ratio = effects.ratio_at(target, time) + fluctuation.at(time);
    if (channel.amplitude_sd_ratio > 0.0) ratio += channel.amplitude_sd_ratio * random.normal();
    Contraction contraction{channel.rise, channel.plateau, channel.fall};
    if (i + 1 < passages.size()) {
      const Seconds room = (passages[i + 1].time - time - channel.rise) * kRestShare;
      const Seconds wanted = channel.plateau + channel.fall;
      if (wanted > room) {
        const double share = std::max(room / wanted, 0.05);
        contraction.plateau = channel.plateau * share;
        contraction.fall = channel.fall * share;
      }
    }
    const Seconds foot = time + channel.offset + channel.latency - channel.rise * 0.5;
    add_contraction(samples, channel.rate, contraction, foot, channel.amplitude * std::max(ratio, 0.0));
  }
}

void add_markers(std::vector<double>& samples, const ChannelPlan& channel, const Beats& beats) {
  for (const Stimulus& stimulus : beats.stimuli) {
    const double first = std::ceil((stimulus.time.value() - kMarkerSeconds) * channel.rate.value());
    const double last = std::floor((stimulus.time.value() + kMarkerSeconds) * channel.rate.value());
    for (double i = std::max(first, 0.0); i <= last && i < static_cast<double>(samples.size()); ++i)
      samples[static_cast<std::size_t>(i)] += channel.amplitude;
  }
}

} // namespace

std::size_t sample_count(const ChannelPlan& channel, Seconds duration) {
  return static_cast<std::size_t>(std::llround(duration.value() * channel.rate.value()));
}

std::vector<double> samples_of(const ChannelPlan& channel, const Scenario& scenario, const Beats& beats,
                               const BathEffects& effects) {
  std::vector<double> samples(sample_count(channel, scenario.duration), channel.baseline);
  if (recording::is_mechanical(channel.role)) {
    add_contractions(samples, channel, scenario, beats, effects);
  } else if (channel.role == recording::Role::stimulus) {
    add_markers(samples, channel, beats);
  } else if (recording::is_electrogram(channel.role)) {
    add_electrogram(samples, channel, scenario, beats);
  }
  disturb(samples, channel.rate, channel.disturbance, beats.stimuli, scenario.seed, channel.label);
  if (channel.range) convert(samples, (*channel.range)[0], (*channel.range)[1], channel.bits);
  return samples;
}

} // namespace chronodrome::simulation
