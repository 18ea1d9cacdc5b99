// Chronodrome, GPL-3.0-or-later.
#include <algorithm>
#include <cmath>
#include <tuple>

#include "base/number_text.h"
#include "numerics/robust.h"
#include "simulation/truth.h"

namespace chronodrome::simulation {
namespace {

// Thresholds of the rhythm table.
constexpr double kFirstDegreeRatio = 1.5;
constexpr double kReferencePeriod = 60.0;
constexpr double kPauseRatio = 1.7;
constexpr double kArrestSeconds = 5.0;
constexpr double kArrestCycles = 6.0;
constexpr std::size_t kCompleteBeats = 5;
constexpr double kCompleteSeconds = 2.0;
constexpr std::size_t kRunningBeats = 8;
constexpr std::size_t kLongestGroup = 15;
constexpr double kEqualDelays = 1e-3;
constexpr double kPacedSeconds = 1.0;

/// An atrial beat that could conduct, and how long it took (nothing: it did not).
struct Impulse {
  double time;
  std::optional<double> delay;
};

std::vector<Impulse> impulses_of(const Beats& beats) {
  std::vector<Impulse> impulses;
  for (const AtrialBeat& beat : beats.atrial) {
    if (beat.origin == AtrialOrigin::retrograde) continue;
    std::optional<double> delay;
    if (beat.ventricular) delay = (beats.ventricular[*beat.ventricular].time - beat.time).value();
    impulses.push_back({beat.time.value(), delay});
  }
  return impulses;
}

class Reader {
public:
  Reader(const Scenario& scenario, const Beats& beats)
      : beats_(beats), impulses_(impulses_of(beats)), end_(scenario.duration.value()) {
    for (const ChannelPlan& channel : scenario.channels) {
      if (!recording::is_electrogram(channel.role)) continue;
      (chamber_of(channel) == Chamber::atrial ? sees_atrium_ : sees_ventricle_) = true;
    }
  }

  std::vector<TrueEpisode> read() {
    add_paced();
    if (sees_ventricle_) add_ventricular_beats();
    if (sees_atrium_) add_atrial_beats();
    add_silence(sees_atrium_ ? times_of(beats_.atrial) : times_of(beats_.ventricular), sees_atrium_);
    if (sees_atrium_ && sees_ventricle_) {
      add_prolonged();
      add_block();
    }
    add_regular();
    return std::move(found_);
  }

private:
  template <class Beat>
  static std::vector<double> times_of(const std::vector<Beat>& beats) {
    std::vector<double> times;
    for (const Beat& beat : beats)
      times.push_back(beat.time.value());
    return times;
  }

  void add(double start, double end, const char* kind, std::string detail = "") {
    found_.push_back({Seconds(start), Seconds(end), kind, std::move(detail)});
  }

  void add_paced() {
    for (std::size_t i = 0; i < beats_.stimuli.size(); ++i) {
      const double start = beats_.stimuli[i].time.value();
      const double next = i + 1 < beats_.stimuli.size() ? beats_.stimuli[i + 1].time.value() : end_;
      add(start, std::min(next, start + kPacedSeconds), "paced",
          "chamber=" + name_of(beats_.stimuli[i].chamber));
    }
  }

  void add_ventricular_beats() {
    for (std::size_t i = 0; i < beats_.ventricular.size(); ++i) {
      const VentricularBeat& beat = beats_.ventricular[i];
      const double start = beat.time.value();
      const double next = i + 1 < beats_.ventricular.size() ? beats_.ventricular[i + 1].time.value() : end_;
      if (beat.origin == VentricularOrigin::junctional_escape) add(start, next, "junctional_escape");
      if (beat.origin == VentricularOrigin::ventricular_escape) add(start, next, "ventricular_escape");
      if (beat.origin == VentricularOrigin::premature) add(start, next, "premature_ventricular");
      if (beat.origin != VentricularOrigin::conducted && beat.atrial && sees_atrium_)
        add(start, beats_.atrial[*beat.atrial].time.value(), "retrograde");
    }
  }

  void add_atrial_beats() {
    for (std::size_t i = 0; i < beats_.atrial.size(); ++i) {
      if (beats_.atrial[i].origin != AtrialOrigin::premature) continue;
      const double next = i + 1 < beats_.atrial.size() ? beats_.atrial[i + 1].time.value() : end_;
      add(beats_.atrial[i].time.value(), next, "premature_atrial");
    }
  }

  void add_silence(std::vector<double> times, bool atrial) {
    if (times.empty()) {
      if (end_ > kArrestSeconds) add(0.0, end_, "arrest", "beats=0");
      return;
    }
    times.push_back(end_);
    std::vector<double> cycles; // long ones too: a heart that has become slow is slow, not pausing
    for (std::size_t i = 1; i < times.size(); ++i) {
      const double interval = times[i] - times[i - 1];
      const bool is_last = i + 1 == times.size();
      if (cycles.size() >= 3) {
        const std::size_t count = std::min(kRunningBeats, cycles.size());
        const double cycle = numerics::median(std::span(cycles).last(count));
        const std::string numbers =
            "interval_s=" + number_text(interval, 6) + ";running_cycle_s=" + number_text(cycle, 6);
        if (interval > std::max(kArrestSeconds, kArrestCycles * cycle)) {
          add(times[i - 1], times[i], "arrest", numbers);
        } else if (atrial && !is_last && interval > kPauseRatio * cycle) {
          add(times[i - 1], times[i], "sinus_pause", numbers);
        }
      }
      cycles.push_back(interval);
    }
  }

