// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <span>
#include <string>
#include <vector>

#include "activation/activation.h"
#include "base/quantity.h"
#include "base/result.h"
#include "conduction/conduction.h"

namespace chronodrome::rhythm {

/// A stretch of rhythm of one kind, with the rule's numbers as `key=value;...`.
struct Episode {
  Seconds start;
  Seconds end;
  std::string kind;
  std::string detail;
};

struct Rhythm {
  std::vector<Episode> episodes; ///< in order of start, then of end, then of kind; rows may overlap
};

/// Thresholds of the rules. The report prints them.
struct RhythmSettings {
  double first_degree_ratio = 1.5;      ///< conducted delay over the median of the reference period
  Seconds reference_period{60.0};       ///< from the start of the recording
  double pause_ratio = 1.7;             ///< interval over the running cycle
  Seconds arrest_shortest{5.0};         ///< silence of the leading chamber that is arrest at the least
  double arrest_cycles = 6.0;           ///< ... and that many running cycles
  std::size_t complete_block_beats = 5; ///< atrial beats unconducted in a row
  Seconds complete_block_time{2.0};     ///< ... or that long
  std::size_t running_beats = 8;        ///< intervals whose median is the running cycle
  std::size_t longest_group = 15;       ///< conducted beats that one group before a block can hold
  Seconds timing_tolerance{1e-3};       ///< two delays that differ by less count as equal

  [[nodiscard]] std::optional<Error> check() const;
};

/// The electrical channel of each chamber that the rules read, and the pathway between them; any may be
/// missing.
struct RhythmInputs {
  const activation::ChannelActivations* atrial = nullptr;
  const activation::ChannelActivations* ventricular = nullptr;
  const conduction::PathwayDelays* av = nullptr;
  Seconds end; ///< of the recording
};

/// Episodes of: regular, first_degree_av_block, wenckebach, second_degree_fixed, two_to_one,
/// high_degree_av_block, complete_av_block, sinus_pause, arrest, undetermined, unreadable. Errors: bad_usage
/// (settings out of range). Source: definitions of contract section 5 (`resources/formats/results.md`);
/// Wenckebach n:m with rising delay before the dropped beat and second degree with fixed delay as textbooks
/// define them (common practice).
Result<Rhythm> compute(const RhythmInputs& inputs, const RhythmSettings& settings);

} // namespace chronodrome::rhythm
