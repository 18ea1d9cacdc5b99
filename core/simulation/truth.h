// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "base/quantity.h"
#include "simulation/heart.h"
#include "simulation/scenario.h"

namespace chronodrome::simulation {

/// Activation times of a channel: those of the wave's definition (steepest negative slope of a unipolar
/// deflection, largest |V| of a bipolar one, steepest rise of force and pressure), without noise and without
/// what other deflections add.
struct TrueActivations {
  std::string channel;
  std::vector<Seconds> times;
};

enum class DelayKind { conducted, blocked, retrograde, unpaired };
std::string name_of(DelayKind kind);

/// One row of a pathway: each activation of either electrode stands in exactly one.
struct TrueDelay {
  std::optional<Seconds> from, to;
  DelayKind kind = DelayKind::conducted;
  [[nodiscard]] std::optional<Seconds> delay() const {
    return from && to ? std::optional(*to - *from) : std::nullopt;
  }
};

struct TruePathway {
  std::string label, from, to;
  std::vector<TrueDelay> rows; ///< in order of their earliest time
};

struct TrueEpisode {
  Seconds start, end;
  std::string kind;   ///< words of the rhythm table
  std::string detail; ///< `key=value;...`
};

/// The response of one measure in the long run at one step, without fluctuation.
struct TrueResponse {
  int curve = 0;
  std::string agent, background;
  double concentration = 0.0; ///< mol/L
  std::string measure, unit;
  std::optional<double> value; ///< nothing unless `ok`
  std::string status;          ///< `ok`, `censored` (no beat conducted), `arrested` (no beat)
  Seconds step_start, step_end;
};

/// The Hill curve a measure follows.
struct TrueCurve {
  int curve = 0;
  std::string agent, background, measure, unit;
  double basal = 0.0, emax = 0.0, pec50 = 0.0, nh = 0.0;
  bool holds = true; ///< false: conduction fails at some step, and the responses leave the curve
};

struct Truth {
  std::vector<TrueActivations> activations;
  std::vector<TruePathway> pathways;
  std::vector<Seconds> stimuli;
  std::vector<TrueEpisode> rhythm; ///< by start, then end, then kind
  std::vector<TrueResponse> responses;
  std::vector<TrueCurve> curves;
};

/// When the wave of each beat of a channel's chamber passes it; only times within the recording.
TrueActivations true_activations(const ChannelPlan& channel, const Beats& beats, Seconds end);

/// Rows whose times lie within the recording; the part outside is left out of its row.
TruePathway true_pathway(const PathwayPlan& pathway, const Scenario& scenario, const Beats& beats);

/// Episodes by the rules of `resources/formats/results.md` with its default thresholds. Times are those where
/// the impulse starts in each chamber.
std::vector<TrueEpisode> true_rhythm(const Scenario& scenario, const Beats& beats);

/// Fills responses and curves of every step of every curve and every measure.
void add_true_responses(const Scenario& scenario, Truth& truth);

} // namespace chronodrome::simulation
