// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <functional>
#include <optional>
#include <vector>

#include "base/quantity.h"
#include "simulation/scenario.h"

namespace chronodrome::simulation {

enum class AtrialOrigin { sinus, premature, paced, retrograde };
enum class VentricularOrigin { conducted, junctional_escape, ventricular_escape, premature, paced };

struct AtrialBeat {
  Seconds time;
  AtrialOrigin origin = AtrialOrigin::sinus;
  std::optional<std::size_t> ventricular; ///< the beat it caused, or that caused it (retrograde)
};

struct VentricularBeat {
  Seconds time;
  VentricularOrigin origin = VentricularOrigin::conducted;
  std::optional<std::size_t> atrial; ///< the beat that caused it, or that it caused (retrograde)
  std::optional<Seconds> his;        ///< activation of the His bundle: conducted and junctional beats
};

struct Stimulus {
  Seconds time;
  Chamber chamber = Chamber::atrial;
};

/// Activations of both chambers, where the impulse starts in each; times are multiples of 1e-9 s.
struct Beats {
  std::vector<AtrialBeat> atrial;
  std::vector<VentricularBeat> ventricular;
  std::vector<Stimulus> stimuli;
};

/// What the moment makes of the pacemaker and the node. Both are asked in ascending order of time.
struct HeartState {
  std::function<BeatsPerMinute(Seconds)> rate;
  std::function<AvNode(Seconds)> node;
};

/// Runs the heart from 0 to `end`. The sinus node fires by its rate of the moment; every atrial activation
/// meets the node; a ventricular activation of any cause has left the node, and annuls an impulse under way
/// in it; escape foci fire when the ventricle has been silent for long enough.
Beats run_heart(const Scenario& scenario, const HeartState& state, Seconds end);

} // namespace chronodrome::simulation
