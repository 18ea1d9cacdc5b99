// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>

#include "base/quantity.h"
#include "simulation/av_node.h"
#include "simulation/bath_effects.h"
#include "simulation/random.h"
#include "simulation/scenario.h"

namespace chronodrome::simulation {

/// Pacemaker and node under the drugs of a scenario.
class Conditions {
public:
  explicit Conditions(const Scenario& scenario);

  /// Sinus rate of the moment without fluctuation.
  [[nodiscard]] BeatsPerMinute rate_at(Seconds time) const;
  /// Node of the moment without fluctuation. Under an effect on `delay`, delay_min is what gives the wanted
  /// steady delay at the sinus rate of the moment.
  [[nodiscard]] AvNode node_at(Seconds time) const;
  /// The same in the long run in a given bath.
  [[nodiscard]] BeatsPerMinute settled_rate(const Bath& bath) const;
  [[nodiscard]] AvNode settled_node(const Bath& bath) const;
  [[nodiscard]] const BathEffects& effects() const { return effects_; }
  /// Steady delay without any agent; nothing without 1:1 conduction there.
  [[nodiscard]] std::optional<Seconds> basal_delay() const { return basal_delay_; }

private:
  template <class RatioOf>
  [[nodiscard]] AvNode node_under(const RatioOf& ratio_of) const;

  const Scenario* scenario_;
  BathEffects effects_;
  std::optional<Seconds> basal_delay_;
  bool steers_delay_ = false;
};

/// True if any agent has an effect on this target.
bool acts_on(const Scenario& scenario, EffectTarget target);

} // namespace chronodrome::simulation
