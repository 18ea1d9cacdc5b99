// Chronodrome, GPL-3.0-or-later.
#include "protocol/curve_plan.h"

#include <algorithm>
#include <map>
#include <optional>

#include "base/number_text.h"
#include "protocol/concentration.h"
#include "protocol/ladder.h"
#include "protocol/stretches.h"

namespace chronodrome::protocol {
namespace {

bool ends_step(EventKind kind) {
  return kind == EventKind::addition || kind == EventKind::vehicle || kind == EventKind::antagonist ||
         kind == EventKind::washout || kind == EventKind::pacing_start;
}

class CurvePlanner {
public:
  CurvePlanner(const Protocol& protocol, const BathTimeline& bath, Seconds end)
      : protocol_(protocol), bath_(bath), end_(end) {}

  Result<CurvePlan> plan() {
    for (const Event& event : bath_.events()) {
      if (event.time >= end_) {
        if (ends_step(event.kind) || event.kind == EventKind::exclude_start)
          warn(event,
               name_of(event.kind) + " at " + number_text(event.time.value()) + " s lies " +
                   number_text((event.time - end_).value(), 6) + " s after the end of the recording",
               "check the clock of the log; the event is left out");
        continue;
      }
      if (ends_step(event.kind)) close_step(event.time);
      if (auto taken = take(event); !taken) return taken.error();
      if (ends_step(event.kind) || event.kind == EventKind::pacing_stop)
        undisturbed_since_ = std::max(undisturbed_since_, arrival_of(event));
    }
    close_step(end_);
    std::stable_sort(plan_.curves.begin(), plan_.curves.end(),
                     [](const Curve& a, const Curve& b) { return a.number < b.number; });
    return std::move(plan_);
  }

private:
  /// Where in the plan the last addition went, and what else was in the bath then.
  struct Running {
    std::size_t curve;
    std::string background;
  };

  Done take(const Event& event) {
    const std::string key = agent_key(event.agent);
    switch (event.kind) {
    case EventKind::addition:
      return take_addition(event, key);
    case EventKind::antagonist:
      set(event, key);
      if (running_ && agent_key(plan_.curves[running_->curve].agent) == key) running_.reset();
      break;
    case EventKind::washout:
      if (event.agent.empty()) {
        levels_.clear();
        running_.reset();
      } else {
        levels_.erase(key);
        if (running_ && agent_key(plan_.curves[running_->curve].agent) == key) running_.reset();
      }
      break;
    case EventKind::vehicle:
    case EventKind::pacing_start:
    case EventKind::pacing_stop:
    case EventKind::exclude_start:
    case EventKind::exclude_stop:
    case EventKind::note:
      break;
    }
    return done();
  }

  Done take_addition(const Event& event, const std::string& key) {
    if (event.concentration->value() == 0.0) return take_nothing_added(event, key);
    const std::string background = background_text(key);
    if (event.curve) {
      if (auto chosen = choose(event, key, background); !chosen) return chosen.error();
    } else if (!running_ || agent_key(plan_.curves[running_->curve].agent) != key ||
               running_->background != background) {
      open(event, key, background, last_number_ + 1);
    }
    running_->background = background;
    set(event, key);
    const Seconds start = std::clamp(arrival_of(event), Seconds(0.0), end_);
    plan_.curves[running_->curve].steps.push_back({*event.concentration, start, end_, event.line});
    step_open_ = true;
    return done();
  }

  /// A final concentration of 0 is no point of a curve beside its control: each curve has one row at 0.
  Done take_nothing_added(const Event& event, const std::string& key) {
    if (levels_.count(key) == 0) {
      warn(event, "an addition of 0 M of " + event.agent + " is taken as vehicle",
           "write `vehicle` for an addition without agent");
      return done();
    }
    warn(event, "an addition that leaves 0 M of " + event.agent + " is taken as its washout",
         "write `washout` where an agent is taken out");
    levels_.erase(key);
    if (running_ && agent_key(plan_.curves[running_->curve].agent) == key) running_.reset();
    return done();
  }

  /// The column `curve` names the curve.
  Done choose(const Event& event, const std::string& key, const std::string& background) {
    const auto same = std::find_if(plan_.curves.begin(), plan_.curves.end(),
                                   [&](const Curve& curve) { return curve.number == *event.curve; });
    if (same == plan_.curves.end()) {
      open(event, key, background, *event.curve);
      return done();
    }
    if (agent_key(same->agent) != key) {
      return Error{ErrorCode::bad_value, protocol_.file, place_of(event),
                   "curve " + std::to_string(*event.curve) + " holds " + same->agent + " and cannot take " +
                       event.agent,
                   "give " + event.agent + " a curve number of its own"};
    }
    if (same->background != background) {
      warn(event,
           "curve " + std::to_string(*event.curve) + " began in the background \"" + same->background +
               "\" and goes on in \"" + background + "\"",
           "check the column curve; the number stands as written");
    }
    running_ = Running{static_cast<std::size_t>(same - plan_.curves.begin()), background};
    return done();
  }

