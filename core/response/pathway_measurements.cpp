// Chronodrome, GPL-3.0-or-later.
// Delay, conducted share and velocity: what a pathway gives.
#include <algorithm>

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

class PathwayMeasurement : public Measurement {
public:
  PathwayMeasurement(const Inputs& inputs, const PathwayInput& pathway, const ChannelInput& from,
                     const ChannelInput& to, MeasureKind kind, const Settings& settings)
      : kind_(kind), settings_(settings), control_(pathway.delays->control_delay),
        from_(pathway.delays->from) {
    unit = kind == MeasureKind::delay ? "ms" : kind == MeasureKind::velocity ? "m/s" : "1";
    if (pathway.distance) distance_m_ = pathway.distance->value();
    to_unreadable_ = unreadable_of(*to.activations);
    unreadable = joined(unreadable_of(*from.activations), to_unreadable_);
    excluded = joined(exclusions_of(inputs, pathway.delays->from), exclusions_of(inputs, pathway.delays->to));
    for (const auto& row : pathway.delays->rows) {
      if (!row.from_time) continue;
      attempts_.push_back(&row);
      if (row.state == DelayState::conducted && row.delay && is_usable(row))
        longest_ = std::max(longest_.value_or(*row.delay), *row.delay);
    }
    std::stable_sort(attempts_.begin(), attempts_.end(),
                     [](const DelayRow* a, const DelayRow* b) { return *a->from_time < *b->from_time; });
    for (const auto* row : attempts_)
      beats.push_back(row->from_time->value());
  }

  [[nodiscard]] Reading read(const Span& span) const override {
    const std::vector<const DelayRow*> rows = usable_rows(span);
    Reading reading;
    if (rows.empty()) {
      reading.absence = Reading::Absence::no_beat;
      return reading;
    }
    std::vector<double> delays_ms;
    std::vector<double> success; // 1 conducted, 0 not
    std::size_t ambiguous = 0;
    for (const auto* row : rows) {
      const bool conducted = row->state == DelayState::conducted && row->delay.has_value();
      success.push_back(conducted ? 1.0 : 0.0);
      if (conducted) delays_ms.push_back(in_milliseconds(*row->delay));
      if (conducted && row->ambiguous) ++ambiguous;
    }
    if (kind_ == MeasureKind::conducted) {
      read_share(reading, success);
    } else if (delays_ms.empty() || blocked_beats(rows, span.end) * 2 > rows.size()) {
      censor(reading, rows.size(), delays_ms.size());
    } else {
      read_delay(reading, delays_ms, rows.size());
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

  /// False for a beat that is excluded, and for one whose answer could not have been seen.
  [[nodiscard]] bool is_usable(const DelayRow& row) const {
    const Seconds until = *row.from_time + std::max(row.delay.value_or(Seconds(0.0)), control_);
    if (meets(excluded, *row.from_time, until)) return false;
    return row.state != DelayState::blocked || !meets(to_unreadable_, *row.from_time, until);
  }

  [[nodiscard]] std::vector<const DelayRow*> usable_rows(const Span& span) const {
    const auto times = within(beats, span);
    const auto first = static_cast<std::size_t>(times.data() - beats.data());
    std::vector<const DelayRow*> rows;
    for (std::size_t i = first; i < first + times.size(); ++i) {
      if (is_usable(*attempts_[i])) rows.push_back(attempts_[i]);
    }
    return rows;
  }

  /// Beats that belong to complete block.
  [[nodiscard]] std::size_t blocked_beats(const std::vector<const DelayRow*>& rows, Seconds end) const {
    std::size_t sum = 0;
    std::size_t i = 0;
    while (i < rows.size()) {
      std::size_t j = i;
      while (j < rows.size() && rows[j]->state != DelayState::conducted)
        ++j;
      const Seconds after = j < rows.size() ? *rows[j]->from_time : end;
      const bool complete = j > i && (j - i >= settings_.complete_block_beats ||
                                      after - *rows[i]->from_time > settings_.complete_block_time);
      if (complete) sum += j - i;
      i = std::max(j, i + 1);
    }
    return sum;
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
      reading.flags.push_back(of_all(delays_ms.size(), all) + " activations of " + from_ +
                              " conducted: a delay of conducted beats alone is biased low");
    }
    if (kind_ != MeasureKind::velocity) return;
    const double delay_s = *reading.value * 1e-3;
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
  std::string from_;
  double distance_m_ = 0.0;
  std::vector<const DelayRow*> attempts_; ///< rows with a `from`, by its time; as `beats`
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
