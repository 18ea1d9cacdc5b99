// Chronodrome, GPL-3.0-or-later.
#include "session/trend_range.h"

#include <algorithm>
#include <cmath>

#include "numerics/robust.h"

namespace chronodrome::session {
namespace {

constexpr std::size_t kBlock = 9;         // points whose median stands for them: four may be wrong
constexpr double kExtremeShare = 1.0 / 3; // of the range, that single extremes may add at either end
constexpr double kLeastShare = 0.1;       // of the middle value, that the axis spans at least
constexpr double kMargin = 0.06;          // of the range, left free at either end

void widen(AxisRange& range, double value) {
  range.low = std::min(range.low, value);
  range.high = std::max(range.high, value);
}

/// Extremes of what lasts; of everything where there are too few points for a block.
AxisRange lasting(const std::vector<double>& values) {
  AxisRange range{values.front(), values.front()};
  if (values.size() < kBlock) {
    for (const double value : values)
      widen(range, value);
    return range;
  }
  const std::span<const double> all(values);
  range.low = range.high = numerics::median(all.first(kBlock));
  for (std::size_t at = 0; at + kBlock <= all.size(); at += kBlock)
    widen(range, numerics::median(all.subspan(at, kBlock)));
  widen(range, numerics::median(all.last(kBlock)));
  return range;
}

} // namespace

AxisRange axis_range(std::span<const TrendPoint> points, std::span<const double> values) {
  std::vector<double> counted;
  counted.reserve(points.size());
  for (const auto& point : points) {
    if (point.state != PointState::excluded && std::isfinite(point.value)) counted.push_back(point.value);
  }
  if (counted.empty() && values.empty()) return {};
  AxisRange range = counted.empty() ? AxisRange{values.front(), values.front()} : lasting(counted);
  for (const double value : values)
    widen(range, value);
  const double middle = 0.5 * (range.low + range.high);
  const double least = std::max(kLeastShare * std::abs(middle), 1e-9);
  if (range.high - range.low < least) range = {middle - 0.5 * least, middle + 0.5 * least};
  const double fence = kExtremeShare * (range.high - range.low);
  AxisRange wide = range;
  for (const double value : counted) {
    if (value >= range.low - fence && value <= range.high + fence) widen(wide, value);
  }
  const double margin = kMargin * (wide.high - wide.low);
  return {wide.low - margin, wide.high + margin};
}

std::vector<double> response_values(const SessionResult& result, const std::string& measure) {
  std::vector<double> values;
  for (const auto& row : result.responses.rows) {
    if (row.measure == measure && row.value && std::isfinite(*row.value)) values.push_back(*row.value);
  }
  return values;
}

} // namespace chronodrome::session
