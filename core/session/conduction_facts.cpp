// Chronodrome, GPL-3.0-or-later.
#include "session/conduction_facts.h"

#include <cmath>

#include "base/number_text.h"
#include "numerics/distributions.h"
#include "numerics/robust.h"

namespace chronodrome::session {
namespace {

using conduction::DelayState;

/// Half width of the 95 % interval of a median of correlated beats: that of the mean, times sqrt(pi / 2).
double half_width(const std::vector<double>& values) {
  const double n = numerics::effective_n(values);
  if (n <= 1.5) return std::nan("");
  return std::sqrt(std::acos(-1.0) / 2.0) * numerics::student_t_quantile(0.975, n - 1.0) *
         numerics::sem_of_correlated(values);
}

std::optional<double> if_finite(double value) {
  return std::isfinite(value) ? std::optional(value) : std::nullopt;
}

} // namespace

std::vector<ConductionFact> conduction_facts(const conduction::PathwayDelays& pathway,
                                             std::optional<Metres> distance) {
  std::vector<double> delays_ms;
  std::size_t blocked = 0;
  for (const auto& row : pathway.rows) {
    if (row.state == DelayState::conducted && row.delay) delays_ms.push_back(in_milliseconds(*row.delay));
    if (row.state == DelayState::blocked && !row.answer_unseen) ++blocked;
  }
  std::vector<ConductionFact> facts;
  const std::size_t n = delays_ms.size();
  if (n == 0) {
    facts.push_back({pathway.pathway, "delay", "ms", {}, {}, {}, 0, "no conducted beat"});
    return facts;
  }
  if (!pathway.within_chamber) {
    facts.push_back({pathway.pathway,
                     "control_delay",
                     "ms",
                     in_milliseconds(pathway.control_delay),
                     {},
                     {},
                     0,
                     "what pairing took as the usual delay"});
  }
  const double median = numerics::median(delays_ms);
  const double half = half_width(delays_ms);
  facts.push_back(
      {pathway.pathway, "delay", "ms", median, if_finite(median - half), if_finite(median + half), n,
       "median of conducted beats;sd_ms=" + number_text(n > 1 ? numerics::sd(delays_ms) : 0.0, 6)});
  if (!pathway.within_chamber) {
    const double share = static_cast<double>(n) / static_cast<double>(n + blocked);
    facts.push_back({pathway.pathway, "conducted", "1", share, {}, {}, n + blocked, ""});
  }
  if (distance && median != 0.0) {
    const double mm = in_millimetres(*distance);
    // The interval is that of the slowness (delay over distance), turned over; it is open where it includes
    // 0.
    const bool resolved = std::abs(median) > half;
    facts.push_back({pathway.pathway, "velocity", "m/s", mm / std::abs(median),
                     if_finite(mm / (std::abs(median) + half)),
                     resolved ? if_finite(mm / (std::abs(median) - half)) : std::nullopt, n,
                     "apparent, along the line between the electrodes;distance_mm=" + number_text(mm, 6)});
  }
  return facts;
}

} // namespace chronodrome::session
