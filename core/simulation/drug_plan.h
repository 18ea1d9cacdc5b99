// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "base/quantity.h"
#include "protocol/protocol.h"

namespace chronodrome::simulation {

/// What an agent acts on.
enum class EffectTarget {
  rate,         ///< sinus rate, beats/min
  delay,        ///< steady 1:1 atrioventricular delay at the sinus rate of the moment
  force,        ///< developed force of tension channels
  pressure,     ///< developed pressure of pressure channels
  delay_min,    ///< AvNode::delay_min; not together with `delay`
  delay_span,   ///< AvNode::delay_span
  recovery_tau, ///< AvNode::recovery_tau
  recovery_min, ///< AvNode::recovery_min: refractoriness of the node
};
std::string name_of(EffectTarget target);
std::optional<EffectTarget> effect_target_named(const std::string& name);

/// One Hill curve: the target is its basal value times 1 + (emax_ratio - 1) C^nh / (C^nh + EC50^nh). The
/// fraction reached follows a change of concentration exponentially.
struct Effect {
  EffectTarget target = EffectTarget::rate;
  double emax_ratio = 0.5; ///< maximal response over basal response; below 1: slowing, weakening, shortening
  double pec50 = 6.0;      ///< -log10(EC50 / (1 mol/L))
  double nh = 1.0;         ///< Hill coefficient, above 0
  Seconds onset_tau{10.0}; ///< time constant when the effect grows
  Seconds washout_tau{20.0}; ///< time constant when it wanes
};

/// Simple competition: EC50 of `against` is multiplied by 1 + ([B] / KB)^slope.
struct Antagonism {
  std::string against; ///< name of the agonist
  double pkb = 8.0;    ///< -log10(KB / (1 mol/L))
  double slope = 1.0;
};

struct Agent {
  std::string name;
  std::vector<Effect> effects; ///< at most one for each target
  std::vector<Antagonism> antagonisms;
};

/// One line of the drug log, as the protocol file will state it. It reaches the tissue
/// preparation.arrival_delay later.
struct LoggedEvent {
  Seconds time;
  protocol::EventKind kind = protocol::EventKind::note; ///< no pacing_start, pacing_stop: trains write these
  std::string agent;
  std::optional<double> concentration; ///< final in the bath, in `unit`
  std::string unit = "M";
  std::string note;
};

} // namespace chronodrome::simulation