  void open(const Event& event, const std::string& key, const std::string& background, int number) {
    Curve curve;
    curve.number = number;
    curve.agent = first_spelling(event.agent, key);
    curve.background = background;
    for (const auto& [other, level] : levels_) {
      if (other != key) curve.background_agents.push_back(level);
    }
    const auto already = levels_.find(key);
    const Seconds at = std::clamp(event.time, Seconds(0.0), end_);
    if (already != levels_.end()) {
      warn(event,
           "curve " + std::to_string(number) + " of " + curve.agent +
               " has no control: the bath already held " + concentration_text(already->second.concentration),
           "log the washout before the curve");
      curve.steps.push_back({Molar(0.0), at, at, event.line});
    } else {
      curve.steps.push_back({Molar(0.0), std::min(undisturbed_since_, at), at, event.line});
      if (undisturbed_since_ >= at)
        warn(event,
             "nothing was recorded between the last change and the first addition of curve " +
                 std::to_string(number),
             "record a control before the curve");
    }
    last_number_ = std::max(last_number_, number);
    plan_.curves.push_back(std::move(curve));
    running_ = Running{plan_.curves.size() - 1, background};
  }

  void close_step(Seconds time) {
    if (!step_open_) return;
    step_open_ = false;
    Step& step = plan_.curves[running_curve_of_step()].steps.back();
    step.end = std::clamp(time, Seconds(0.0), end_);
    if (step.end > step.start) return;
    step.start = step.end;
    Warning warning{protocol_.file, step.line > 0 ? Place::at_line(step.line) : Place{},
                    "the step at " + concentration_text(step.concentration) +
                        " was over before the agent reached the tissue",
                    "check the arrival delay and the times"};
    plan_.warnings.push_back(std::move(warning));
  }

  /// A step closes before the event that ends its curve is taken, so the running curve is the step's.
  [[nodiscard]] std::size_t running_curve_of_step() const { return running_->curve; }

  void set(const Event& event, const std::string& key) {
    if (event.concentration->value() > 0.0) {
      levels_[key] = {first_spelling(event.agent, key), *event.concentration};
    } else {
      levels_.erase(key);
    }
  }

  [[nodiscard]] std::string background_text(const std::string& key) const {
    std::string text;
    for (const auto& [other, level] : levels_) {
      if (other == key) continue;
      text += (text.empty() ? "" : " + ") + level.agent + " " + concentration_text(level.concentration);
    }
    return text;
  }

  [[nodiscard]] std::string first_spelling(const std::string& agent, const std::string& key) const {
    for (const auto& known : bath_.agents()) {
      if (agent_key(known) == key) return known;
    }
    return agent;
  }

  [[nodiscard]] Seconds arrival_of(const Event& event) const {
    const bool through_bath = event.kind != EventKind::pacing_start && event.kind != EventKind::pacing_stop;
    return through_bath ? bath_.arrival_of(event) : event.time;
  }

  [[nodiscard]] static Place place_of(const Event& event) {
    return event.line > 0 ? Place::at_line(event.line) : Place{};
  }

  void warn(const Event& event, std::string what, std::string remedy) {
    plan_.warnings.push_back({protocol_.file, place_of(event), std::move(what), std::move(remedy)});
  }

  const Protocol& protocol_;
  const BathTimeline& bath_;
  Seconds end_;
  CurvePlan plan_;
  std::map<std::string, AgentLevel> levels_; // as set, by key
  std::optional<Running> running_;
  bool step_open_ = false;
  int last_number_ = 0;
  Seconds undisturbed_since_; // arrival of the last change of bath or pacing
};

} // namespace

Result<CurvePlan> plan_curves(const Protocol& protocol, const BathConditions& conditions,
                              Seconds recording_end) {
  auto bath = follow_bath(protocol, conditions);
  if (!bath) return bath.error();
  auto plan = CurvePlanner(protocol, *bath, recording_end).plan();
  if (!plan) return plan.error();
  std::vector<Warning> all = bath->warnings();
  const auto add = [&all](const std::vector<Warning>& more) {
    all.insert(all.end(), more.begin(), more.end());
  };
  add(ladder_warnings(bath->events(), protocol.events, LadderPart::computed, protocol.file));
  add(plan->warnings);
  plan->excluded =
      stretches_of(protocol, EventKind::exclude_start, EventKind::exclude_stop, recording_end, all);
  // Pacing that is never stopped, or restarted at another rate, is nothing to warn of.
  std::vector<Warning> unspoken;
  plan->paced =
      stretches_of(protocol, EventKind::pacing_start, EventKind::pacing_stop, recording_end, unspoken);
  plan->warnings = std::move(all);
  return plan;
}

} // namespace chronodrome::protocol
