// Chronodrome, GPL-3.0-or-later.
#include "simulation/heart.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <limits>

#include "simulation/random.h"

namespace chronodrome::simulation {
namespace {

constexpr double kNever = std::numeric_limits<double>::infinity();
constexpr double kLongAgo = -1e9;

double on_nanoseconds(double time) {
  return std::round(time * 1e9) / 1e9;
}

/// The excess by which a driven focus hesitates.
class Suppression {
public:
  explicit Suppression(const Overdrive& overdrive) : overdrive_(overdrive) {}
  void drive() { driven_ += 1.0; }
  /// Factor on the next spontaneous cycle.
  [[nodiscard]] double factor() const {
    return 1.0 + overdrive_.strength * (1.0 - std::exp(-driven_ / overdrive_.beats)) * std::exp(-0.2 * free_);
  }
  void fire() { free_ += 1.0; }
  void rest() { driven_ = free_ = 0.0; }
  [[nodiscard]] bool fired() const { return free_ > 0.0; }

private:
  Overdrive overdrive_;
  double driven_ = 0.0, free_ = 0.0;
};

struct StimulusPlan {
  double time, latency;
  Chamber chamber;
};

std::vector<StimulusPlan> stimuli_of(const Scenario& scenario) {
  std::vector<StimulusPlan> plans;
  for (const PacingTrain& train : scenario.pacing) {
    double time = train.start.value();
    for (int i = 0; i < train.beats; ++i)
      plans.push_back({time + i * train.cycle.value(), train.latency.value(), train.chamber});
    if (train.premature && train.beats > 0)
      plans.push_back({time + (train.beats - 1) * train.cycle.value() + train.premature->value(),
                       train.latency.value(), train.chamber});
  }
  std::stable_sort(plans.begin(), plans.end(),
                   [](const StimulusPlan& a, const StimulusPlan& b) { return a.time < b.time; });
  return plans;
}

class Heart {
public:
  Heart(const Scenario& scenario, const HeartState& state)
      : scenario_(scenario), state_(state), random_(scenario.seed, "beats"), stimuli_(stimuli_of(scenario)),
        premature_(scenario.premature), sinus_suppression_(scenario.sinus.overdrive),
        escape_suppression_(scenario.escape.overdrive) {
    std::stable_sort(premature_.begin(), premature_.end(),
                     [](const PrematureBeat& a, const PrematureBeat& b) { return a.time < b.time; });
  }

  Beats run(double end) {
    end_ = end;
    const double first = random_.uniform();
    next_sinus_ = after_silence(0.0);
    if (next_sinus_ < kNever) next_sinus_ += first * 60.0 / state_.rate(Seconds(next_sinus_)).value();
    next_sinus_ = after_pauses(next_sinus_);
    arm_escape(0.0);
    while (step()) {
    }
    return std::move(beats_);
  }

private:
  struct Transit {
    double arrival;
    std::size_t cause;
  };

  /// Lets the earliest thing happen; false when nothing is left before the end.
  bool step() {
    const bool paced_next = next_stimulus_ < stimuli_.size();
    const bool early_next = next_premature_ < premature_.size();
    const std::array<double, 8> due = {
        transit_ ? transit_->arrival : kNever,
        retrograde_ ? retrograde_->arrival : kNever,
        pending_capture_,
        paced_next ? stimuli_[next_stimulus_].time : kNever,
        early_next ? premature_[next_premature_].time.value() : kNever,
        next_sinus_,
        transit_ ? kNever : junctional_due_,
        ventricular_due_,
    };
    const auto earliest = static_cast<std::size_t>(std::min_element(due.begin(), due.end()) - due.begin());
    const double now = due[earliest];
    if (!(now < end_)) return false;
    switch (earliest) {
    case 0:
      leave_node(now);
      break;
    case 1:
      arrive_retrograde(now);
      break;
    case 2:
      capture(now);
      break;
    case 3:
      stimulate(now);
      break;
    case 4:
      fire_early(now);
      break;
    case 5:
      fire_sinus(now);
      break;
    case 6:
      escape(now, VentricularOrigin::junctional_escape);
      break;
    default:
      escape(now, VentricularOrigin::ventricular_escape);
      break;
    }
    return true;
  }

