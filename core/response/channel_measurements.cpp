// Chronodrome, GPL-3.0-or-later.
// Rate, developed force and pressure, rate of rise, flow: what one channel gives.
#include <algorithm>
#include <cmath>

#include "numerics/robust.h"
#include "response/measurement_kinds.h"
#include "response/window.h"
#include "rhythm/intervals.h"

namespace chronodrome::response {
namespace {

using recording::Span;

std::vector<double> times_of(const activation::ChannelActivations& channel) {
  std::vector<double> times;
  times.reserve(channel.marks.size());
  for (const auto& mark : channel.marks)
    times.push_back(mark.time.value());
  return times;
}

/// What the pathways that end in a chamber say about the rate of that chamber.
struct Supply {
  std::string from;
  std::vector<const conduction::DelayRow*> attempts; ///< by time of `from`
  std::vector<double> times;                         ///< of `from`
  std::vector<double> causeless;                     ///< times of activations that no conduction caused
};

Supply supply_of(const conduction::PathwayDelays& pathway) {
  Supply supply;
  supply.from = pathway.from;
  for (const auto& row : pathway.rows) {
    const bool is_retrograde = row.state == conduction::DelayState::retrograde;
    if (row.from_time && !is_retrograde && !row.answer_unseen) supply.attempts.push_back(&row);
    if (row.to_time && (is_retrograde || row.state == conduction::DelayState::unpaired))
      supply.causeless.push_back(row.to_time->value());
  }
  std::stable_sort(supply.attempts.begin(), supply.attempts.end(),
                   [](const auto* a, const auto* b) { return *a->from_time < *b->from_time; });
  for (const auto* row : supply.attempts)
    supply.times.push_back(row->from_time->value());
  std::sort(supply.causeless.begin(), supply.causeless.end());
  return supply;
}

class RateMeasurement : public Measurement {
public:
  RateMeasurement(const Inputs& inputs, const ChannelInput& channel) : label_(channel.activations->channel) {
    unit = "bpm";
    beats = times_of(*channel.activations);
    unreadable = unreadable_of(*channel.activations);
    excluded = exclusions_of(inputs, label_);
    losses_ = unreadable;
    losses_.insert(losses_.end(), excluded.begin(), excluded.end());
    beats_are_counted = true;
    intervals_ = rhythm::intervals_of(*channel.activations, excluded, {});
    for (const auto& pathway : inputs.pathways) {
      if (pathway.delays->to == label_ && !pathway.delays->within_chamber)
        supplies_.push_back(supply_of(*pathway.delays));
    }
  }

  [[nodiscard]] Reading read(const Span& span) const override {
    Reading reading;
    for (const double beat : within(beats, span)) {
      if (!meets(excluded, Seconds(beat), Seconds(beat))) ++reading.n_beats;
    }
    const std::vector<double> lengths = whole_intervals(span);
    if (reading.n_beats == 0) {
      reading.absence = Reading::Absence::no_beat;
      limit_by_silence(reading, span);
    } else if (lengths.empty()) {
      reading.absence = Reading::Absence::one_beat;
      if (reading.n_beats == 1) limit_by_silence(reading, span);
    } else {
      const double cycle = numerics::mean(lengths);
      reading.n_values = lengths.size();
      reading.value = 60.0 / cycle;
      if (lengths.size() > 1) reading.sem = 60.0 / (cycle * cycle) * numerics::sem_of_correlated(lengths);
    }
    for (const auto& supply : supplies_)
      tell_of_supply(supply, span, reading);
    return reading;
  }

private:
  /// Lengths of the intervals that lie in the stretch and cross nothing lost, in order.
  [[nodiscard]] std::vector<double> whole_intervals(const Span& span) const {
    std::vector<double> lengths;
    const auto first =
        std::lower_bound(intervals_.begin(), intervals_.end(), span.start,
                         [](const rhythm::Interval& interval, Seconds time) { return interval.time < time; });
    for (auto it = first; it != intervals_.end() && it->time < span.end; ++it) {
      const bool lost = it->flag == rhythm::IntervalFlag::gap || it->flag == rhythm::IntervalFlag::excluded;
      // The beat before, as its mark has it: time - length may differ in the last bit.
      if (!lost && beats[it->index - 1] >= span.start.value()) lengths.push_back(it->length.value());
    }
    return lengths;
  }

  /// No beat, or a single one: a silence is shorter than the interval that it is part of. What is lost ends
  /// it, for a beat may lie there.
  void limit_by_silence(Reading& reading, const Span& span) const {
    std::vector<Span> ends = losses_;
    for (const double beat : within(beats, span))
      ends.push_back({Seconds(beat), Seconds(beat)});
    ends.push_back({span.end, span.end});
    std::sort(ends.begin(), ends.end(), [](const Span& a, const Span& b) { return a.start < b.start; });
    Seconds longest;
    Seconds from = span.start;
    for (const Span& end : ends) {
      longest = std::max(longest, std::min(end.start, span.end) - from);
      from = std::max(from, end.end);
    }
    if (longest.value() <= 0.0) return;
    reading.limit = 60.0 / longest.value();
    reading.limit_side = "at_most";
  }

