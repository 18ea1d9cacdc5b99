// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <span>
#include <string>
#include <vector>

#include "session/trend.h"

namespace chronodrome::session {

struct AxisRange {
  double low = 0.0;
  double high = 1.0;
};

/// Range of an axis for points and response values, as trend_of() states it; low < high always.
AxisRange axis_range(std::span<const TrendPoint> points, std::span<const double> values);

/// Values of all responses of a measure, in the order of the rows.
std::vector<double> response_values(const SessionResult& result, const std::string& measure);

} // namespace chronodrome::session