  /// The first time from `time` on at which the sinus node is fast enough to fire at all.
  double after_silence(double time) {
    while (state_.rate(Seconds(time)) < scenario_.sinus.slowest) {
      time += 0.5;
      if (time > end_) return kNever;
    }
    return time;
  }

  double after_pauses(double time) const {
    for (const auto& pause : scenario_.sinus.pauses) {
      if (time >= pause.time.value() && time < (pause.time + pause.length).value())
        time = (pause.time + pause.length).value();
    }
    return time;
  }

  void schedule_sinus(double now) {
    const double awake = after_silence(now);
    if (awake == kNever) {
      next_sinus_ = kNever;
      return;
    }
    double cycle = 60.0 / state_.rate(Seconds(awake)).value() * sinus_suppression_.factor();
    if (scenario_.sinus.jitter_sd > Seconds(0.0))
      cycle += scenario_.sinus.jitter_sd.value() * random_.normal();
    next_sinus_ = after_pauses(awake + std::max(cycle, 1e-3));
  }

  bool activate_atrium(double now, AtrialOrigin origin, std::optional<std::size_t> ventricular) {
    now = on_nanoseconds(now);
    if (now - last_atrial_ < scenario_.atrial_refractory.value()) return false;
    last_atrial_ = now;
    beats_.atrial.push_back({Seconds(now), origin, ventricular});
    if (origin == AtrialOrigin::retrograde) return true;
    if (retrograde_) {
      retrograde_.reset(); // the two impulses meet in the node
      return true;
    }
    enter_node(now);
    return true;
  }

  void enter_node(double now) {
    if (transit_) return; // still excited by the one before: blocked
    AvNode node = state_.node(Seconds(now));
    const double recovery = now - node_exit_;
    node.delay_min += Seconds(tire(now, recovery));
    const auto delay = node.delay(Seconds(recovery));
    if (delay) transit_ = Transit{on_nanoseconds(now + delay->value()), beats_.atrial.size() - 1};
  }

  /// Fatigue of the node: towards its most while recovery is short, away otherwise.
  double tire(double now, double recovery) {
    const Fatigue& fatigue = scenario_.fatigue;
    if (fatigue.most <= Seconds(0.0)) return 0.0;
    const double kept = std::exp(-(now - tired_at_) / fatigue.tau.value());
    const double goal = recovery < fatigue.below_recovery.value() ? fatigue.most.value() : 0.0;
    tiredness_ = goal + (tiredness_ - goal) * kept;
    tired_at_ = now;
    return tiredness_;
  }

  bool activate_ventricle(double now, VentricularOrigin origin, std::optional<std::size_t> atrial) {
    now = on_nanoseconds(now);
    if (now - last_ventricular_ < scenario_.ventricular_refractory.value()) return false;
    last_ventricular_ = now;
    VentricularBeat beat{Seconds(now), origin, atrial, std::nullopt};
    if (origin == VentricularOrigin::conducted || origin == VentricularOrigin::junctional_escape)
      beat.his = Seconds(on_nanoseconds(now - scenario_.his_to_ventricle.value()));
    beats_.ventricular.push_back(beat);
    const double recovery = now - node_exit_;
    const bool met = transit_.has_value();
    transit_.reset();
    node_exit_ = now;
    if (origin != VentricularOrigin::conducted && scenario_.retrograde && !met && !retrograde_) {
      if (const auto delay = scenario_.retrograde->delay(Seconds(recovery)))
        retrograde_ = Transit{on_nanoseconds(now + delay->value()), beats_.ventricular.size() - 1};
    }
    return true;
  }