  void tell_of_supply(const Supply& supply, const Span& span, Reading& reading) const {
    const auto attempts = within(supply.times, span);
    const auto first = static_cast<std::size_t>(attempts.data() - supply.times.data());
    std::size_t conducted = 0;
    for (std::size_t i = first; i < first + attempts.size(); ++i)
      if (supply.attempts[i]->state == conduction::DelayState::conducted) ++conducted;
    if (conducted < attempts.size()) {
      reading.flags.push_back(of_all(conducted, attempts.size()) + " activations of " + supply.from +
                              " conducted to " + label_ + ": its rate is not the rate of " + supply.from);
      reading.is_selected = true;
    }
    const std::size_t own = within(supply.causeless, span).size();
    if (own > 0) {
      reading.flags.push_back(of_all(own, reading.n_beats) + " activations of " + label_ +
                              " were not conducted from " + supply.from + " (escape or premature)");
      reading.is_selected = true;
    }
  }

  std::string label_;
  std::vector<rhythm::Interval> intervals_;
  std::vector<Span> losses_; ///< unreadable and excluded
  std::vector<Supply> supplies_;
};

class BeatMeasurement : public Measurement {
public:
  BeatMeasurement(const Inputs& inputs, const ChannelInput& channel, document::MeasureKind kind) {
    const bool rise = kind == document::MeasureKind::dpdt_max;
    const bool is_force = kind == document::MeasureKind::force;
    unit = channel.unit.empty() ? (is_force ? "mN" : "mmHg") : channel.unit;
    if (rise) unit += "/s";
    for (const auto& beat : channel.activations->beats) {
      beats.push_back(beat.time.value());
      values_.push_back(rise ? beat.rate_of_rise : beat.developed);
    }
    unreadable = unreadable_of(*channel.activations);
    excluded = exclusions_of(inputs, channel.activations->channel);
  }

  [[nodiscard]] Reading read(const Span& span) const override {
    Reading reading;
    const auto times = within(beats, span);
    const auto first = static_cast<std::size_t>(times.data() - beats.data());
    std::vector<double> taken;
    for (std::size_t i = 0; i < times.size(); ++i) {
      if (!meets(excluded, Seconds(times[i]), Seconds(times[i]))) taken.push_back(values_[first + i]);
    }
    reading.n_beats = taken.size();
    if (taken.empty()) reading.absence = Reading::Absence::no_beat;
    set_median(reading, taken);
    return reading;
  }

private:
  std::vector<double> values_;
};

class FlowMeasurement : public Measurement {
public:
  FlowMeasurement(const Inputs& inputs, const FlowSeries& flow) : values_(flow.values) {
    unit = flow.unit.empty() ? "mL/min" : flow.unit;
    for (const Seconds time : flow.times)
      times_.push_back(time.value());
    excluded = exclusions_of(inputs, flow.channel);
    for (const auto& channel : inputs.channels) {
      if (channel.activations->channel == flow.channel) unreadable = unreadable_of(*channel.activations);
    }
  }

  [[nodiscard]] Reading read(const Span& span) const override {
    Reading reading;
    const auto times = within(times_, span);
    const auto first = static_cast<std::size_t>(times.data() - times_.data());
    std::vector<double> taken;
    for (std::size_t i = 0; i < times.size(); ++i) {
      const Seconds time(times[i]);
      if (!meets(excluded, time, time) && !meets(unreadable, time, time)) taken.push_back(values_[first + i]);
    }
    reading.n_values = taken.size();
    if (taken.empty()) {
      reading.absence = Reading::Absence::no_samples;
      return reading;
    }
    reading.value = numerics::mean(taken);
    if (taken.size() > 1) reading.sem = numerics::sem_of_correlated(taken);
    return reading;
  }

private:
  std::vector<double> times_, values_;
};

} // namespace

std::unique_ptr<Measurement> rate_measurement(const Inputs& inputs, const ChannelInput& channel) {
  return std::make_unique<RateMeasurement>(inputs, channel);
}

std::unique_ptr<Measurement> beat_measurement(const Inputs& inputs, const ChannelInput& channel,
                                              document::MeasureKind kind) {
  return std::make_unique<BeatMeasurement>(inputs, channel, kind);
}

std::unique_ptr<Measurement> flow_measurement(const Inputs& inputs, const FlowSeries& flow) {
  return std::make_unique<FlowMeasurement>(inputs, flow);
}

} // namespace chronodrome::response
