// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>

#include "base/quantity.h"
#include "base/result.h"
#include "recording/recording.h"

namespace chronodrome::conduction {

/// From the shortest to the longest delay that one activation can take to cause another.
struct DelayWindow {
  Seconds shortest;
  Seconds longest;
};

/// How activations of two electrodes are paired. What is left open follows the species (unknown: guinea pig)
/// and the roles.
struct ConductionSettings {
  std::string species;
  std::optional<DelayWindow> antegrade;  ///< nothing: by species and roles
  std::optional<DelayWindow> retrograde; ///< nothing: 15 to 250 ms, scaled with the antegrade window
  std::optional<Seconds> within_chamber; ///< nothing: +-60 ms, mouse +-40 ms
  std::optional<Seconds> control_delay;  ///< nothing: estimated, see control_delay_of
  Seconds control_period{60.0};          ///< from the first activation, where the control delay is sought
  double unpaired_cost = 4.0;            ///< of an activation without partner
  double longest_link_cost = 6.0;        ///< cap of a link, below that of two unpaired ends
  double shortening_share = 0.25;        ///< of the control delay: a delay shorter by this costs 1
  double retrograde_cost = 2.0;          ///< added to a retrograde link
  double ambiguous_share = 0.9;       ///< of the atrial cycle: longer delays could belong to the beat before
  double dissociation_ratio = 1.2;    ///< ventricular over atrial cycle, at least
  double dissociation_scatter = 0.05; ///< coefficient of variation of the ventricular cycle, at most

  /// Errors: bad_usage (a window that is empty or negative, a cost or share out of range).
  [[nodiscard]] std::optional<Error> check() const;
};

/// The delay window of a pathway between two roles. Atrium to ventricle by species: mouse 15-150, rat 20-300,
/// guinea pig 25-350, rabbit 30-450, zebrafish 25-400, frog 100-1500, human and dog 60-600 ms. From the
/// atrium to the His bundle from 10 ms on; from His to ventricle 5-40 ms (human and dog 20-90). Engineering
/// defaults about published delays (rat 43 +- 7 ms; rabbit 93-136 ms in sinus rhythm, Watanabe & Dreifus
/// 1968).
DelayWindow antegrade_window(const std::string& species, recording::Role from, recording::Role to);

/// True if both electrodes lie in one chamber: equal roles, or sinus node and atrium.
bool within_one_chamber(recording::Role from, recording::Role to);

} // namespace chronodrome::conduction
