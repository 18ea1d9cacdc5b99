// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <map>
#include <string>
#include <vector>

#include "base/quantity.h"
#include "simulation/scenario.h"

namespace chronodrome::simulation {

/// C^nh / (C^nh + EC50^nh); 0 at concentration 0. The simulator's own curve, so that tests of the fitter
/// against it are independent. Requires: concentration >= 0, nh > 0.
double hill_fraction(double concentration, double pec50, double nh);

/// Concentration (mol/L) of each agent in the bath, by agent_key.
using Bath = std::map<std::string, double>;

/// The bath after the first `count` events of the log.
Bath bath_after(const std::vector<LoggedEvent>& events, std::size_t count);

/// -log10 EC50 of an agent's effect in this bath: antagonists shift it.
double pec50_in(const Effect& effect, const std::string& agent, const Scenario& scenario, const Bath& bath);

/// What the bath does to each target over time.
class BathEffects {
public:
  explicit BathEffects(const Scenario& scenario);

  /// Basal value times this is the value at that time.
  [[nodiscard]] double ratio_at(EffectTarget target, Seconds time) const;
  /// The same in the long run in a given bath.
  [[nodiscard]] double settled_ratio(EffectTarget target, const Bath& bath) const;

private:
  /// The fraction of one effect: towards `goal` from `time` on.
  struct Turn {
    double time, start, goal, tau;
  };
  struct Course {
    EffectTarget target;
    double emax_ratio;
    std::vector<Turn> turns;
    [[nodiscard]] double fraction_at(double time) const;
  };

  const Scenario* scenario_;
  std::vector<Course> courses_;
};

} // namespace chronodrome::simulation
