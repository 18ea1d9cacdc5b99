// Chronodrome, GPL-3.0-or-later.
#include "intake/csv_rate.h"

#include <algorithm>
#include <cmath>
#include <limits>

namespace chronodrome::intake {
namespace {

constexpr double kRounded = 1.5; // quanta; stamps that are only rounded lie within one of them

struct Point {
  double row = 0.0, stamp = 0.0;
};

/// The stamps of a run, rows and stamps counted from its first stamp.
template <class Each>
void for_each_stamp(std::span<const double> stamps, const AxisRun& run, Each&& each) {
  std::optional<std::size_t> first;
  for (std::size_t i = run.row; i < run.row + run.count; ++i) {
    if (std::isnan(stamps[i])) continue;
    if (!first) first = i;
    each(Point{static_cast<double>(i - *first), stamps[i] - stamps[*first]});
  }
}

/// Corners of the stamps' convex hull, from left to right: above (`side` 1) or below (-1) all of them.
class HullSide {
public:
  explicit HullSide(double side) : side_(side) {}
  void add(const Point& point) {
    while (corners_.size() > 1 && !bends(corners_[corners_.size() - 2], corners_.back(), point))
      corners_.pop_back();
    corners_.push_back(point);
  }
  [[nodiscard]] const std::vector<Point>& corners() const { return corners_; }
  /// How far the hull reaches on its side from the line through the first stamp.
  [[nodiscard]] double reach(double step) const {
    double most = -std::numeric_limits<double>::infinity();
    for (const Point& corner : corners_)
      most = std::max(most, side_ * (corner.stamp - step * corner.row));
    return most;
  }

private:
  [[nodiscard]] bool bends(const Point& a, const Point& b, const Point& c) const {
    const double turn = (b.row - a.row) * (c.stamp - a.stamp) - (b.stamp - a.stamp) * (c.row - a.row);
    return side_ * turn < 0.0;
  }
  double side_;
  std::vector<Point> corners_;
};

struct Hull {
  HullSide above{1.0}, below{-1.0};
  [[nodiscard]] double width(double step) const { return above.reach(step) + below.reach(step); }
};

struct Edge {
  double slope = 0.0, rows = 0.0;
};

/// Where the width of the hulls is smallest: the median of their edges' slopes, each counted by its rows
/// (the slope of the width changes by an edge's rows where the line passes it).
std::optional<double> narrowest(const std::vector<Hull>& hulls) {
  std::vector<Edge> edges;
  double rows = 0.0;
  for (const Hull& hull : hulls) {
    for (const HullSide* side : {&hull.above, &hull.below}) {
      for (std::size_t i = 1; i < side->corners().size(); ++i) {
        const Point &from = side->corners()[i - 1], &to = side->corners()[i];
        edges.push_back({(to.stamp - from.stamp) / (to.row - from.row), to.row - from.row});
        rows += to.row - from.row;
      }
    }
  }
  std::sort(edges.begin(), edges.end(), [](const Edge& a, const Edge& b) { return a.slope < b.slope; });
  double passed = 0.0;
  for (std::size_t i = 0; i < edges.size(); ++i) {
    passed += edges[i].rows;
    if (2.0 * passed > rows) return edges[i].slope;
    if (2.0 * passed == rows) return 0.5 * (edges[i].slope + edges[i + 1].slope); // as good anywhere between
  }
  return std::nullopt;
}

std::optional<double> minimax_step(std::span<const double> stamps, const std::vector<AxisRun>& runs,
                                   double quantum) {
  std::vector<Hull> hulls;
  for (const AxisRun& run : runs) {
    Hull hull;
    for_each_stamp(stamps, run, [&](const Point& point) {
      hull.above.add(point);
      hull.below.add(point);
    });
    if (!hull.above.corners().empty()) hulls.push_back(std::move(hull));
  }
  const auto step = narrowest(hulls);
  if (!step) return std::nullopt;
  for (const Hull& hull : hulls) {
    if (hull.width(*step) > kRounded * quantum) return std::nullopt; // more than rounding
  }
  return step;
}

/// Least squares with one slope for all runs, through the rows where the stamp changes: there it is true.
std::optional<double> step_of_changes(std::span<const double> stamps, const std::vector<AxisRun>& runs) {
  double together = 0.0, rows = 0.0;
  for (const AxisRun& run : runs) {
    const auto for_each_change = [&](auto&& each) {
      double last = 0.0;
      for_each_stamp(stamps, run, [&](const Point& point) {
        if (point.stamp != last) each(point);
        last = point.stamp;
      });
    };
    Point mean;
    double count = 0.0;
    for_each_change([&](const Point& point) {
      count += 1.0;
      mean.row += (point.row - mean.row) / count;
      mean.stamp += (point.stamp - mean.stamp) / count;
    });
    for_each_change([&](const Point& point) {
      together += (point.row - mean.row) * (point.stamp - mean.stamp);
      rows += (point.row - mean.row) * (point.row - mean.row);
    });
  }
  return rows > 0.0 && together > 0.0 ? std::optional(together / rows) : std::nullopt;
}

std::optional<double> step_of_ends(std::span<const double> stamps, const std::vector<AxisRun>& runs) {
  double rows = 0.0, time = 0.0;
  for (const AxisRun& run : runs) {
    Point last;
    for_each_stamp(stamps, run, [&](const Point& point) { last = point; });
    rows += last.row;
    time += last.stamp;
  }
  return rows > 0.0 && time > 0.0 ? std::optional(time / rows) : std::nullopt;
}

} // namespace

std::optional<double> usual_step(std::span<const double> stamps, const std::vector<AxisRun>& runs,
                                 double quantum) {
  std::optional<double> step;
  if (quantum > 0.0) step = minimax_step(stamps, runs, quantum);
  if (quantum > 0.0 && (!step || !(*step > 0.0))) step = step_of_changes(stamps, runs);
  return step ? step : step_of_ends(stamps, runs);
}

} // namespace chronodrome::intake
