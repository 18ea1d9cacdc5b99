// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "base/quantity.h"
#include "base/result.h"
#include "protocol/protocol.h"

namespace chronodrome::protocol {

/// What the session says about the bath.
struct BathConditions {
  std::optional<double> volume_ml; ///< before the first addition; nothing: not known, or perfused
  Seconds arrival_delay;           ///< from the tap to the tissue
};

struct AgentLevel {
  std::string agent; ///< as first written
  Molar concentration;
};

/// From `time` on (at the tissue) the agent has this concentration.
struct LevelChange {
  Seconds time;
  std::string agent;
  Molar concentration;
  bool by_dilution = false; ///< because something else was added
};

/// Bath concentration of every agent over time, as the tissue meets it.
class BathTimeline {
public:
  /// 0 before the first change and for an agent that never was in the bath; spelling as in agent_key().
  [[nodiscard]] Molar concentration_at(const std::string& agent, Seconds time) const;
  /// Agents above 0 at that time, in order of their first appearance.
  [[nodiscard]] std::vector<AgentLevel> present_at(Seconds time) const;
  /// In order of time at the tissue; ties in the log's order.
  [[nodiscard]] const std::vector<LevelChange>& changes() const { return changes_; }
  /// In order of their first appearance.
  [[nodiscard]] const std::vector<std::string>& agents() const { return agents_; }
  /// The log's events with every concentration filled in.
  [[nodiscard]] const std::vector<Event>& events() const { return events_; }
  /// When the event reaches the tissue.
  [[nodiscard]] Seconds arrival_of(const Event& event) const;
  [[nodiscard]] const std::vector<Warning>& warnings() const { return warnings_; }

private:
  friend class BathLog;
  std::vector<LevelChange> changes_;
  std::vector<std::string> agents_;
  std::vector<Event> events_;
  std::vector<Warning> warnings_;
  Seconds arrival_delay_;
};

/// Follows the log from an agent-free bath. A stated concentration stands. Where none is stated it is what
/// the pipetted volume v of the stock S makes of c in the current volume V: (c V + S v) / (V + v). Every
/// volume added, of whatever, makes the bath larger and thins all other agents; where the log gives no
/// volume, or the bath's volume is not known, nothing is thinned. `washout` without an agent leaves an
/// agent-free bath of the first volume; of one agent, the first volume with the other agents at the value
/// they were set to. Requires: events in order of time. Errors: bad_value (a concentration that cannot be
/// computed because the bath's volume is not known; more added at once than the bath holds). Accuracy: no
/// overflow and no loss: true for a bath that grows. A bath that overflows differs by the added share of its
/// volume (about 1 % over a usual series). Source: conservation of mass.
Result<BathTimeline> follow_bath(const Protocol& protocol, const BathConditions& conditions);

} // namespace chronodrome::protocol
