// Chronodrome, GPL-3.0-or-later.
#include "conduction/pairing.h"

#include <algorithm>
#include <cmath>

#include "conditioning/species.h"
#include "conduction/assignment.h"
#include "conduction/dissociation.h"
#include "conduction/retrograde.h"
#include "numerics/robust.h"

namespace chronodrome::conduction {
namespace {

constexpr std::size_t kAmbiguousReach = 5; // rows to either side of a delay that exceeds the cycle

std::vector<double> times_of(const activation::ChannelActivations& channel) {
  std::vector<double> times;
  for (const auto& mark : channel.marks)
    times.push_back(mark.time.value());
  return times;
}

class Pairing {
public:
  Pairing(const Electrode& from, const Electrode& to, const ConductionSettings& settings)
      : from_(times_of(*from.activations)), to_(times_of(*to.activations)),
        unreadable_(unreadable_of({from.activations, to.activations})),
        to_unreadable_(unreadable_of({to.activations})), to_end_(to.end), settings_(settings) {}

  void within_chamber(PathwayDelays& result, Seconds reach) {
    // Both must choose each other: nearest neighbours in both directions.
    const auto nearest = [](const std::vector<double>& times, double t) -> std::optional<std::size_t> {
      if (times.empty()) return std::nullopt;
      const auto after = std::lower_bound(times.begin(), times.end(), t);
      auto best = after;
      if (after == times.end() || (after != times.begin() && t - *(after - 1) <= *after - t))
        best = after - 1;
      return static_cast<std::size_t>(best - times.begin());
    };
    partner_.assign(from_.size(), std::nullopt);
    for (std::size_t i = 0; i < from_.size(); ++i) {
      const auto j = nearest(to_, from_[i]);
      if (!j || std::abs(to_[*j] - from_[i]) > reach.value() || meets_any(unreadable_, from_[i], to_[*j]))
        continue;
      if (nearest(from_, to_[*j]) == i) partner_[i] = j;
    }
    std::vector<double> delays;
    for (std::size_t i = 0; i < from_.size(); ++i) {
      if (partner_[i]) delays.push_back(to_[*partner_[i]] - from_[i]);
    }
    result.control_delay = Seconds(delays.empty() ? 0.0 : numerics::median(delays));
    write_rows(result);
  }

  void across_chambers(PathwayDelays& result, const DelayWindow& window, const DelayWindow& back,
                       const ControlDelay& control) {
    result.control_delay = control.delay;
    const double usual = control.delay.value();
    const double usual_back = usual_retrograde_delay(from_, to_, usual, back);
    const auto cost = [&](std::size_t i, std::size_t j) -> std::optional<double> {
      const double d = to_[j] - from_[i];
      double total = 0.0;
      if (d >= window.shortest.value() && d <= window.longest.value()) {
        total = d >= usual ? (d - usual) / usual : (usual - d) / (settings_.shortening_share * usual);
      } else if (-d >= back.shortest.value() && -d <= back.longest.value()) {
        total =
            settings_.retrograde_cost + std::abs(-d - usual_back) / (settings_.shortening_share * usual_back);
      } else {
        return std::nullopt;
      }
      if (meets_any(unreadable_, from_[i], to_[j])) return std::nullopt;
      return std::min(settings_.longest_link_cost, total);
    };
    partner_ =
        assign(from_, to_, back.longest.value(), window.longest.value(), settings_.unpaired_cost, cost);
    undo_unlikely_retrograde(from_, to_, partner_);
    undo_dissociated(result);
    write_rows(result);
    mark_unseen(result, window);
    mark_ambiguous(result, window, control);
  }

private:
  void undo_dissociated(PathwayDelays& result) {
    const std::vector<char> lost = dissociated_beats(from_, to_, unreadable_, settings_);
    for (std::size_t j = 0; j < to_.size(); ++j) {
      if (lost[j] == 0) continue;
      const bool goes_on = j > 0 && lost[j - 1] != 0 && !meets_any(unreadable_, to_[j - 1], to_[j]);
      if (goes_on) {
        result.dissociated.back().end = Seconds(to_[j]);
      } else {
        result.dissociated.push_back({Seconds(to_[j]), Seconds(to_[j])});
      }
    }
    for (auto& link : partner_) {
      if (link && lost[*link] != 0) link.reset();
    }
  }

  void write_rows(PathwayDelays& result) const {
    std::vector<char> linked(to_.size(), 0);
    for (std::size_t i = 0; i < from_.size(); ++i) {
      DelayRow row;
      row.from = i;
      row.from_time = Seconds(from_[i]);
      row.state = DelayState::blocked;
      if (partner_[i]) {
        row.to = partner_[i];
        row.to_time = Seconds(to_[*row.to]);
        row.delay = *row.to_time - *row.from_time;
        const bool back = !result.within_chamber && *row.delay < Seconds(0.0);
        row.state = back ? DelayState::retrograde : DelayState::conducted;
        linked[*row.to] = 1;
      }
      result.rows.push_back(row);
    }
    for (std::size_t j = 0; j < to_.size(); ++j) {
      if (linked[j] != 0) continue;
      DelayRow row;
      row.to = j;
      row.to_time = Seconds(to_[j]);
      row.state = DelayState::unpaired;
      result.rows.push_back(row);
    }
    const auto earliest = [](const DelayRow& row) {
      if (!row.from_time) return row.to_time->value();
      return row.to_time ? std::min(row.from_time->value(), row.to_time->value()) : row.from_time->value();
    };
    std::stable_sort(result.rows.begin(), result.rows.end(),
                     [&](const DelayRow& a, const DelayRow& b) { return earliest(a) < earliest(b); });
  }

