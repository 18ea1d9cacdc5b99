// Chronodrome, GPL-3.0-or-later.
#include "conduction/velocity.h"

#include <algorithm>
#include <cmath>
#include <vector>

#include "numerics/distributions.h"
#include "numerics/robust.h"

namespace chronodrome::conduction {
namespace {

/// Interval of 1 / slowness from that of the slowness, for a slowness above 0.
void set_bounds(ApparentVelocity& velocity, double low_slowness, double high_slowness) {
  velocity.low = MetresPerSecond(1.0 / high_slowness);
  if (low_slowness > 0.0) {
    velocity.high = MetresPerSecond(1.0 / low_slowness);
  } else {
    velocity.is_resolved = false;
  }
}

Error wrong(ErrorCode code, const char* what, const char* remedy) {
  return Error{code, "", {}, what, remedy};
}

} // namespace

Result<ApparentVelocity> velocity_between(Metres distance, Seconds delay, Seconds half_width) {
  if (!(distance > Metres(0.0)))
    return wrong(ErrorCode::bad_usage, "a velocity needs a distance above 0",
                 "enter the distance of the pathway");
  if (delay == Seconds(0.0)) {
    return wrong(ErrorCode::not_enough_data, "both electrodes are activated at the same time",
                 "the wave runs across the line between them, or the electrodes are too near to each other");
  }
  ApparentVelocity velocity;
  const double slowness = std::abs(delay.value()) / distance.value();
  const double half = half_width.value() / distance.value();
  velocity.velocity = MetresPerSecond(1.0 / slowness);
  set_bounds(velocity, slowness - half, slowness + half);
  return velocity;
}

Result<LineFit> fit_line(std::span<const double> positions, std::span<const double> times) {
  if (positions.size() != times.size())
    return wrong(ErrorCode::bad_usage, "there are not as many times as electrodes",
                 "give one time for each electrode");
  const std::size_t n = positions.size();
  const double mean_d = n > 0 ? numerics::mean(positions) : 0.0;
  double spread = 0.0;
  for (const double d : positions)
    spread += (d - mean_d) * (d - mean_d);
  if (n < 3 || !(spread > 0.0)) {
    return wrong(ErrorCode::not_enough_data, "a line needs three electrodes at different places",
                 "use the delay over a known distance instead");
  }
  const double mean_t = numerics::mean(times);
  double cross = 0.0;
  double total = 0.0;
  for (std::size_t k = 0; k < n; ++k) {
    cross += (positions[k] - mean_d) * (times[k] - mean_t);
    total += (times[k] - mean_t) * (times[k] - mean_t);
  }
  LineFit fit;
  fit.slowness = cross / spread;
  if (fit.slowness == 0.0) {
    return wrong(ErrorCode::not_enough_data, "the times do not change along the line",
                 "the wave runs across it, or breaks through beneath it; no velocity can be given");
  }
  fit.intercept = Seconds(mean_t - fit.slowness * mean_d);
  double residual = 0.0;
  std::vector<double> slopes;
  for (std::size_t k = 0; k < n; ++k) {
    const double r = times[k] - fit.intercept.value() - fit.slowness * positions[k];
    residual += r * r;
    for (std::size_t m = 0; m < k; ++m) {
      if (positions[k] != positions[m])
        slopes.push_back((times[k] - times[m]) / (positions[k] - positions[m]));
    }
  }
  const double df = static_cast<double>(n) - 2.0;
  fit.residual_sd = Seconds(std::sqrt(residual / df));
  fit.slowness_se = fit.residual_sd.value() / std::sqrt(spread);
  fit.r_squared = total > 0.0 ? 1.0 - residual / total : 0.0;
  const double half = numerics::student_t_quantile(0.975, df) * fit.slowness_se;
  const double size = std::abs(fit.slowness);
  fit.velocity.velocity = MetresPerSecond(1.0 / size);
  set_bounds(fit.velocity, size - half, size + half);
  fit.velocity_se = MetresPerSecond(fit.slowness_se / (size * size));
  fit.robust_velocity = MetresPerSecond(1.0 / std::abs(numerics::median(slopes)));
  return fit;
}

} // namespace chronodrome::conduction
