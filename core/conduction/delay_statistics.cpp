// Chronodrome, GPL-3.0-or-later.
#include "conduction/delay_statistics.h"

#include <algorithm>
#include <cmath>

#include "numerics/distributions.h"
#include "numerics/robust.h"

namespace chronodrome::conduction {
namespace {

constexpr double kFewestIndependent = 1.5; // delays that count as independent, for an interval

} // namespace

DelayStatistics statistics_of(std::span<const double> delays) {
  DelayStatistics found;
  found.n = delays.size();
  if (delays.empty()) return found;
  found.n_independent = numerics::effective_n(delays);
  found.mean = Seconds(numerics::mean(delays));
  found.median = Seconds(numerics::median(delays));
  found.mad_sd = Seconds(numerics::mad_sd(delays));
  const auto [shortest, longest] = std::minmax_element(delays.begin(), delays.end());
  found.shortest = Seconds(*shortest);
  found.longest = Seconds(*longest);
  if (delays.size() < 2) return found;
  found.sd = Seconds(numerics::sd(delays));
  found.sem = found.sd / std::sqrt(found.n_independent);
  if (found.n_independent > kFewestIndependent)
    found.half_width = numerics::student_t_quantile(0.975, found.n_independent - 1.0) * found.sem;
  return found;
}

} // namespace chronodrome::conduction
