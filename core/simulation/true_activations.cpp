// Chronodrome, GPL-3.0-or-later.
#include <algorithm>

#include "simulation/truth.h"

namespace chronodrome::simulation {
namespace {

bool within(Seconds time, Seconds end) {
  return time >= Seconds(0.0) && time < end;
}

/// From the chamber's origin to the moment that defines an activation on the channel.
Seconds lag_of(const ChannelPlan& channel) {
  return recording::is_mechanical(channel.role) ? channel.offset + channel.latency : channel.offset;
}

const ChannelPlan& channel_named(const Scenario& scenario, const std::string& label) {
  return *std::find_if(scenario.channels.begin(), scenario.channels.end(),
                       [&](const ChannelPlan& channel) { return channel.label == label; });
}

Seconds earliest(const TrueDelay& row) {
  return row.from && row.to ? std::min(*row.from, *row.to) : row.from ? *row.from : *row.to;
}

class PathwayRows {
public:
  PathwayRows(const Beats& beats, Chamber from, Chamber to, Seconds from_lag, Seconds to_lag, Seconds end)
      : beats_(beats), from_(from), to_(to), from_lag_(from_lag), to_lag_(to_lag), end_(end) {}

  std::vector<TrueDelay> rows() {
    if (from_ == to_) {
      within_chamber();
    } else if (from_ == Chamber::atrial) {
      from_atrium();
    } else if (to_ == Chamber::atrial) {
      into_atrium();
    } else {
      between_his_and_ventricle();
    }
    std::stable_sort(rows_.begin(), rows_.end(),
                     [](const TrueDelay& a, const TrueDelay& b) { return earliest(a) < earliest(b); });
    return std::move(rows_);
  }

private:
  void add(std::optional<Seconds> from, std::optional<Seconds> to, DelayKind kind) {
    if (from) from = *from + from_lag_;
    if (to) to = *to + to_lag_;
    if (from && !within(*from, end_)) from.reset();
    if (to && !within(*to, end_)) to.reset();
    if (!from && !to) return;
    if (!from) kind = DelayKind::unpaired;
    if (!to) kind = DelayKind::blocked;
    rows_.push_back({from, to, kind});
  }

  /// Activation of the far end of a ventricular beat, in the chamber the pathway leads to.
  static std::optional<Seconds> time_in(const VentricularBeat& beat, Chamber chamber) {
    return chamber == Chamber::his ? beat.his : std::optional(beat.time);
  }

  void from_atrium() {
    for (const AtrialBeat& beat : beats_.atrial) {
      std::optional<Seconds> other;
      if (beat.ventricular) other = time_in(beats_.ventricular[*beat.ventricular], to_);
      const bool back = beat.origin == AtrialOrigin::retrograde;
      add(beat.time, other,
          !other ? DelayKind::blocked
          : back ? DelayKind::retrograde
                 : DelayKind::conducted);
    }
    for (const VentricularBeat& beat : beats_.ventricular) {
      const auto time = time_in(beat, to_);
      if (!beat.atrial && time) add(std::nullopt, time, DelayKind::unpaired);
    }
  }

  /// A pathway drawn from ventricle or His bundle to atrium: retrograde beats run along it.
  void into_atrium() {
    for (const VentricularBeat& beat : beats_.ventricular) {
      const auto time = time_in(beat, from_);
      if (!time) continue;
      std::optional<Seconds> other;
      if (beat.atrial) other = beats_.atrial[*beat.atrial].time;
      const bool back = beat.origin != VentricularOrigin::conducted;
      add(time, other, !other ? DelayKind::blocked : back ? DelayKind::conducted : DelayKind::retrograde);
    }
    for (const AtrialBeat& beat : beats_.atrial) {
      const bool shown = beat.ventricular && time_in(beats_.ventricular[*beat.ventricular], from_);
      if (!shown) add(std::nullopt, beat.time, DelayKind::unpaired);
    }
  }

  void between_his_and_ventricle() {
    for (const VentricularBeat& beat : beats_.ventricular) {
      const auto first = time_in(beat, from_), second = time_in(beat, to_);
      add(first, second, first && second ? DelayKind::conducted : DelayKind::unpaired);
    }
  }

  void within_chamber() {
    if (from_ == Chamber::atrial) {
      for (const AtrialBeat& beat : beats_.atrial)
        add(beat.time, beat.time, DelayKind::conducted);
      return;
    }
    for (const VentricularBeat& beat : beats_.ventricular) {
      if (const auto time = time_in(beat, from_)) add(time, time, DelayKind::conducted);
    }
  }

  const Beats& beats_;
  Chamber from_, to_;
  Seconds from_lag_, to_lag_, end_;
  std::vector<TrueDelay> rows_;
};

} // namespace

std::string name_of(DelayKind kind) {
  switch (kind) {
  case DelayKind::conducted:
    return "conducted";
  case DelayKind::blocked:
    return "blocked";
  case DelayKind::retrograde:
    return "retrograde";
  case DelayKind::unpaired:
    return "unpaired";
  }
  return "";
}

TrueActivations true_activations(const ChannelPlan& channel, const Beats& beats, Seconds end) {
  TrueActivations truth{channel.label, {}};
  const Seconds lag = lag_of(channel);
  const auto add = [&](Seconds time) {
    if (within(time + lag, end)) truth.times.push_back(time + lag);
  };
  const Chamber chamber = chamber_of(channel);
  if (chamber == Chamber::atrial) {
    for (const AtrialBeat& beat : beats.atrial)
      add(beat.time);
  }
  for (const VentricularBeat& beat : beats.ventricular) {
    if (chamber == Chamber::ventricular) add(beat.time);
    if (chamber == Chamber::his && beat.his) add(*beat.his);
  }
  return truth;
}

TruePathway true_pathway(const PathwayPlan& pathway, const Scenario& scenario, const Beats& beats) {
  const ChannelPlan& from = channel_named(scenario, pathway.from);
  const ChannelPlan& to = channel_named(scenario, pathway.to);
  PathwayRows rows(beats, chamber_of(from), chamber_of(to), lag_of(from), lag_of(to), scenario.duration);
  return {pathway.label, pathway.from, pathway.to, rows.rows()};
}

} // namespace chronodrome::simulation
