// Chronodrome, GPL-3.0-or-later.
// Delay, conducted share and velocity: what a pathway gives.
#include <algorithm>
#include <cmath>
#include <utility>

#include "base/number_text.h"
#include "numerics/robust.h"
#include "response/measurement_kinds.h"
#include "response/window.h"

namespace chronodrome::response {
namespace {

using conduction::DelayRow;
using conduction::DelayState;
using document::MeasureKind;
using recording::Span;

constexpr std::size_t kFewestInTime = 2; // blocked beats in a row that can be block by their time

class PathwayMeasurement : public Measurement {
public:
  PathwayMeasurement(const Inputs& inputs, const PathwayInput& pathway, const ChannelInput& from,
                     const ChannelInput& to, MeasureKind kind, const Settings& settings)
      : kind_(kind), settings_(settings), control_(pathway.delays->control_delay),
        from_(pathway.delays->from), to_(pathway.delays->to) {
    unit = kind == MeasureKind::delay ? "ms" : kind == MeasureKind::velocity ? "m/s" : "1";
    if (pathway.distance) distance_m_ = pathway.distance->value();
    to_unreadable_ = unreadable_of(*to.activations);
    unreadable = joined(unreadable_of(*from.activations), to_unreadable_);
    excluded = joined(exclusions_of(inputs, pathway.delays->from), exclusions_of(inputs, pathway.delays->to));
    for (const auto& row : pathway.delays->rows) {
      if (row.to_time && (row.state == DelayState::unpaired || row.state == DelayState::retrograde))
        own_.push_back(row.to_time->value());
      if (!row.from_time) continue;
      rows_.push_back(&row);
      if (row.state == DelayState::conducted && row.delay && !is_excluded(row)) {
        const bool is_size = kind == MeasureKind::velocity && *row.delay < Seconds(0.0);
        const Seconds delay = *row.delay * (is_size ? -1.0 : 1.0);
        longest_ = std::max(longest_.value_or(delay), delay);
      }
    }
    std::sort(own_.begin(), own_.end());
    std::stable_sort(rows_.begin(), rows_.end(),
                     [](const DelayRow* a, const DelayRow* b) { return *a->from_time < *b->from_time; });
    for (const auto* row : rows_)
      beats.push_back(row->from_time->value());
  }

  [[nodiscard]] Reading read(const Span& span) const override {
    const std::vector<std::size_t> attempts = attempts_in(span);
    if (attempts.empty()) return without_attempt(span);
    Reading reading;
    std::vector<double> delays_ms;
    std::vector<double> success; // 1 conducted, 0 not
    std::size_t ambiguous = 0;
    for (const std::size_t i : attempts) {
      const bool conducted = is_conducted(i);
      success.push_back(conducted ? 1.0 : 0.0);
      if (conducted) delays_ms.push_back(in_milliseconds(*rows_[i]->delay));
      if (conducted && rows_[i]->ambiguous) ++ambiguous;
    }
    const std::size_t blocked = in_complete_block(attempts, span);
    const bool is_none = delays_ms.empty();
    if (kind_ == MeasureKind::conducted) {
      read_share(reading, success);
    } else if (is_none && blocked == 0 && attempts.size() < settings_.complete_block_beats) {
      reading.absence = Reading::Absence::no_samples;
      reading.flags.push_back(of_all(0, attempts.size()) + " activations of " + from_ +
                              " conducted: too few to say complete block");
    } else if (is_none || blocked > 0) {
      censor(reading, attempts.size(), delays_ms.size());
    } else {
      read_delay(reading, delays_ms, attempts.size());
    }
    if (ambiguous > 0) {
      reading.flags.push_back(of_all(ambiguous, delays_ms.size()) +
                              " delays are ambiguous: the times alone do not say which activation of " +
                              from_ + " conducted");
    }
    return reading;
  }

private:
  static std::vector<Span> joined(std::vector<Span> a, const std::vector<Span>& b) {
    a.insert(a.end(), b.begin(), b.end());
    return merged(std::move(a));
  }

  [[nodiscard]] bool is_excluded(const DelayRow& row) const {
    return meets(excluded, *row.from_time, due(row));
  }

  /// When the answer to an activation of `from` came or should have come.
  [[nodiscard]] Seconds due(const DelayRow& row) const {
    return *row.from_time + std::max(row.delay.value_or(Seconds(0.0)), control_);
  }

  /// An activation of `from` that could conduct, with an answer that could be seen.
  [[nodiscard]] bool is_attempt(const DelayRow& row) const {
    if (row.state == DelayState::retrograde || row.answer_unseen || is_excluded(row)) return false;
    return row.state != DelayState::blocked || !meets(to_unreadable_, *row.from_time, due(row));
  }

  [[nodiscard]] bool is_conducted(std::size_t i) const {
    return rows_[i]->state == DelayState::conducted && rows_[i]->delay.has_value();
  }

  /// Attempts of the stretch, as indices of rows_.
  [[nodiscard]] std::vector<std::size_t> attempts_in(const Span& span) const {
    std::vector<std::size_t> attempts;
    const auto [first, end] = rows_in(span);
    for (std::size_t i = first; i < end; ++i) {
      if (is_attempt(*rows_[i])) attempts.push_back(i);
    }
    return attempts;
  }

  [[nodiscard]] std::pair<std::size_t, std::size_t> rows_in(const Span& span) const {
    const auto times = within(beats, span);
    const auto first = static_cast<std::size_t>(times.data() - beats.data());
    return {first, first + times.size()};
  }

