// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <functional>
#include <optional>
#include <span>
#include <string>
#include <vector>

#include "base/quantity.h"
#include "base/result.h"

namespace chronodrome::intake {

/// What the steps of a time column are like, in the unit of the column.
struct StepFound {
  double step = 0.0;    ///< usual step from row to row, gaps left out
  double quantum = 0.0; ///< to which the stamps are rounded; 0: they are not
};

/// `stamps`: one a row, not falling; NaN where a row has none. `printed`: one unit of the last digit that the
/// file prints, if known. Nothing if no two rows have stamps or all are equal.
std::optional<StepFound> find_step(std::span<const double> stamps, std::optional<double> printed);

/// Rows that follow each other without a gap.
struct AxisRun {
  std::size_t row = 0;
  std::size_t count = 0;
  double start = 0.0; ///< seconds since the first stamp
};

/// When each row was taken.
struct TimeAxis {
  Hertz rate{1.0};
  std::optional<Hertz> measured; ///< from the stamps, where they tell one; `rate` unless that was set
  double zero = 0.0;             ///< seconds: the first stamp
  std::vector<AxisRun> runs;
  double quantum = 0.0;      ///< seconds; 0: the stamps are not rounded
  double residual_max = 0.0; ///< of the stamps about the axis, seconds
  double residual_sd = 0.0;
  std::size_t worst_row = 0;
};

/// The axis rebuilt from the count of rows: a gap where a step exceeds 1.5 usual steps (and the rounding of
/// the stamps), and between gaps one rate for the whole table, see usual_step(). Runs behind a gap are placed
/// so that their stamps scatter about the axis as those of the first run do. `unit`: seconds per unit of the
/// stamps. `rate`: overrides the measured one. Errors: not_enough_data.
Result<TimeAxis> find_axis(std::span<const double> stamps, const StepFound& found, double unit,
                           std::optional<Hertz> rate, const std::string& path);

/// Rows at a constant rate, without stamps.
TimeAxis plain_axis(std::size_t rows, Hertz rate);

} // namespace chronodrome::intake
