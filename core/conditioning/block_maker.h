// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <array>
#include <cstddef>
#include <optional>
#include <string>
#include <vector>

#include "conditioning/conditioning.h"
#include "conditioning/integrity.h"
#include "conditioning/still_watch.h"
#include "numerics/butterworth.h"

namespace chronodrome::conditioning {

/// Prepares the blocks of one channel. The filters are designed once; what cannot be done at the channel's
/// rate is left out and said in warnings().
class BlockMaker {
public:
  /// Requires: settings.check() found nothing, the channel has samples.
  BlockMaker(const recording::Channel& channel, const ConditioningSettings& settings);

  /// Samples core_first ... core_end - 1 of run `run`, counted from its start, with context about them. The
  /// block is valid until the next call: its memory is used again.
  const ConditionedBlock& make(std::size_t run, std::size_t core_first, std::size_t core_end,
                               StillWatch& still);

  /// Saturated stretches with their recovery in the block made last, in samples of the signal.
  [[nodiscard]] const std::vector<SampleRange>& saturated() const { return saturated_; }
  [[nodiscard]] const std::vector<Warning>& warnings() const { return warnings_; }
  [[nodiscard]] const std::string& method() const { return method_; }

private:
  void design(const SpeciesTraits& traits);
  void warn(const std::string& what, const std::string& remedy);
  [[nodiscard]] double step_of(std::span<const double> raw) const;
  void flag_clipping(std::span<const double> raw, ConditionedBlock& block);
  void flag_blanked(ConditionedBlock& block) const;
  void condition_electrogram(ConditionedBlock& block, std::size_t offset) const;
  void condition_mechanical(ConditionedBlock& block) const;

  const recording::Channel& channel_;
  const ConditioningSettings& settings_;
  Hertz rate_;
  std::optional<std::array<double, 2>> rails_; ///< in the channel's unit
  std::vector<numerics::Section> low_pass_;    ///< empty: none
  std::vector<numerics::Section> high_pass_;
  ConditionedBlock block_;
  std::vector<SampleRange> saturated_;
  std::vector<Warning> warnings_;
  std::string method_;
};

} // namespace chronodrome::conditioning
