// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <optional>
#include <span>
#include <vector>

#include "intake/csv_time.h"
#include "recording/signal_writer.h"
#include "recording/time_base.h"

namespace chronodrome::intake {

/// Rows that hold a value: `count` of them from `row` on, `every` rows apart.
struct RowRun {
  std::size_t row = 0;
  std::size_t count = 0;
  std::size_t every = 1;
};

/// Collects the values of one column, and in which rows they stand. A channel with a value in every tenth row
/// is one run of a slower rate, not a million of single samples.
class ColumnCollector {
public:
  ColumnCollector(recording::StoreFolder& folder, std::size_t index, std::size_t most_runs);

  /// Values of rows `row`, row + 1 ...; NaN where there is none. `missing`: how many of them are NaN.
  void add(std::size_t row, std::span<const double> values, std::size_t missing);
  /// More stretches than the limit allows.
  [[nodiscard]] bool over_limit() const { return runs_.size() > most_runs_; }
  [[nodiscard]] const recording::SampleSummary& summary() const { return writer_.summary(); }
  [[nodiscard]] const std::vector<RowRun>& runs() const { return runs_; }
  recording::SignalWriter::Finished finish() { return writer_.finish(); }

  /// Times of the collected values. Requires: at least one value.
  [[nodiscard]] recording::TimeBase time_base(const TimeAxis& axis) const;

private:
  void add_run(std::size_t row, std::size_t count);

  recording::SignalWriter writer_;
  std::vector<RowRun> runs_;
  std::size_t most_runs_;
};

} // namespace chronodrome::intake