  void leave_node(double now) {
    const std::size_t cause = transit_->cause;
    transit_.reset();
    if (!activate_ventricle(now, VentricularOrigin::conducted, cause)) return; // ventricle refractory
    beats_.atrial[cause].ventricular = beats_.ventricular.size() - 1;
    if (escape_suppression_.fired()) escape_suppression_.rest();
    escape_suppression_.drive();
    arm_escape(now);
  }

  void arrive_retrograde(double now) {
    const std::size_t cause = retrograde_->cause;
    retrograde_.reset();
    if (!activate_atrium(now, AtrialOrigin::retrograde, cause)) return;
    beats_.ventricular[cause].atrial = beats_.atrial.size() - 1;
    schedule_sinus(now);
  }

  void stimulate(double now) {
    const StimulusPlan& plan = stimuli_[next_stimulus_++];
    beats_.stimuli.push_back({Seconds(on_nanoseconds(now)), plan.chamber});
    pending_capture_ = now + plan.latency;
    pending_chamber_ = plan.chamber;
  }

  void capture(double now) {
    pending_capture_ = kNever;
    if (pending_chamber_ == Chamber::ventricular) {
      if (activate_ventricle(now, VentricularOrigin::paced, std::nullopt)) arm_escape(now);
      return;
    }
    if (!activate_atrium(now, AtrialOrigin::paced, std::nullopt)) return;
    if (sinus_suppression_.fired()) sinus_suppression_.rest();
    sinus_suppression_.drive();
    schedule_sinus(now);
  }

  void fire_early(double now) {
    const PrematureBeat& plan = premature_[next_premature_++];
    if (plan.chamber == Chamber::ventricular) {
      if (activate_ventricle(now, VentricularOrigin::premature, std::nullopt)) arm_escape(now);
      return;
    }
    if (activate_atrium(now, AtrialOrigin::premature, std::nullopt) && plan.resets_sinus) schedule_sinus(now);
  }

  void fire_sinus(double now) {
    activate_atrium(now, AtrialOrigin::sinus, std::nullopt);
    sinus_suppression_.fire();
    schedule_sinus(now);
  }

  void escape(double now, VentricularOrigin origin) {
    if (activate_ventricle(now, origin, std::nullopt)) escape_suppression_.fire();
    arm_escape(now);
  }

  void arm_escape(double now) {
    const EscapePlan& plan = scenario_.escape;
    const auto due = [&](Seconds interval) {
      if (interval <= Seconds(0.0)) return kNever;
      const double jitter = plan.jitter_sd > Seconds(0.0) ? plan.jitter_sd.value() * random_.normal() : 0.0;
      return now + std::max(interval.value() * escape_suppression_.factor() + jitter, 1e-3);
    };
    junctional_due_ = due(plan.junctional);
    ventricular_due_ = due(plan.ventricular);
  }

  const Scenario& scenario_;
  const HeartState& state_;
  Random random_;
  std::vector<StimulusPlan> stimuli_;
  std::vector<PrematureBeat> premature_;
  Suppression sinus_suppression_, escape_suppression_;
  Beats beats_;
  double end_ = 0.0;
  double next_sinus_ = 0.0, junctional_due_ = kNever, ventricular_due_ = kNever;
  double pending_capture_ = kNever;
  Chamber pending_chamber_ = Chamber::atrial;
  std::size_t next_stimulus_ = 0, next_premature_ = 0;
  std::optional<Transit> transit_, retrograde_;
  double last_atrial_ = kLongAgo, last_ventricular_ = kLongAgo, node_exit_ = kLongAgo;
  double tiredness_ = 0.0, tired_at_ = 0.0;
};

} // namespace

Beats run_heart(const Scenario& scenario, const HeartState& state, Seconds end) {
  return Heart(scenario, state).run(end.value());
}

} // namespace chronodrome::simulation
