// Chronodrome, GPL-3.0-or-later.
#include "recording/trace.h"

#include <algorithm>
#include <cassert>
#include <cmath>

namespace chronodrome::recording {
namespace {

constexpr double kAir = 0.06;   // of the range, above and below the data
constexpr double kFilled = 0.4; // of the axis, by the data: below it the axis follows

/// Samples first ... end - 1 of one run, as they are.
TracePiece samples_of(const Channel& channel, std::size_t first, std::size_t end) {
  TracePiece piece;
  piece.is_samples = true;
  piece.start = channel.time_at(static_cast<double>(first));
  piece.step = period_of(channel.time_base().rate());
  std::vector<double> values(end - first);
  channel.read(first, values);
  piece.points.reserve(values.size());
  for (const double value : values)
    piece.points.push_back({value, value});
  return piece;
}

/// Columns of `width` samples that start at multiples of it, within the run.
TracePiece columns_of(const Channel& channel, const Run& run, std::size_t first, std::size_t end,
                      std::size_t width) {
  const Signal& signal = channel.raw();
  const std::size_t run_end = run.first + run.count;
  const std::size_t low = std::max(run.first, first / width * width);
  const std::size_t high = std::min(run_end, (end + width - 1) / width * width);
  TracePiece piece;
  const Seconds period = period_of(channel.time_base().rate());
  piece.step = period * static_cast<double>(width);
  // A run may begin within a column: its first column is drawn in the place of the whole one.
  const std::size_t grid = low / width * width;
  piece.start = channel.time_at(static_cast<double>(low)) - period * static_cast<double>(low - grid);
  const auto take = [&](std::size_t from, std::size_t to, std::size_t columns) {
    if (to <= from) return;
    const auto found = signal.envelope->columns(*signal.samples, from, to - from, columns);
    for (const MinMax& column : found) {
      const double a = channel.gain * column.min + channel.offset;
      const double b = channel.gain * column.max + channel.offset;
      piece.points.push_back({std::min(a, b), std::max(a, b)});
    }
  };
  const std::size_t whole_from = std::min(high, (low + width - 1) / width * width);
  const std::size_t whole_to = std::max(whole_from, high / width * width);
  take(low, whole_from, 1);
  take(whole_from, whole_to, std::max<std::size_t>(1, (whole_to - whole_from) / width));
  take(whole_to, high, 1);
  return piece;
}

/// Samples of a column at most `share` wide. Wide columns are whole cells of the envelope: nothing but its
/// pyramid is read then.
std::size_t column_width(double share) {
  auto width = static_cast<std::size_t>(std::max(1.0, std::floor(share)));
  for (const std::size_t cell : {Envelope::kFinest * Envelope::kFactor, Envelope::kFinest}) {
    if (width >= 4 * cell) return width / cell * cell;
  }
  return width;
}

/// 1, 2 or 5 times a power of ten, not below `value`.
double round_step(double value) {
  const double power = std::pow(10.0, std::floor(std::log10(value)));
  for (const double digit : {1.0, 2.0, 5.0}) {
    if (digit * power >= value * (1.0 - 1e-9)) return digit * power;
  }
  return 10.0 * power;
}

} // namespace

std::vector<TracePiece> trace_of(const Channel& channel, Seconds from, Seconds to, std::size_t columns) {
  assert(to > from && columns > 0);
  const TimeBase& base = channel.time_base();
  std::vector<TracePiece> pieces;
  if (base.size() == 0) return pieces;
  const std::size_t inside = base.first_at_or_after(from - channel.skew);
  const std::size_t behind = base.first_at_or_after(to - channel.skew);
  const double share = (to - from).value() * base.rate().value() / static_cast<double>(columns);
  const std::size_t width = column_width(share);
  const std::size_t first = inside > 0 ? inside - 1 : 0;
  const std::size_t end = std::min(base.size(), behind + 1);
  for (std::size_t r = base.run_of(std::min(first, base.size() - 1)); r < base.runs().size(); ++r) {
    const Run& run = base.runs()[r];
    if (run.first >= end) break;
    const std::size_t low = std::max(first, run.first);
    const std::size_t high = std::min(end, run.first + run.count);
    if (high <= low) continue;
    pieces.push_back(width < 2 ? samples_of(channel, low, high) : columns_of(channel, run, low, high, width));
  }
  return pieces;
}

std::optional<MinMax> range_of(std::span<const TracePiece> pieces) {
  std::optional<MinMax> range;
  for (const TracePiece& piece : pieces) {
    for (const MinMax& point : piece.points) {
      if (!range) range = point;
      range->min = std::min(range->min, point.min);
      range->max = std::max(range->max, point.max);
    }
  }
  return range;
}

MinMax settled_limits(const MinMax& data, const std::optional<MinMax>& before) {
  const double size = std::max(std::abs(data.min), std::abs(data.max));
  // A line that does not move needs limits too.
  const double range = std::max(data.max - data.min, size > 0.0 ? 1e-6 * size : 1e-6);
  if (before && before->min <= data.min && data.max <= before->max &&
      range >= kFilled * (before->max - before->min)) {
    return *before;
  }
  const double step = round_step(range / 10.0);
  const double air = kAir * range;
  return {std::floor((data.min - air) / step) * step, std::ceil((data.max + air) / step) * step};
}

} // namespace chronodrome::recording
