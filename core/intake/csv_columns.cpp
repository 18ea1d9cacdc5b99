// Chronodrome, GPL-3.0-or-later.
#include "intake/csv_columns.h"

#include <algorithm>
#include <cmath>

namespace chronodrome::intake {

ColumnCollector::ColumnCollector(recording::StoreFolder& folder, std::size_t index, std::size_t most_runs)
    : writer_(folder, index), most_runs_(most_runs) {}

void ColumnCollector::add(std::size_t row, std::span<const double> values, std::size_t missing) {
  if (missing == values.size()) return;
  if (missing == 0) {
    writer_.add(values);
    add_run(row, values.size());
    return;
  }
  std::vector<double> present;
  present.reserve(values.size() - missing);
  for (std::size_t i = 0; i < values.size();) {
    std::size_t end = i;
    while (end < values.size() && !std::isnan(values[end]))
      present.push_back(values[end++]);
    if (end > i && !over_limit()) add_run(row + i, end - i);
    i = std::max(end, i + 1);
  }
  writer_.add(present);
}

void ColumnCollector::add_run(std::size_t row, std::size_t count) {
  if (!runs_.empty()) {
    RowRun& last = runs_.back();
    const std::size_t distance = row - (last.row + (last.count - 1) * last.every);
    if (distance == 1 && last.every == 1) {
      last.count += count;
      return;
    }
    // Only the very first values make a slower rate: a lone sample between gaps stays what it is.
    const bool may_begin = runs_.size() == 1 && last.count == 1 && count == 1;
    if (count == 1 && (may_begin || distance == last.every)) {
      last.every = distance;
      last.count += 1;
      return;
    }
    if (last.every > 1 && runs_.size() == 1) { // it was no slower rate after all
      const RowRun sparse = last;
      runs_.clear();
      for (std::size_t i = 0; i < std::min(sparse.count, most_runs_ + 1); ++i)
        runs_.push_back({sparse.row + i * sparse.every, 1, 1});
      add_run(row, count);
      return;
    }
  }
  runs_.push_back({row, count, 1});
}

recording::TimeBase ColumnCollector::time_base(const TimeAxis& axis) const {
  // Two values are no rate.
  const bool sparse = runs_.front().every > 1 && runs_.front().count > 2;
  const std::size_t every = sparse ? runs_.front().every : 1;
  const double rate = axis.rate.value();
  std::vector<recording::Run> runs;
  std::size_t first = 0;
  auto stretch = axis.runs.begin();
  for (const RowRun& run : runs_) {
    for (std::size_t done = 0; done < run.count;) {
      const std::size_t row = run.row + done * run.every;
      while (row >= stretch->row + stretch->count)
        ++stretch;
      const std::size_t room = stretch->row + stretch->count - row;
      const std::size_t within = std::min(run.count - done, (room + run.every - 1) / run.every);
      const std::size_t count = run.every == every ? within : 1;
      const double start = stretch->start + static_cast<double>(row - stretch->row) / rate;
      runs.push_back({first, count, Seconds(start)});
      first += count;
      done += count;
    }
  }
  return {Hertz(rate / static_cast<double>(every)), std::move(runs)};
}

} // namespace chronodrome::intake