  /// A stretch without an attempt: arrest only if neither chamber beats.
  [[nodiscard]] Reading without_attempt(const Span& span) const {
    bool retrograde = false;
    bool unseen = false;
    const auto [first, end] = rows_in(span);
    for (std::size_t i = first; i < end; ++i) {
      if (is_excluded(*rows_[i])) continue;
      (rows_[i]->state == DelayState::retrograde ? retrograde : unseen) = true;
    }
    bool own = retrograde;
    for (const double time : within(own_, span))
      own = own || !meets(excluded, Seconds(time), Seconds(time));
    Reading reading;
    reading.absence = own || unseen ? Reading::Absence::untested : Reading::Absence::no_beat;
    if (unseen && !retrograde) {
      reading.flags.push_back("antegrade conduction was not tested: the answer to no activation of " + from_ +
                              " could be seen");
    } else if (own) {
      reading.flags.push_back("antegrade conduction was not tested: no activation of " + from_ +
                              " that could have conducted to " + to_ + " (junctional or ventricular rhythm)");
    }
    return reading;
  }

  /// Attempts that belong to complete block.
  [[nodiscard]] std::size_t in_complete_block(const std::vector<std::size_t>& attempts,
                                              const Span& span) const {
    const Seconds cycle = running_cycle(span);
    std::size_t sum = 0;
    std::size_t i = 0;
    while (i < attempts.size()) {
      if (is_conducted(attempts[i])) {
        ++i;
        continue;
      }
      std::size_t j = i + 1;
      while (j < attempts.size() && attempts[j] == attempts[j - 1] + 1 && !is_conducted(attempts[j]))
        ++j;
      const std::size_t last = attempts[j - 1];
      // The block is known to last to its last beat, and until the next was due; a silence is no block.
      const Seconds next = last + 1 < beats.size() ? Seconds(beats[last + 1]) : span.end;
      const Seconds after = std::min({cycle, next - Seconds(beats[last]), span.end - Seconds(beats[last])});
      const Seconds lasts = Seconds(beats[last] - beats[attempts[i]]) + after;
      if (j - i >= settings_.complete_block_beats ||
          (j - i >= kFewestInTime && lasts > settings_.complete_block_time))
        sum += j - i;
      i = j;
    }
    return sum;
  }

  /// Median cycle of `from`; 0 for a single beat.
  [[nodiscard]] Seconds running_cycle(const Span& span) const {
    const auto times = within(beats, span);
    std::vector<double> cycles;
    for (std::size_t i = 1; i < times.size(); ++i)
      cycles.push_back(times[i] - times[i - 1]);
    return Seconds(cycles.empty() ? 0.0 : numerics::median(cycles));
  }

  static void read_share(Reading& reading, const std::vector<double>& success) {
    reading.n_beats = reading.n_values = success.size();
    reading.value = numerics::mean(success);
    if (success.size() > 1) reading.sem = numerics::sem_of_correlated(success);
  }

  void censor(Reading& reading, std::size_t all, std::size_t conducted) const {
    reading.absence = Reading::Absence::blocked;
    reading.n_beats = conducted;
    reading.flags.push_back("complete block: " + of_all(conducted, all) + " activations of " + from_ +
                            " conducted");
    if (!longest_ || longest_->value() <= 0.0) return;
    const bool is_delay = kind_ == MeasureKind::delay;
    reading.limit = is_delay ? in_milliseconds(*longest_) : distance_m_ / longest_->value();
    reading.limit_side = is_delay ? "at_least" : "at_most";
    reading.flags.push_back("the limit is the longest delay that this preparation conducted (" +
                            number_text(in_milliseconds(*longest_), 6) + " ms), by convention");
  }

  void read_delay(Reading& reading, const std::vector<double>& delays_ms, std::size_t all) const {
    set_median(reading, delays_ms);
    reading.n_beats = delays_ms.size();
    if (delays_ms.size() < all) {
      reading.is_selected = true;
      reading.flags.push_back("conducted beats only: " + of_all(delays_ms.size(), all) + " activations of " +
                              from_ + " conducted: a delay of conducted beats alone is biased low");
    }
    if (kind_ != MeasureKind::velocity) return;
    const double delay_s = std::abs(*reading.value) * 1e-3;
    if (delay_s == 0.0) {
      reading.value.reset();
      reading.sem.reset();
      reading.absence = Reading::Absence::no_samples;
      reading.flags.push_back("the median delay is 0: no velocity can be read from it");
      return;
    }
    if (reading.sem) reading.sem = distance_m_ / (delay_s * delay_s) * *reading.sem * 1e-3;
    reading.value = distance_m_ / delay_s;
  }

  MeasureKind kind_;
  Settings settings_;
  Seconds control_;
  std::string from_, to_;
  double distance_m_ = 0.0;
  std::vector<const DelayRow*> rows_; ///< with a `from`, by its time; as `beats`
  std::vector<double> own_;           ///< times of activations of `to` that no `from` caused
  std::vector<Span> to_unreadable_;
  std::optional<Seconds> longest_; ///< conducted delay of the recording
};

} // namespace

std::unique_ptr<Measurement> pathway_measurement(const Inputs& inputs, const PathwayInput& pathway,
                                                 const ChannelInput& from, const ChannelInput& to,
                                                 MeasureKind kind, const Settings& settings) {
  return std::make_unique<PathwayMeasurement>(inputs, pathway, from, to, kind, settings);
}

} // namespace chronodrome::response
