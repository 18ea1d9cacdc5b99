// Chronodrome, GPL-3.0-or-later.
// Row i of the table stands for the first i activations of `from`, column j for the first j of `to`: the
// least cost of settling exactly those. Only the band of columns that links can reach is kept.
#include "conduction/assignment.h"

#include <algorithm>
#include <cstdint>
#include <limits>

namespace chronodrome::conduction {
namespace {

enum class Step : std::uint8_t { none, skip_from, skip_to, link };

/// Columns from `low` on of one row, and how each was reached.
struct BandRow {
  std::size_t low = 0;
  std::vector<Step> steps;
};

std::size_t count_below(std::span<const double> times, double limit) {
  return static_cast<std::size_t>(std::lower_bound(times.begin(), times.end(), limit) - times.begin());
}

} // namespace

std::vector<std::optional<std::size_t>> assign(std::span<const double> from, std::span<const double> to,
                                               double reach_before, double reach_after, double unpaired,
                                               const LinkCost& cost) {
  constexpr double kNever = std::numeric_limits<double>::infinity();
  const std::size_t n = from.size();
  const std::size_t m = to.size();
  // What lies before the reach of from i is settled before it is its turn; what lies within its reach can be
  // passed over before it is. So row i runs from what from i - 1 cannot reach any more to what from i
  // reaches.
  const auto low_of = [&](std::size_t i) { return i == 0 ? 0 : count_below(to, from[i - 1] - reach_before); };
  const auto high_of = [&](std::size_t i) {
    return i == n ? m : count_below(to, from[i] + reach_after + 1e-12);
  };
  std::vector<BandRow> rows(n + 1);
  std::vector<double> before;
  std::vector<double> now;
  for (std::size_t i = 0; i <= n; ++i) {
    BandRow& row = rows[i];
    row.low = low_of(i);
    const std::size_t size = std::max(high_of(i), row.low) - row.low + 1;
    row.steps.assign(size, Step::none);
    now.assign(size, kNever);
    const auto above = [&](std::size_t j) {
      if (i == 0 || j < rows[i - 1].low || j - rows[i - 1].low >= before.size()) return kNever;
      return before[j - rows[i - 1].low];
    };
    for (std::size_t j = row.low; j < row.low + size; ++j) {
      double best = i == 0 && j == 0 ? 0.0 : kNever;
      Step step = Step::none;
      const auto consider = [&](double total, Step how) {
        if (total < best) best = total, step = how;
      };
      if (i > 0 && j > 0 && above(j - 1) < kNever) {
        if (const auto link = cost(i - 1, j - 1)) consider(above(j - 1) + *link, Step::link);
      }
      if (j > row.low) consider(now[j - 1 - row.low] + unpaired, Step::skip_to);
      consider(above(j) + unpaired, Step::skip_from);
      now[j - row.low] = best;
      row.steps[j - row.low] = step;
    }
    before.swap(now);
  }
  std::vector<std::optional<std::size_t>> partner(n);
  std::size_t i = n;
  std::size_t j = m;
  while (i > 0 || j > 0) {
    switch (rows[i].steps[j - rows[i].low]) {
    case Step::link:
      partner[--i] = --j;
      break;
    case Step::skip_from:
      --i;
      break;
    case Step::skip_to:
      --j;
      break;
    case Step::none:
      return partner; // only the empty corner is reached without a step
    }
  }
  return partner;
}

} // namespace chronodrome::conduction
