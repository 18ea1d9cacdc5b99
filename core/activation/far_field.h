// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <span>
#include <string>
#include <vector>

#include "activation/candidate.h"
#include "activation/settings.h"
#include "base/quantity.h"
#include "recording/recording.h"

namespace chronodrome::activation {

/// The accepted candidates of one electrogram, for the decision across channels.
struct CandidateTrain {
  recording::Role role = recording::Role::other;
  recording::Lead lead = recording::Lead::none;
  std::vector<Candidate> candidates; ///< in order of time
  std::vector<Seconds> rejected;     ///< filled: times of what was taken for the other chamber's beat
  std::size_t undecided = 0;         ///< filled: kept, but nothing tells them from the other chamber's beats
};

/// Slope that tells near from far: the steeper of fall and rise; on unipolar leads but those of the ventricle
/// the steepest fall. An ectopic ventricular beat may run away from its electrode: inverted, the steep flank
/// rising.
double near_field_slope(const Candidate& candidate, recording::Role role, recording::Lead lead);

/// Takes the other chamber's waves out of each train, in place. With M the median slope of the local beats
/// within +-25 s (those of at least half the upper decile):
///  - slope >= near_field_share * M: an activation, always, wherever the other chamber's beats lie;
///  - below far_field_share * M and within [-5 ms, deflection width + 10 ms] of an activation of the other
///    chamber (one that its own electrode shows as local): a far field;
///  - between the two shares: a far field if it lies there too and at least two others within +-10 s do, all
///    at the same distance within 5 ms;
///  - below 0.25 * M without the other chamber's beat: not local if it stands between local beats within 3 s
///    to both sides; kept otherwise (contact may just have been lost).
/// On a ventricular electrode nothing of at least 0.7 of the local peak to peak is taken out by these rules.
/// Where a chamber stands still for longer, so that only the other one's waves are left to compare with,
/// judge_standstill (standstill.h) compares them with the chamber's own beats before. Never is a stretch of
/// time blanked. On a His electrode what coincides with a local beat of atrium or ventricle is that beat's
/// far field whatever its slope, for both are larger than the His deflection.
/// Electrodes of one chamber, ECG and action potentials are not compared.
/// The result does not depend on the order of the trains. Source: slower slope and time lock of the far
/// field, common practice.
void reject_far_field(std::span<CandidateTrain> trains, Seconds deflection_width,
                      const ActivationSettings& settings);

} // namespace chronodrome::activation
