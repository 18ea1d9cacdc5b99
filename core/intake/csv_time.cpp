// Chronodrome, GPL-3.0-or-later.
#include "intake/csv_time.h"

#include <algorithm>
#include <cmath>
#include <limits>

#include "intake/csv_rate.h"

namespace chronodrome::intake {
namespace {

constexpr std::size_t kLooked = 200'000; // steps looked at: enough for a median, few enough to be quick
constexpr double kEven = 0.005;          // steps within 0.5 % of their median are even (methods, 1.2)
constexpr double kGap = 1.5;             // a longer step is a gap (methods, 1.2)

double median_of(std::vector<double>& values) {
  const auto middle = values.begin() + static_cast<std::ptrdiff_t>(values.size() / 2);
  std::nth_element(values.begin(), middle, values.end());
  return *middle;
}

/// Differences over `rows` rows, from places spread evenly over the table.
std::vector<double> differences(std::span<const double> stamps, std::size_t rows) {
  std::vector<double> found;
  if (stamps.size() <= rows) return found;
  const std::size_t places = stamps.size() - rows;
  const std::size_t stride = std::max<std::size_t>(1, places / kLooked);
  for (std::size_t i = 0; i < places; i += stride) {
    const double difference = stamps[i + rows] - stamps[i];
    if (!std::isnan(difference)) found.push_back(difference);
  }
  return found;
}

/// Doubles hold a stamp only so well: differences of so much mean nothing.
double noise_of(std::span<const double> stamps) {
  double largest = 0.0;
  for (const double stamp : {stamps.front(), stamps.back()})
    largest = std::max(largest, std::isnan(stamp) ? 0.0 : std::abs(stamp));
  return 8.0 * std::numeric_limits<double>::epsilon() * largest;
}

/// Steps of 1, 1, 2, 1, 1, 2 ms: a rate that does not divide the rounding makes longer steps at even
/// distances, one row apart at most. Lost samples come as they come.
bool longer_steps_come_evenly(std::span<const double> stamps, double step, double quantum, double noise) {
  const std::span<const double> looked = stamps.first(std::min(stamps.size(), kLooked));
  std::vector<double> distances;
  std::size_t last = 0;
  for (std::size_t i = 1; i < looked.size(); ++i) {
    const double longer = looked[i] - looked[i - 1] - step;
    if (!(longer > (kGap - 1.0) * step + noise)) continue;
    if (longer > 1.01 * quantum + noise) continue; // a gap, not rounding
    if (last > 0) distances.push_back(static_cast<double>(i - last));
    last = i;
  }
  if (distances.size() < 2) return false;
  std::vector<double> sorted = distances;
  const double usual = median_of(sorted);
  const auto even = std::count_if(distances.begin(), distances.end(),
                                  [&](double distance) { return std::abs(distance - usual) <= 1.0; });
  return 20 * even >= 19 * static_cast<std::ptrdiff_t>(distances.size()); // a true gap breaks one of them
}

struct Look {
  double median = 0.0;
  std::size_t steps = 0, zeros = 0, uneven = 0, jumps = 0;
  double smallest = std::numeric_limits<double>::infinity();
};

Look look_at(std::vector<double> steps, double noise) {
  Look look;
  look.steps = steps.size();
  look.median = median_of(steps);
  for (const double step : steps) {
    if (step <= noise) {
      ++look.zeros;
      continue;
    }
    look.smallest = std::min(look.smallest, step);
    if (step > kGap * look.median + noise) {
      ++look.jumps;
    } else if (std::abs(step - look.median) > kEven * look.median + noise) {
      ++look.uneven;
    }
  }
  return look;
}

/// The usual step of rounded stamps: over so many rows that their rounding no longer matters.
double step_over_many(std::span<const double> stamps, double quantum) {
  double step = (stamps.back() - stamps.front()) / static_cast<double>(stamps.size() - 1);
  for (std::size_t rows = 1; rows <= (stamps.size() - 1) / 2 || rows == 1; rows *= 2) {
    std::vector<double> spans = differences(stamps, rows);
    if (spans.empty()) break;
    const double span = median_of(spans);
    if (span > 0.0) step = span / static_cast<double>(rows);
    if (span >= 200.0 * quantum) break; // known to 0.5 %
  }
  return step;
}

/// The same rows again, without the ones that have no stamp at either end.
std::span<const double> with_stamps(std::span<const double> stamps) {
  while (!stamps.empty() && std::isnan(stamps.front()))
    stamps = stamps.subspan(1);
  while (!stamps.empty() && std::isnan(stamps.back()))
    stamps = stamps.first(stamps.size() - 1);
  return stamps;
}

/// Mean distance of a run's stamps from an axis of `period` that starts at `start`.
double mean_offset(std::span<const double> stamps, const AxisRun& run, double unit, double start,
                   double period) {
  double sum = 0.0;
  std::size_t count = 0;
  for (std::size_t i = 0; i < run.count; ++i) {
    const double stamp = stamps[run.row + i];
    if (std::isnan(stamp)) continue;
    sum += stamp * unit - start - static_cast<double>(i) * period;
    ++count;
  }
  return count == 0 ? 0.0 : sum / static_cast<double>(count);
}

std::vector<AxisRun> split_at_gaps(std::span<const double> stamps, const StepFound& found) {
  std::vector<AxisRun> runs = {{0, 0, 0.0}};
  const double allowed = (kGap - 1.0) * found.step + found.quantum + noise_of(stamps);
  std::size_t last = 0; // row of the last stamp
  for (std::size_t i = 0; i < stamps.size(); ++i) {
    if (std::isnan(stamps[i])) continue;
    const double late = stamps[i] - stamps[last] - static_cast<double>(i - last) * found.step;
    if (i > last && late > allowed) {
      runs.back().count = i - runs.back().row;
      runs.push_back({i, 0, 0.0});
    }
    last = i;
  }
  runs.back().count = stamps.size() - runs.back().row;
  return runs;
}

/// First and last stamp of a run, by row.
struct Ends {
  std::size_t first = 0, last = 0;
};
Ends ends_of(std::span<const double> stamps, const AxisRun& run) {
  Ends ends{run.row, run.row + run.count - 1};
  while (ends.first < ends.last && std::isnan(stamps[ends.first]))
    ++ends.first;
  while (ends.last > ends.first && std::isnan(stamps[ends.last]))
    --ends.last;
  return ends;
}

std::optional<Hertz> measured_rate(std::span<const double> stamps, const std::vector<AxisRun>& runs,
                                   double quantum, double unit) {
  const auto step = usual_step(stamps, runs, quantum);
  if (!step) return std::nullopt;
  const double rate = 1.0 / (*step * unit);
  // A whole number, but for the rounding of doubles.
  return Hertz(std::abs(rate - std::round(rate)) < 1e-12 * rate ? std::round(rate) : rate);
}

void place_runs(std::span<const double> stamps, TimeAxis& axis, double unit) {
  const double period = 1.0 / axis.rate.value();
  const double bias = mean_offset(stamps, axis.runs.front(), unit, axis.zero, period);
  double end = 0.0;
  for (std::size_t k = 0; k < axis.runs.size(); ++k) {
    AxisRun& run = axis.runs[k];
    if (k > 0) {
      const Ends ends = ends_of(stamps, run);
      run.start = axis.quantum > 0.0 ? mean_offset(stamps, run, unit, axis.zero, period) - bias
                                     : stamps[ends.first] * unit - axis.zero -
                                           static_cast<double>(ends.first - run.row) * period;
      run.start = std::max(run.start, end + 0.5 * period); // a gap stays one
    }
    end = run.start + static_cast<double>(run.count) * period;
  }
}

void measure_residuals(std::span<const double> stamps, TimeAxis& axis, double unit) {
  const double period = 1.0 / axis.rate.value();
  double sum = 0.0, squares = 0.0, count = 0.0;
  for (const AxisRun& run : axis.runs) {
    for (std::size_t i = 0; i < run.count; ++i) {
      const double stamp = stamps[run.row + i];
      if (std::isnan(stamp)) continue;
      const double off = stamp * unit - axis.zero - run.start - static_cast<double>(i) * period;
      if (std::abs(off) > axis.residual_max) {
        axis.residual_max = std::abs(off);
        axis.worst_row = run.row + i;
      }
      sum += off;
      squares += off * off;
      count += 1.0;
    }
  }
  const double mean = sum / count;
  axis.residual_sd = std::sqrt(std::max(0.0, squares / count - mean * mean));
}

} // namespace

std::optional<StepFound> find_step(std::span<const double> all, std::optional<double> printed) {
  const std::span<const double> stamps = with_stamps(all);
  if (stamps.size() < 2) return std::nullopt;
  const double noise = noise_of(stamps);
  if (!(stamps.back() - stamps.front() > noise)) return std::nullopt;
  const std::vector<double> steps = differences(stamps, 1);
  if (steps.empty()) return StepFound{step_over_many(stamps, 0.0), 0.0};
  const Look look = look_at(steps, noise);
  const double quantum = printed.value_or(std::isfinite(look.smallest) ? look.smallest : 0.0);
  bool rounded = look.zeros > 0 || 100 * look.uneven > look.steps;
  if (!rounded && look.jumps > 0) rounded = longer_steps_come_evenly(stamps, look.median, quantum, noise);
  if (!rounded) return StepFound{look.median, 0.0};
  return StepFound{step_over_many(stamps, quantum), quantum};
}

Result<TimeAxis> find_axis(std::span<const double> stamps, const StepFound& found, double unit,
                           std::optional<Hertz> rate, const std::string& path) {
  TimeAxis axis;
  axis.runs = split_at_gaps(stamps, found);
  axis.quantum = found.quantum * unit;
  axis.measured = measured_rate(stamps, axis.runs, found.quantum, unit);
  if (!rate && !axis.measured)
    return Error{ErrorCode::not_enough_data,
                 path,
                 {},
                 "no two rows follow each other in time, so that there is no rate",
                 "set recording.csv.rate_hz"};
  axis.rate = rate ? *rate : *axis.measured;
  const Ends ends = ends_of(stamps, axis.runs.front());
  axis.zero = stamps[ends.first] * unit - static_cast<double>(ends.first) / axis.rate.value();
  place_runs(stamps, axis, unit);
  measure_residuals(stamps, axis, unit);
  return axis;
}

TimeAxis plain_axis(std::size_t rows, Hertz rate) {
  TimeAxis axis;
  axis.rate = rate;
  if (rows > 0) axis.runs.push_back({0, rows, 0.0});
  return axis;
}

} // namespace chronodrome::intake