  void mark_unseen(PathwayDelays& result, const DelayWindow& window) const {
    for (DelayRow& row : result.rows) {
      if (row.state != DelayState::blocked) continue;
      const Seconds until = *row.from_time + window.longest;
      row.answer_unseen =
          (to_end_ && until > *to_end_) || meets_any(to_unreadable_, row.from_time->value(), until.value());
    }
  }

  /// Median cycle of `from` about its i-th activation.
  [[nodiscard]] double cycle_about(std::size_t i) const {
    std::vector<double> cycles;
    const std::size_t first = i > kAmbiguousReach ? i - kAmbiguousReach : 0;
    for (std::size_t k = first; k + 1 < from_.size() && k < i + kAmbiguousReach; ++k)
      cycles.push_back(from_[k + 1] - from_[k]);
    return cycles.empty() ? 0.0 : numerics::median(cycles);
  }

  void mark_ambiguous(PathwayDelays& result, const DelayWindow& window, const ControlDelay& control) const {
    std::vector<DelayRow*> atrial;
    for (DelayRow& row : result.rows) {
      if (row.from) atrial.push_back(&row);
    }
    std::sort(atrial.begin(), atrial.end(),
              [](const DelayRow* a, const DelayRow* b) { return *a->from < *b->from; });
    const auto conducted = [&](std::size_t i) {
      return i < atrial.size() && atrial[i]->state == DelayState::conducted;
    };
    for (std::size_t i = 0; i < atrial.size(); ++i) {
      if (!conducted(i)) continue;
      const double cycle = cycle_about(i);
      const double delay = atrial[i]->delay->value();
      if (cycle <= 0.0) continue;
      const bool two_to_one = i > 0 && i + 1 < atrial.size() && !conducted(i - 1) && !conducted(i + 1);
      if (!control.from_stretches && two_to_one && delay + cycle <= window.longest.value())
        atrial[i]->ambiguous = true;
      if (delay <= settings_.ambiguous_share * cycle) continue;
      const std::size_t last = std::min(atrial.size(), i + kAmbiguousReach + 1);
      for (std::size_t k = i > kAmbiguousReach ? i - kAmbiguousReach : 0; k < last; ++k)
        atrial[k]->ambiguous = atrial[k]->ambiguous || conducted(k);
    }
  }

  std::vector<double> from_, to_;
  std::vector<recording::Span> unreadable_;    ///< of either
  std::vector<recording::Span> to_unreadable_; ///< of `to` alone
  std::optional<Seconds> to_end_;
  const ConductionSettings& settings_;
  std::vector<std::optional<std::size_t>> partner_;
};

} // namespace

std::string name_of(DelayState state) {
  switch (state) {
  case DelayState::conducted:
    return "conducted";
  case DelayState::blocked:
    return "blocked";
  case DelayState::retrograde:
    return "retrograde";
  case DelayState::unpaired:
    return "unpaired";
  }
  return "unpaired";
}

Result<PathwayDelays> pair(const std::string& pathway, const Electrode& from, const Electrode& to,
                           const ConductionSettings& settings) {
  if (auto error = settings.check()) return *error;
  if (from.activations == nullptr || to.activations == nullptr) {
    return Error{ErrorCode::bad_usage,
                 "",
                 {},
                 "pathway " + pathway + " lacks one of its two channels",
                 "name two channels with activations"};
  }
  PathwayDelays result;
  result.pathway = pathway;
  result.from = from.activations->channel;
  result.to = to.activations->channel;
  result.within_chamber = within_one_chamber(from.role, to.role);
  Pairing pairing(from, to, settings);
  if (result.within_chamber) {
    const bool is_mouse = conditioning::traits_of(settings.species).name == "mouse";
    pairing.within_chamber(result, settings.within_chamber.value_or(milliseconds(is_mouse ? 40.0 : 60.0)));
    return result;
  }
  const DelayWindow window =
      settings.antegrade.value_or(antegrade_window(settings.species, from.role, to.role));
  const double scale = window.longest / milliseconds(350.0);
  const DelayWindow back =
      settings.retrograde.value_or(DelayWindow{milliseconds(15.0 * scale), milliseconds(250.0 * scale)});
  ControlDelay control =
      control_delay_of(*from.activations, *to.activations, window, settings.control_period);
  if (settings.control_delay) control = {*settings.control_delay, true};
  pairing.across_chambers(result, window, back, control);
  return result;
}

} // namespace chronodrome::conduction
