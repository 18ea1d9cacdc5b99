// Chronodrome, GPL-3.0-or-later.
#include <algorithm>
#include <cmath>
#include <limits>

#include "session/curve_series.h"

namespace chronodrome::session {

namespace {

// In decades: a control stands far enough left that it is not taken for a tenth of the lowest concentration.
constexpr double kLeadIn = 0.3;
constexpr double kBreak = 0.55;
constexpr double kZero = 0.9;
constexpr double kMargin = 0.3;
constexpr double kTail = 0.5;

// In shares of the range of the points.
constexpr double kBelow = 0.12; // room for marks of what has no value
constexpr double kAbove = 0.07;
constexpr double kAboveBound = 0.12; // for the arrow of a bound
constexpr double kMostBand = 0.5;

struct Ends {
  double low = std::numeric_limits<double>::infinity();
  double high = -std::numeric_limits<double>::infinity();

  void hold(double value) {
    low = std::min(low, value);
    high = std::max(high, value);
  }
  [[nodiscard]] bool is_empty() const { return low > high; }
};

void hold_points(Ends& ends, const CurveSeries& series) {
  for (const PlottedPoint& point : series.points) {
    if (point.value) {
      ends.hold(*point.value - point.sem.value_or(0.0));
      ends.hold(*point.value + point.sem.value_or(0.0));
    }
    if (point.bound) ends.hold(*point.bound);
  }
}

void hold_line(Ends& ends, const CurveSeries& series) {
  for (const LinePiece& piece : series.line) {
    if (!piece.is_inside) continue;
    for (const double response : piece.response)
      ends.hold(response);
  }
  if (series.zero) ends.hold(series.zero->response);
}

} // namespace

ConcentrationAxis concentration_axis(const std::vector<const CurveSeries*>& curves) {
  Ends ends;
  bool has_control = false;
  for (const CurveSeries* series : curves) {
    for (const PlottedPoint& point : series->points) {
      if (point.position) ends.hold(*point.position);
      has_control = has_control || !point.position;
    }
  }
  if (ends.is_empty()) ends.hold(-6.0); // nothing but a control
  ConcentrationAxis axis;
  axis.log_low = ends.low - kLeadIn;
  axis.high = ends.high + kTail;
  axis.low = axis.log_low;
  if (has_control) {
    axis.break_at = ends.low - kBreak;
    axis.zero = ends.low - kZero;
    axis.low = *axis.zero - kMargin;
  }
  for (int power = static_cast<int>(std::floor(axis.log_low)); power <= axis.high; ++power) {
    for (const double mantissa : {1.0, 3.0}) {
      const double position = power + std::log10(mantissa);
      if (position < axis.log_low || position > axis.high) continue;
      // Divided, so that 3 nM is the same double as 3e-9.
      const double concentration =
          power < 0 ? mantissa / std::pow(10.0, -power) : mantissa * std::pow(10.0, power);
      axis.ticks.push_back({position, Molar(concentration), mantissa == 1.0});
    }
  }
  return axis;
}

void set_response_range(CurveView& view) {
  Ends ends;
  hold_points(ends, view.chosen);
  hold_line(ends, view.chosen);
  for (const CurveSeries& other : view.others) {
    hold_points(ends, other);
    hold_line(ends, other);
  }
  if (ends.is_empty()) ends.hold(0.0);
  if (!(ends.high - ends.low > 1e-9 * std::abs(ends.high))) {
    const double half = ends.high == 0.0 ? 1.0 : 0.1 * std::abs(ends.high);
    ends = {ends.low - half, ends.high + half};
  }
  const double most = kMostBand * (ends.high - ends.low);
  Ends with_band = ends;
  for (const LinePiece& piece : view.chosen.line) {
    for (const pharmacology::BandLimits& limits : piece.band) {
      if (!piece.is_inside) continue;
      with_band.hold(std::max(limits.low, ends.low - most));
      with_band.hold(std::min(limits.high, ends.high + most));
    }
  }
  const double span = with_band.high - with_band.low;
  view.response_low = with_band.low - kBelow * span;
  const auto& points = view.chosen.points;
  const bool has_bound = std::any_of(points.begin(), points.end(), [](const PlottedPoint& point) {
    return point.bound && point.is_at_least;
  });
  view.response_high = with_band.high + (has_bound ? kAboveBound : kAbove) * span;
}

} // namespace chronodrome::session
