// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <span>
#include <vector>

#include "intake/csv_time.h"

namespace chronodrome::intake {

/// Usual step from row to row, in the unit of the stamps; `stamps`, `runs` as in find_axis(), `quantum` the
/// rounding of the stamps (0: none). Nothing if no two rows of a run differ in time.
///
/// Stamps that are not rounded: (last - first) / (N - 1), all runs together. Rounded ones: the slope of the
/// straight line whose greatest distance from the stamps is smallest, so that a stamp kept for a thousand
/// rows does not move it; the rate of a clock that shows whole seconds comes out exactly from its full
/// seconds. Stamps that scatter by more than their rounding: least squares through the rows where the stamp
/// changes.
/// Accuracy: for rounded stamps the period is known to quantum / duration at worst; exact where the rows
/// between changes repeat.
/// Source: the minimax line lies between parallel edges of the convex hull (computational geometry, common
/// practice).
std::optional<double> usual_step(std::span<const double> stamps, const std::vector<AxisRun>& runs,
                                 double quantum);

} // namespace chronodrome::intake
