// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <cstdint>
#include <functional>
#include <optional>
#include <string>
#include <vector>

#include "base/quantity.h"
#include "base/result.h"
#include "conditioning/mains.h"
#include "conditioning/species.h"
#include "recording/recording.h"

namespace chronodrome::conditioning {

/// How a channel is prepared for detection and timing. What is left open follows the species and the role.
struct ConditioningSettings {
  std::string species; ///< of the preparation; not in the table: guinea-pig values
  MainsSettings mains; ///< electrograms only
  /// Low-pass of the timing signal of electrograms (zero phase, second order, gain 1/sqrt(2) after both
  /// passes); left out below four times its rate. 0: none. Below 400 Hz steepest slopes move (Pieper, Blue &
  /// Pacifico, PACE 1991: bandwidth-induced errors in activation times).
  Hertz timing_low_pass{400.0};
  std::optional<Hertz> detection_high_pass; ///< nothing: by species
  std::optional<Hertz> mechanical_low_pass; ///< nothing: by species and role
  Seconds longest_clip{0.1};   ///< a clipped run this long or longer cannot be read; shorter: flagged beat
  Seconds clip_recovery{0.05}; ///< after such a run the amplifier recovers: not readable either
  Seconds context{15.0};       ///< signal to either side that a block is computed from
  std::size_t block_samples = std::size_t{1}
                              << 18;    ///< of a block, or 90 s if that is more; bounds the memory
  std::vector<recording::Span> blanked; ///< stimulus artefacts, on the recording's clock, in order

  /// Errors: bad_usage (a frequency or time out of range).
  [[nodiscard]] std::optional<Error> check() const;
};

/// What is known of a sample beside its value.
enum SampleFlag : std::uint8_t {
  kClipped = 1, ///< the converter clipped
  kUnreadable =
      2, ///< within a stretch that cannot be read, or a blanked artefact; the value is a straight line
};

/// A part of one run, prepared. Samples core_first ... core_end - 1 of the signal are this block's own; what
/// lies about them is context and leans on the edges. Index 0 of each array is sample `first`.
struct ConditionedBlock {
  std::size_t run = 0;
  std::size_t first = 0;
  std::size_t core_first = 0;
  std::size_t core_end = 0;
  std::vector<double> timing; ///< least filtered: mains taken out, artefacts bridged
  std::vector<double>
      detection; ///< electrograms: timing, high-passed; mechanical: what the low-pass took away
  std::vector<std::uint8_t> flags; ///< SampleFlag
  std::vector<HumStretch> hum;     ///< in samples of the signal
  double step = 0.0;               ///< smallest difference between values, in the channel's unit
};

struct UnreadableRange {
  recording::Span span; ///< on the recording's clock, with skew
  std::string reason;   ///< "gap", "saturation", "flat", "short", "stimulus"
};

/// What is left when all blocks have passed.
struct ConditioningReport {
  std::vector<UnreadableRange> unreadable; ///< in order, not overlapping
  std::vector<Warning> warnings;
  double mains_hz = 0.0;     ///< median frequency removed; 0: none
  double hummed_share = 0.0; ///< of the signal's length from which hum was removed
  std::string method;        ///< filters in words, for the report
};

/// Asked before every block and after the last one, with the samples that have passed since it was asked
/// before. False: the work is to end.
using Proceed = std::function<bool(std::size_t samples)>;

/// The error of work that its caller has stopped.
Error stopped();

/// Prepares `channel` block by block, in order, and hands each block to `receive`. Blocks lie on a grid that
/// counts from the start of each run; every value depends only on the signal within `context` of it.
/// Electrograms: mains removed, mild low-pass for timing, high-passed copy for detection. Tension and
/// pressure: zero-phase low-pass only. Other roles: as they are, `detection` stays empty.
/// Errors: bad_usage (settings), not_enough_data (a channel without samples), cancelled (`proceed` said no).
/// Memory: about 7 * (a block's samples + 2 * context * rate) doubles, whatever the length of the recording.
Result<ConditioningReport> condition(const recording::Channel& channel, const ConditioningSettings& settings,
                                     const std::function<void(const ConditionedBlock&)>& receive,
                                     const Proceed& proceed = {});

} // namespace chronodrome::conditioning
