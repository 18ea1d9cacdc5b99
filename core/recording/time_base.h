// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <optional>
#include <vector>

#include "base/quantity.h"

namespace chronodrome::recording {

/// Samples first ... first + count - 1 follow each other without a gap; the first one lies at `start`.
struct Run {
  std::size_t first = 0;
  std::size_t count = 0;
  Seconds start;
};

/// A stretch of time, end exclusive.
struct Span {
  Seconds start;
  Seconds end;
};

/// When each sample of a signal was taken: a rate, and the runs between gaps. Missing samples are not stored.
class TimeBase {
public:
  TimeBase() = default;
  /// Requires: rate > 0; runs in order of time and of sample, none empty, none overlapping.
  TimeBase(Hertz rate, std::vector<Run> runs);

  [[nodiscard]] Hertz rate() const { return rate_; }
  [[nodiscard]] const std::vector<Run>& runs() const { return runs_; }
  [[nodiscard]] std::size_t size() const; ///< samples stored
  [[nodiscard]] Seconds start() const;    ///< of the first sample (0 if empty)
  [[nodiscard]] Seconds end() const;      ///< one sample period after the last sample
  /// Time of a fractional sample position; positions belong to the run that holds floor(position).
  [[nodiscard]] Seconds time_at(double position) const;
  /// Fractional sample position at a time; nothing in a gap or outside.
  [[nodiscard]] std::optional<double> position_at(Seconds time) const;
  /// First stored sample at or after `time` (size() if none).
  [[nodiscard]] std::size_t first_at_or_after(Seconds time) const;
  /// Index of the run that holds sample `index`. Requires: index < size().
  [[nodiscard]] std::size_t run_of(std::size_t index) const;
  /// Stretches between runs, in order.
  [[nodiscard]] std::vector<Span> gaps() const;
  /// True if [from, to] lies in one run.
  [[nodiscard]] bool contiguous(Seconds from, Seconds to) const;

private:
  Hertz rate_{1.0};
  std::vector<Run> runs_;
};

} // namespace chronodrome::recording
