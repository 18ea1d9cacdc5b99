// Chronodrome, GPL-3.0-or-later.
#include <algorithm>
#include <cmath>

#include "session/trend.h"

namespace chronodrome::session {
namespace {

/// Which column a time belongs to. Requires: it lies in the stretch.
class Raster {
public:
  Raster(Seconds start, Seconds end, std::size_t columns)
      : start_(start), scale_(static_cast<double>(columns) / (end - start).value()), last_(columns - 1) {}

  [[nodiscard]] std::size_t column(Seconds time) const {
    return std::min(last_, static_cast<std::size_t>(std::max(0.0, (time - start_).value() * scale_)));
  }

private:
  Seconds start_;
  double scale_;
  std::size_t last_;
};

void take_excluded(TrendColumn& column, double value) {
  column.excluded_low = column.excluded == 0 ? value : std::min(column.excluded_low, value);
  column.excluded_high = column.excluded == 0 ? value : std::max(column.excluded_high, value);
  ++column.excluded;
}

void take(TrendColumn& column, const TrendPoint& point, bool follows, double middle) {
  if (column.count == 0) {
    column.first = column.low = column.high = point.value;
    column.follows = follows;
  }
  column.low = std::min(column.low, point.value);
  column.high = std::max(column.high, point.value);
  column.last = point.value;
  ++column.count;
  if (point.state != PointState::flagged) return;
  if (!column.flagged || std::abs(point.value - middle) > std::abs(*column.flagged - middle))
    column.flagged = point.value;
}

auto first_at_or_after(const std::vector<TrendPoint>& points, Seconds time) {
  return std::lower_bound(points.begin(), points.end(), time,
                          [](const TrendPoint& point, Seconds at) { return point.time < at; });
}

} // namespace

std::vector<TrendColumn> columns_of(const Trend& trend, Seconds start, Seconds end, std::size_t columns) {
  std::vector<TrendColumn> raster(columns);
  if (columns == 0 || !(end > start)) return raster;
  const Raster at(start, end, columns);
  const double middle = 0.5 * (trend.low + trend.high);
  const auto& points = trend.points;
  for (auto it = first_at_or_after(points, start); it != points.end() && it->time < end; ++it) {
    TrendColumn& column = raster[at.column(it->time)];
    if (it->state == PointState::excluded) {
      take_excluded(column, it->value);
      continue;
    }
    // What comes from a point that is left out, or from outside, is drawn without a line.
    const bool joined =
        it != points.begin() && std::prev(it)->state != PointState::excluded && std::prev(it)->time >= start;
    take(column, *it, it->follows && joined, middle);
  }
  for (auto it = std::lower_bound(trend.blocked.begin(), trend.blocked.end(), start);
       it != trend.blocked.end() && *it < end; ++it)
    ++raster[at.column(*it)].blocked;
  return raster;
}

std::optional<TrendPoint> point_near(const Trend& trend, Seconds time, Seconds within) {
  const auto next = first_at_or_after(trend.points, time);
  std::optional<TrendPoint> nearest;
  Seconds away = within;
  for (const auto& candidate : {next == trend.points.begin() ? trend.points.end() : std::prev(next), next}) {
    if (candidate == trend.points.end()) continue;
    const Seconds distance(std::abs((candidate->time - time).value()));
    if (distance > away) continue;
    away = distance;
    nearest = *candidate;
  }
  return nearest;
}

} // namespace chronodrome::session
