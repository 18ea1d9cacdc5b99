// Chronodrome, GPL-3.0-or-later.
#include "activation/compute.h"

#include <algorithm>
#include <cmath>
#include <optional>

#include "activation/acceptance.h"
#include "activation/channel_scan.h"
#include "activation/far_field.h"
#include "activation/finish.h"
#include "activation/mechanics.h"
#include "activation/noise_meter.h"
#include "activation/quality.h"
#include "activation/shape.h"
#include "activation/stimuli.h"
#include "base/number_text.h"
#include "base/parallel.h"

namespace chronodrome::activation {
namespace {

/// A channel between its own pass and the look across channels.
struct Pending {
  std::optional<Error> error;
  ChannelScan scan;
  CandidateTrain train; ///< electrograms
  std::vector<Seconds> steps;
  std::optional<ChannelActivations> finished; ///< other roles
};

/// A channel without activations: only what cannot be read.
Result<ChannelScan> scan_plain(const recording::Channel& channel, const ActivationSettings& settings,
                               const conditioning::Proceed& proceed) {
  ChannelScan scan;
  scan.channel = &channel;
  scan.traits = conditioning::traits_of(settings.conditioning.species);
  auto report = conditioning::condition(
      channel, settings.conditioning, [](const conditioning::ConditionedBlock&) {}, proceed);
  if (!report.ok()) return report.error();
  scan.report = std::move(report).value();
  return scan;
}

ChannelActivations finish_plain(const ChannelScan& scan) {
  ChannelActivations result;
  result.channel = scan.channel->label;
  result.method = "no activations on a channel of role " + recording::name_of(scan.channel->role);
  result.warnings = scan.report.warnings;
  for (const auto& range : scan.report.unreadable)
    result.unreadable.push_back({range.span, range.reason});
  return result;
}

Pending first_pass(const recording::Channel& channel, const ActivationSettings& settings,
                   const conditioning::Proceed& proceed) {
  Pending pending;
  const bool electrical = recording::is_electrogram(channel.role);
  auto scan = electrical                               ? scan_electrogram(channel, settings, proceed)
              : recording::is_mechanical(channel.role) ? scan_mechanical(channel, settings, proceed)
                                                       : scan_plain(channel, settings, proceed);
  if (!scan.ok()) {
    pending.error = scan.error();
    return pending;
  }
  pending.scan = std::move(scan).value();
  if (electrical) {
    pending.train.role = channel.role;
    pending.train.lead = channel.lead;
    const Hertz rate = channel.time_base().rate();
    pending.train.candidates =
        accept_beats(pending.scan.candidates, rate, pending.scan.traits.is_slow, settings);
    pending.steps = take_out_steps(pending.train.candidates, rate);
    take_out_wiggles(pending.train.candidates);
    pending.scan.candidates = {};
  } else {
    pending.finished = recording::is_mechanical(channel.role) ? finish_mechanical(pending.scan, settings)
                                                              : finish_plain(pending.scan);
  }
  return pending;
}

/// The other chamber is looked at only if some electrode records it.
void look_across(std::vector<Pending>& pendings, const ActivationSettings& settings) {
  std::vector<CandidateTrain> trains;
  std::vector<std::size_t> owners;
  for (std::size_t i = 0; i < pendings.size(); ++i) {
    if (pendings[i].error || pendings[i].finished) continue;
    trains.push_back(std::move(pendings[i].train));
    owners.push_back(i);
  }
  const auto width = conditioning::traits_of(settings.conditioning.species).deflection_width;
  reject_far_field(trains, width, settings);
  for (std::size_t k = 0; k < owners.size(); ++k)
    pendings[owners[k]].train = std::move(trains[k]);
}

int chamber_group(recording::Role role) {
  switch (role) {
  case recording::Role::sinus:
  case recording::Role::atrial:
    return 1;
  case recording::Role::ventricular:
  case recording::Role::ecg:
    return 2;
  default:
    return 0;
  }
}

void add_warnings(const Pending& pending, ChannelActivations& channel, const ActivationSettings& settings) {
  const auto add = [&](const std::string& what, const std::string& remedy) {
    channel.warnings.push_back({"", {}, "channel " + channel.channel + ": " + what, remedy});
  };
  if (!pending.scan.traits.known) {
    add("species \"" + settings.conditioning.species + "\" is not in the table; guinea-pig values are used",
        "set the refractory times of the analysis if they do not fit");
  }
  const auto& source = *pending.scan.channel;
  if (recording::is_electrogram(source.role) && source.lead == recording::Lead::none &&
      source.role != recording::Role::ecg && source.role != recording::Role::map) {
    add("neither unipolar nor bipolar is stated; the largest |V| is marked, as for bipolar leads",
        "set the lead in the session");
  }
  if (!pending.train.rejected.empty()) {
    add(std::to_string(pending.train.rejected.size()) +
            " deflections were taken for the far field of the other chamber, beside " +
            std::to_string(channel.marks.size()) + " activations",
        "look at a few of them on the signal");
  }
  if (pending.train.undecided > 0) {
    add(std::to_string(pending.train.undecided) +
            " activations fall together with those of the other chamber, and no other beats are there to "
            "compare them with: they may be its far field",
        "look at a few of them on the signal");
  }
}

constexpr Seconds kTogether{2e-3};

/// Share of the first channel's marks that have one of the second's within 2 ms.
double coinciding_share(const ChannelActivations& first, const ChannelActivations& second) {
  if (first.marks.empty()) return 0.0;
  std::size_t found = 0;
  std::size_t k = 0;
  for (const Activation& mark : first.marks) {
    while (k < second.marks.size() && second.marks[k].time < mark.time - kTogether)
      ++k;
    if (k < second.marks.size() && second.marks[k].time <= mark.time + kTogether) ++found;
  }
  return static_cast<double>(found) / static_cast<double>(first.marks.size());
}

bool share_signal(const recording::Channel& a, const recording::Channel& b) {
  return a.recording == b.recording && a.signal == b.signal;
}

/// An atrial and a ventricular channel that show the same beats: one lead read twice, or one chamber alone.
void warn_of_shared_beats(std::vector<Pending>& pendings, std::span<const recording::Channel> channels) {
  const auto is_atrial = [&](std::size_t i) {
    return channels[i].role == recording::Role::atrial || channels[i].role == recording::Role::sinus;
  };
  for (std::size_t a = 0; a < pendings.size(); ++a) {
    if (!is_atrial(a) || pendings[a].error) continue;
    for (std::size_t v = 0; v < pendings.size(); ++v) {
      if (channels[v].role != recording::Role::ventricular || pendings[v].error) continue;
      ChannelActivations& atrial = *pendings[a].finished;
      ChannelActivations& ventricular = *pendings[v].finished;
      const bool same = share_signal(channels[a], channels[v]);
      const double share = coinciding_share(atrial, ventricular);
      if (!same && share <= 0.5) continue;
      const std::string names = atrial.channel + " and " + ventricular.channel;
      const std::string what =
          same ? names + " are one lead, which shows both chambers; each counts the beats of both"
               : number_text(std::round(100.0 * share), 3) + " % of the marks of " + atrial.channel +
                     " coincide with marks of " + ventricular.channel + " within 2 ms";
      const std::string remedy = same ? "give each its own lead, or check the marks of both on the signal"
                                      : "check on the signal whether " + names + " show both chambers";
      for (ChannelActivations* channel : {&atrial, &ventricular})
        channel->warnings.push_back({"", {}, "channel " + channel->channel + ": " + what, remedy});
    }
  }
}

std::vector<Result<ChannelActivations>> finish_all(std::vector<Pending>& pendings,
                                                   std::span<const recording::Channel> channels,
                                                   const ActivationSettings& settings, unsigned threads) {
  parallel_for(pendings.size(), threads, [&](std::size_t i) {
    Pending& pending = pendings[i];
    if (pending.error || pending.finished) return;
    pending.finished = finish_electrogram(pending.scan, pending.train, pending.steps);
  });
  parallel_for(pendings.size(), threads, [&](std::size_t i) {
    if (pendings[i].error) return;
    std::vector<const ChannelActivations*> partners;
    for (std::size_t k = 0; k < pendings.size(); ++k) {
      const bool same = chamber_group(channels[k].role) != 0 &&
                        chamber_group(channels[k].role) == chamber_group(channels[i].role);
      if (k != i && same && !pendings[k].error) partners.push_back(&*pendings[k].finished);
    }
    ChannelActivations& channel = *pendings[i].finished;
    std::optional<std::vector<char>> agreeing;
    if (!partners.empty()) agreeing = agreement(channel, partners);
    channel.quality = quality_of(pendings[i].scan, channel, agreeing);
    add_warnings(pendings[i], channel, settings);
  });
  warn_of_shared_beats(pendings, channels);
  std::vector<Result<ChannelActivations>> results;
  for (Pending& pending : pendings) {
    if (pending.error) {
      results.emplace_back(std::move(*pending.error));
    } else {
      results.emplace_back(std::move(*pending.finished));
    }
  }
  return results;
}

} // namespace

std::string name_of(Origin origin) {
  switch (origin) {
  case Origin::detected:
    return "detected";
  case Origin::added:
    return "added";
  case Origin::moved:
    return "moved";
  }
  return "detected";
}

Result<ChannelActivations> compute(const recording::Channel& channel, const ActivationSettings& settings) {
  if (auto error = settings.check()) return *error;
  std::vector<Pending> pendings;
  pendings.push_back(first_pass(channel, settings, {}));
  look_across(pendings, settings);
  return std::move(finish_all(pendings, std::span(&channel, 1), settings, 1).front());
}

std::vector<Result<ChannelActivations>> compute_all(std::span<const recording::Channel> channels,
                                                    const ActivationSettings& settings, unsigned threads,
                                                    const Proceed& proceed) {
  if (auto error = settings.check()) return std::vector<Result<ChannelActivations>>(channels.size(), *error);
  const auto asking_for = [&proceed](const recording::Channel& channel) {
    if (!proceed) return conditioning::Proceed();
    return conditioning::Proceed(
        [&proceed, &channel](std::size_t samples) { return proceed(channel, samples); });
  };
  ActivationSettings blanking = settings;
  for (const recording::Channel& channel : channels) {
    if (channel.role != recording::Role::stimulus || channel.time_base().size() == 0) continue;
    const auto spans = blanked_by(find_stimuli(channel, asking_for(channel)));
    blanking.conditioning.blanked.insert(blanking.conditioning.blanked.end(), spans.begin(), spans.end());
  }
  std::sort(blanking.conditioning.blanked.begin(), blanking.conditioning.blanked.end(),
            [](const recording::Span& a, const recording::Span& b) { return a.start < b.start; });
  std::vector<Pending> pendings(channels.size());
  parallel_for(channels.size(), threads, [&](std::size_t i) {
    pendings[i] = first_pass(channels[i], recording::is_electrogram(channels[i].role) ? blanking : settings,
                             asking_for(channels[i]));
  });
  for (const Pending& pending : pendings) {
    const bool is_stopped = pending.error && pending.error->code == ErrorCode::cancelled;
    if (is_stopped) return std::vector<Result<ChannelActivations>>(channels.size(), *pending.error);
  }
  look_across(pendings, settings);
  return finish_all(pendings, channels, settings, threads);
}

} // namespace chronodrome::activation