  void add_prolonged() {
    std::vector<double> usual;
    for (const Impulse& impulse : impulses_) {
      if (impulse.delay && impulse.time <= kReferencePeriod) usual.push_back(*impulse.delay);
    }
    if (usual.size() < 3) return;
    const double limit = kFirstDegreeRatio * numerics::median(usual);
    for (std::size_t i = 0; i < impulses_.size();) {
      std::size_t j = i;
      while (j < impulses_.size() && impulses_[j].delay && *impulses_[j].delay > limit)
        ++j;
      if (j - i >= 3)
        add(impulses_[i].time, impulses_[j - 1].time + *impulses_[j - 1].delay, "first_degree_av_block",
            "beats=" + std::to_string(j - i) + ";limit_s=" + number_text(limit, 6));
      i = std::max(j, i + 1);
    }
  }

  /// Conducted impulses first ... first + conducted - 1, then blocked ones.
  struct Group {
    std::size_t first = 0, conducted = 0, blocked = 0;
    [[nodiscard]] std::size_t after() const { return first + conducted + blocked; }
  };

  /// Of a long 1:1 run before a block only the beats over which the delay rose belong to its group.
  void trim(Group& group) const {
    if (group.conducted < kLongestGroup) return;
    std::size_t kept = 2;
    while (kept + 1 < kLongestGroup) {
      const std::size_t at = group.first + group.conducted - kept;
      if (*impulses_[at].delay <= *impulses_[at - 1].delay) break;
      ++kept;
    }
    group.first += group.conducted - kept;
    group.conducted = kept;
  }

  [[nodiscard]] double end_of(const Group& group) const {
    return group.after() < impulses_.size() ? impulses_[group.after()].time : end_;
  }

  [[nodiscard]] const char* kind_of(const Group& group) const {
    const double silent = end_of(group) - impulses_[group.first + group.conducted].time;
    if (group.blocked >= kCompleteBeats || silent > kCompleteSeconds) return "complete_av_block";
    if (group.blocked >= 2) return "high_degree_av_block";
    if (group.conducted == 0) return "undetermined";
    if (group.conducted == 1) return "two_to_one";
    if (group.after() >= impulses_.size() || !impulses_[group.after()].delay) return "undetermined";
    const double last = *impulses_[group.first + group.conducted - 1].delay;
    const double next = *impulses_[group.after()].delay;
    return last - next > kEqualDelays ? "wenckebach" : "second_degree_fixed";
  }

  void add_block() {
    std::size_t at = 0, groups = 0, reached = 0;
    while (at < impulses_.size()) {
      Group group{at, 0, 0};
      while (at < impulses_.size() && impulses_[at].delay)
        ++at, ++group.conducted;
      while (at < impulses_.size() && !impulses_[at].delay)
        ++at, ++group.blocked;
      if (group.blocked == 0) break;
      trim(group);
      const std::string kind = kind_of(group);
      const bool goes_on = groups > 0 && group.first == reached && found_.back().kind == kind;
      if (goes_on) {
        found_.back().end = Seconds(end_of(group));
        ++groups;
      } else {
        name_lone_pair(groups);
        groups = 1;
        // Complete block starts with the first impulse that did not conduct.
        const std::size_t first = kind == "complete_av_block" ? group.first + group.conducted : group.first;
        add(impulses_[first].time, end_of(group), kind.c_str());
      }
      found_.back().detail = "groups=" + std::to_string(groups);
      reached = group.after();
    }
    name_lone_pair(groups);
  }

  /// One dropped beat after one conducted one is no 2:1 rhythm.
  void name_lone_pair(std::size_t groups) {
    if (groups == 1 && found_.back().kind == "two_to_one") found_.back().kind = "undetermined";
  }

  void add_regular() {
    const auto by_time = [](const TrueEpisode& a, const TrueEpisode& b) {
      return std::tuple(a.start.value(), a.end.value(), a.kind) <
             std::tuple(b.start.value(), b.end.value(), b.kind);
    };
    std::sort(found_.begin(), found_.end(), by_time);
    const std::vector<TrueEpisode> others = found_;
    double reached = 0.0;
    for (const TrueEpisode& episode : others) {
      if (episode.start.value() > reached) add(reached, episode.start.value(), "regular");
      reached = std::max(reached, episode.end.value());
    }
    if (reached < end_) add(reached, end_, "regular");
    std::sort(found_.begin(), found_.end(), by_time);
  }

  const Beats& beats_;
  std::vector<Impulse> impulses_;
  double end_;
  bool sees_atrium_ = false, sees_ventricle_ = false;
  std::vector<TrueEpisode> found_;
};

} // namespace

std::vector<TrueEpisode> true_rhythm(const Scenario& scenario, const Beats& beats) {
  return Reader(scenario, beats).read();
}

} // namespace chronodrome::simulation
