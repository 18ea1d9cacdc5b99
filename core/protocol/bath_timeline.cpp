// Chronodrome, GPL-3.0-or-later.
// Symbols: V bath volume now, c concentration now, S concentration of the stock, v volume pipetted.
#include "protocol/bath_timeline.h"

#include <algorithm>
#include <cmath>
#include <set>

#include "base/number_text.h"
#include "protocol/concentration.h"

namespace chronodrome::protocol {
namespace {

// A stated concentration this far from what the pipetted volume gives is worth a word: ten times what added
// volume costs over a usual series, and far below any slip of a factor.
constexpr double kStatedTolerance = 0.05;

Place place_of(const Event& event) {
  return event.line > 0 ? Place::at_line(event.line) : Place{};
}

} // namespace

/// Takes the events one by one and writes the timeline.
class BathLog {
public:
  BathLog(const Protocol& protocol, const BathConditions& conditions)
      : protocol_(protocol), conditions_(conditions), volume_ml_(conditions.volume_ml) {
    timeline_.arrival_delay_ = conditions.arrival_delay;
  }

  Result<BathTimeline> follow() {
    for (Event event : protocol_.events) {
      switch (event.kind) {
      case EventKind::addition:
      case EventKind::antagonist:
        if (auto taken = take_agent(event); !taken) return taken.error();
        break;
      case EventKind::vehicle:
        if (event.volume_ml) {
          if (auto grown = grow(event); !grown) return grown.error();
        }
        break;
      case EventKind::washout:
        wash(event);
        break;
      case EventKind::pacing_start:
      case EventKind::pacing_stop:
      case EventKind::exclude_start:
      case EventKind::exclude_stop:
      case EventKind::note:
        break;
      }
      timeline_.events_.push_back(std::move(event));
    }
    std::stable_sort(timeline_.changes_.begin(), timeline_.changes_.end(),
                     [](const LevelChange& a, const LevelChange& b) { return a.time < b.time; });
    return std::move(timeline_);
  }

private:
  struct Held {
    std::string agent, key;
    double now = 0.0; ///< with dilution since
    double set = 0.0; ///< as last set by its own event
  };

  Held& held(const std::string& agent) {
    const std::string key = agent_key(agent);
    for (auto& one : held_) {
      if (one.key != key) continue;
      if (one.agent != agent && spellings_.insert(agent).second) {
        warn(nullptr, "\"" + agent + "\" is taken to be the agent written \"" + one.agent + "\" before",
             "write every agent the same way");
      }
      return one;
    }
    held_.push_back({agent, key, 0.0, 0.0});
    timeline_.agents_.push_back(agent);
    return held_.back();
  }

  Done take_agent(Event& event) {
    const double before = held(event.agent).now;
    std::optional<double> reached;
    if (event.stock && event.volume_ml && volume_ml_) {
      reached =
          (before * *volume_ml_ + event.stock->value() * *event.volume_ml) / (*volume_ml_ + *event.volume_ml);
    }
    if (!event.concentration && !reached) {
      return Error{ErrorCode::bad_value, protocol_.file, place_of(event),
                   "the concentration of " + event.agent +
                       " is to be computed from stock and volume, but the bath's volume is not known",
                   "set preparation.bath_volume_ml in the session, or state the concentration"};
    }
    if (event.volume_ml && volume_ml_) {
      if (auto grown = grow(event); !grown) return grown.error();
    }
    if (!event.concentration) {
      event.concentration = Molar(*reached);
    } else if (reached && std::abs(*reached - event.concentration->value()) >
                              kStatedTolerance * event.concentration->value()) {
      warn(&event,
           "stated is " + concentration_text(*event.concentration) + " of " + event.agent +
               ", but what was pipetted makes " + number_text(*reached, 4) + " M",
           "correct the row; the stated value is used");
    }
    Held& one = held(event.agent);
    one.now = one.set = event.concentration->value();
    change(event, one, false);
    return done();
  }

  /// A volume goes in: all that is in the bath is thinned.
  Done grow(const Event& event) {
    if (!volume_ml_) return done();
    const double added = *event.volume_ml;
    if (added > *volume_ml_) {
      return Error{ErrorCode::bad_value, protocol_.file, place_of(event),
                   number_text(added, 6) + " mL are added to a bath that holds " +
                       number_text(*volume_ml_, 6) + " mL",
                   "check volume_ml (millilitres) and the session's bath_volume_ml"};
    }
    const double share = *volume_ml_ / (*volume_ml_ + added);
    *volume_ml_ += added;
    for (auto& one : held_) {
      if (one.now == 0.0 || added == 0.0) continue;
      one.now *= share;
      const bool own = !event.agent.empty() && one.key == agent_key(event.agent);
      if (!own || event.kind == EventKind::vehicle) change(event, one, true);
    }
    return done();
  }

  void wash(const Event& event) {
    volume_ml_ = conditions_.volume_ml;
    const std::string key = agent_key(event.agent);
    bool found = false;
    for (auto& one : held_) {
      if (event.agent.empty() || one.key == key) {
        found = found || one.now > 0.0;
        if (one.now == 0.0) continue;
        one.now = one.set = 0.0;
        change(event, one, false);
      } else if (one.now != one.set) {
        one.now = one.set;
        change(event, one, false);
      }
    }
    if (!event.agent.empty() && !found) {
      warn(&event, "washout of " + event.agent + ", which is not in the bath",
           "leave the agent empty to clear everything, or correct its name");
    }
  }

  void change(const Event& event, const Held& one, bool by_dilution) {
    timeline_.changes_.push_back({timeline_.arrival_of(event), one.agent, Molar(one.now), by_dilution});
  }

  void warn(const Event* event, std::string what, std::string remedy) {
    timeline_.warnings_.push_back(
        {protocol_.file, event ? place_of(*event) : Place{}, std::move(what), std::move(remedy)});
  }

  const Protocol& protocol_;
  const BathConditions& conditions_;
  std::optional<double> volume_ml_;
  std::vector<Held> held_;
  std::set<std::string> spellings_; // already told
  BathTimeline timeline_;
};

Molar BathTimeline::concentration_at(const std::string& agent, Seconds time) const {
  const std::string key = agent_key(agent);
  Molar level;
  for (const auto& change : changes_) {
    if (change.time > time) break;
    if (agent_key(change.agent) == key) level = change.concentration;
  }
  return level;
}

std::vector<AgentLevel> BathTimeline::present_at(Seconds time) const {
  std::vector<AgentLevel> present;
  for (const auto& agent : agents_) {
    const Molar level = concentration_at(agent, time);
    if (level.value() > 0.0) present.push_back({agent, level});
  }
  return present;
}

Seconds BathTimeline::arrival_of(const Event& event) const {
  return event.time + event.arrival.value_or(arrival_delay_);
}

Result<BathTimeline> follow_bath(const Protocol& protocol, const BathConditions& conditions) {
  return BathLog(protocol, conditions).follow();
}

} // namespace chronodrome::protocol
