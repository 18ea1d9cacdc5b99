// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <span>
#include <vector>

#include "base/quantity.h"
#include "conditioning/integrity.h"

namespace chronodrome::conditioning {

/// Tells a lost contact from a silent heart. A stretch that does not move is a flat line only if the signal
/// beside it moves by more than the converter's step even between the beats: a preparation that stops beating
/// keeps its noise, an electrode that loses contact does not. A run that is constant throughout is flat too.
/// Fed with the blocks of one run in order.
class StillWatch {
public:
  StillWatch(Hertz rate, std::size_t run_first, std::size_t run_count)
      : rate_(rate), run_first_(run_first), run_count_(run_count) {}

  /// `raw`: samples `first` ... of the signal, of which core_first ... core_end - 1 are new.
  void look_at(std::span<const double> raw, std::size_t first, std::size_t core_first, std::size_t core_end,
               double step);
  /// Flat lines of the run, in samples of the signal.
  [[nodiscard]] std::vector<SampleRange> flat_lines() const;

private:
  struct Still {
    SampleRange range;
    double quiet_before = 0.0; ///< range of the quiet stretches in the 5 s before
    double quiet_after = 0.0;
    double step = 0.0;
  };

  Hertz rate_;
  std::size_t run_first_, run_count_;
  std::vector<Still> stills_;
};

} // namespace chronodrome::conditioning
