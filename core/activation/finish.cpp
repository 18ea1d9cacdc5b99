// Chronodrome, GPL-3.0-or-later.
#include "activation/finish.h"

#include <algorithm>
#include <array>
#include <cmath>

#include "activation/shape.h"
#include "activation/slope.h"
#include "base/number_text.h"
#include "numerics/robust.h"

namespace chronodrome::activation {
namespace {

constexpr Seconds kLobeWindow{10.0};
constexpr double kLobeTie = 0.05;
constexpr Seconds kStepMargin{0.1};
constexpr Seconds kFlatMargin{0.02};

constexpr double kUnlikeMatch = 0.6;
constexpr double kLeastUsualMatch = 0.8;

double between_0_and_1(double value) {
  return std::clamp(value, 0.0, 1.0);
}

enum class Lobe : char { top, bottom };

/// The lobe to mark on each beat.
std::vector<Lobe> dominant_lobes(const std::vector<Candidate>& beats) {
  std::vector<double> leaning; // +1: top only, -1: bottom only
  for (const Candidate& beat : beats) {
    const double sum = static_cast<double>(beat.top) + static_cast<double>(beat.bottom);
    leaning.push_back(sum > 0.0 ? (static_cast<double>(beat.top) - static_cast<double>(beat.bottom)) / sum
                                : 0.0);
  }
  std::vector<Lobe> lobes;
  std::vector<double> window;
  std::size_t first = 0;
  std::size_t end = 0;
  for (std::size_t i = 0; i < beats.size(); ++i) {
    while (beats[i].time - beats[first].time > kLobeWindow)
      ++first;
    while (end < beats.size() && beats[end].time - beats[i].time <= kLobeWindow)
      ++end;
    window.assign(leaning.begin() + static_cast<std::ptrdiff_t>(first),
                  leaning.begin() + static_cast<std::ptrdiff_t>(end));
    const double usual = numerics::median(window);
    if (std::abs(usual) > kLobeTie) {
      lobes.push_back(usual > 0.0 ? Lobe::top : Lobe::bottom);
    } else {
      lobes.push_back(beats[i].top_at <= beats[i].bottom_at ? Lobe::top : Lobe::bottom);
    }
  }
  return lobes;
}

double confidence_of(const Candidate& beat, double match, double usual) {
  const double height = static_cast<double>(beat.height);
  const double noise = static_cast<double>(beat.noise);
  const double q_noise = noise > 0.0 ? between_0_and_1((height / noise - 2.4) / (7.0 - 2.4)) : 1.0;
  const double q_level = between_0_and_1(height / (0.7 * static_cast<double>(beat.level)));
  const double q_shape =
      between_0_and_1((match - kUnlikeMatch) / (std::max(kLeastUsualMatch, usual) - kUnlikeMatch));
  return std::min(q_noise, q_level) * (0.6 + 0.4 * q_shape) * (beat.is_clipped ? 0.7 : 1.0);
}

std::string method_text(const recording::Channel& channel, Fiducial fiducial, const std::string& filters) {
  std::string text;
  switch (fiducial) {
  case Fiducial::steepest_fall:
    text = "steepest negative slope";
    break;
  case Fiducial::steepest_rise:
    text = "steepest positive slope";
    break;
  case Fiducial::main_lobe:
    text = "largest |V| of the main deflection";
    break;
  }
  if (channel.lead != recording::Lead::none) text += " (" + recording::name_of(channel.lead) + ")";
  return text + "; " + filters;
}

double timing_sd_of(const ChannelScan& scan, const std::vector<Candidate>& beats) {
  const double fs = scan.channel->time_base().rate().value();
  const double finest = 0.05 / fs;
  if (beats.empty()) return finest;
  std::vector<double> noise;
  for (const WindowNoise& window : scan.noise)
    noise.push_back(window.noise_sd);
  const double sd = noise.empty() ? 0.0 : numerics::median(noise);
  const SlopeFilter slope(scan.channel->time_base().rate());
  const double half = std::max(scan.traits.refine_window.value(), 0.5 * scan.traits.deflection_width.value());
  const double own = std::pow(sd * slope.noise_gain(), 2) * (2.0 * half * fs + 1.0);
  std::vector<double> energies;
  for (const Candidate& beat : beats)
    energies.push_back(std::max(0.0, static_cast<double>(beat.slope_energy) - own));
  const double energy = numerics::median(energies);
  // A deflection that hides in the noise is known to its window at best.
  if (energy <= 0.0) return half;
  return std::max(finest, std::min(half, 1.5 * sd / std::sqrt(energy)));
}

/// True inside a stretch that cannot be read, and right beside a flat line, whose ends are steps.
bool lies_in(const std::vector<Unreadable>& stretches, Seconds time) {
  auto stretch = std::partition_point(stretches.begin(), stretches.end(),
                                      [&](const Unreadable& u) { return u.span.end + kFlatMargin <= time; });
  for (; stretch != stretches.end() && stretch->span.start - kFlatMargin <= time; ++stretch) {
    const Seconds margin = stretch->reason == "flat" ? kFlatMargin : Seconds(0.0);
    if (stretch->span.start - margin <= time && time < stretch->span.end + margin) return true;
  }
  return false;
}

} // namespace

Fiducial fiducial_of(const recording::Channel& channel) {
  if (channel.role == recording::Role::map) return Fiducial::steepest_rise;
  return channel.lead == recording::Lead::unipolar ? Fiducial::steepest_fall : Fiducial::main_lobe;
}

std::vector<Unreadable> in_order(std::vector<Unreadable> stretches) {
  std::stable_sort(stretches.begin(), stretches.end(),
                   [](const Unreadable& a, const Unreadable& b) { return a.span.start < b.span.start; });
  std::vector<Unreadable> found;
  for (Unreadable& stretch : stretches) {
    if (!found.empty()) stretch.span.start = std::max(stretch.span.start, found.back().span.end);
    if (stretch.span.start < stretch.span.end) found.push_back(std::move(stretch));
  }
  return found;
}

std::vector<Warning> doubts_about(const ChannelActivations& channel, std::size_t lobe_changes) {
  std::vector<Warning> warnings;
  const auto doubt = [&](const std::string& what, const std::string& remedy) {
    warnings.push_back({"", {}, "channel " + channel.channel + ": " + what, remedy});
  };
  if (lobe_changes > 0) {
    doubt("the larger lobe of the deflection changed " + std::to_string(lobe_changes) +
              (lobe_changes == 1 ? " time" : " times") + ", and the marks with it",
          "look at the signal there; a shift of some milliseconds is no change of conduction");
  }
  std::vector<double> intervals;
  for (std::size_t i = 1; i < channel.marks.size(); ++i)
    intervals.push_back((channel.marks[i].time - channel.marks[i - 1].time).value());
  if (intervals.size() < 20) return warnings;
  const double cycle = numerics::median(intervals);
  const double scatter = numerics::mad_sd(intervals);
  for (const double mains : {50.0, 60.0}) {
    const double periods = cycle * mains;
    if (periods < 7.5 && std::abs(periods - std::round(periods)) < 0.005 && scatter * mains < 0.02) {
      doubt("the marks lie " + number_text(std::round(periods), 2) + " periods of " + number_text(mains, 2) +
                " Hz apart",
            "check whether hum was taken for a rhythm");
    }
  }
  return warnings;
}

ChannelActivations finish_electrogram(const ChannelScan& scan, const CandidateTrain& train,
                                      const std::vector<Seconds>& steps) {
  const recording::Channel& channel = *scan.channel;
  const Fiducial fiducial = fiducial_of(channel);
  ChannelActivations result;
  result.channel = channel.label;
  result.mains_hz = scan.report.mains_hz;
  result.method = method_text(channel, fiducial, scan.report.method);
  result.warnings = scan.report.warnings;
  for (const auto& range : scan.report.unreadable)
    result.unreadable.push_back({range.span, range.reason});
  for (const Seconds step : steps)
    result.unreadable.push_back({{step - kStepMargin, step + kStepMargin}, "step"});
  result.unreadable = in_order(std::move(result.unreadable));
  std::vector<Candidate> beats;
  for (const Candidate& candidate : train.candidates) {
    if (!lies_in(result.unreadable, candidate.time)) beats.push_back(candidate);
  }
  const std::vector<Lobe> lobes =
      fiducial == Fiducial::main_lobe ? dominant_lobes(beats) : std::vector<Lobe>();
  std::vector<double> matches;
  for (std::size_t i = 0; i < beats.size(); ++i)
    matches.push_back(shape_match(beats, i));
  std::size_t lobe_changes = 0;
  for (std::size_t i = 0; i < beats.size(); ++i) {
    Activation mark;
    mark.sample = fiducial == Fiducial::steepest_fall ? beats[i].fall_at : beats[i].rise_at;
    if (fiducial == Fiducial::main_lobe) {
      mark.sample = lobes[i] == Lobe::top ? beats[i].top_at : beats[i].bottom_at;
      if (i > 0 && lobes[i] != lobes[i - 1]) ++lobe_changes;
    }
    mark.time = channel.time_at(mark.sample);
    mark.amplitude = static_cast<double>(beats[i].amplitude);
    mark.confidence = confidence_of(beats[i], matches[i], usual_match(matches, i));
    if (!result.marks.empty() && mark.time <= result.marks.back().time) continue;
    result.marks.push_back(mark);
  }
  result.timing_sd = Seconds(timing_sd_of(scan, beats));
  for (Warning& warning : doubts_about(result, lobe_changes))
    result.warnings.push_back(std::move(warning));
  return result;
}

} // namespace chronodrome::activation
