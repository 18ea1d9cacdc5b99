// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cmath>
#include <cstddef>
#include <span>
#include <vector>

#include "activation/activation.h"

namespace chronodrome::test_support {

/// Marks against true times, one to one in order of time. Terms of ANSI/AAMI EC57.
struct Matching {
  std::size_t hits = 0, missed = 0, false_beats = 0;
  std::vector<double> errors_s; ///< mark - truth of each hit
  [[nodiscard]] double sensitivity() const {
    return static_cast<double>(hits) / static_cast<double>(hits + missed);
  }
  [[nodiscard]] double predictivity() const {
    return hits + false_beats == 0 ? 1.0
                                   : static_cast<double>(hits) / static_cast<double>(hits + false_beats);
  }
};

/// Both lists rising and sparse against the window, so that walking along both is the optimal matching.
inline Matching match(std::span<const activation::Activation> marks, std::span<const double> truth,
                      double window_s) {
  Matching found;
  std::size_t m = 0;
  std::size_t t = 0;
  while (m < marks.size() || t < truth.size()) {
    const bool have_both = m < marks.size() && t < truth.size();
    const double error = have_both ? marks[m].time.value() - truth[t] : 0.0;
    if (have_both && std::abs(error) <= window_s) {
      ++found.hits;
      found.errors_s.push_back(error);
      ++m, ++t;
    } else if (t >= truth.size() || (have_both && error < 0.0)) {
      ++found.false_beats;
      ++m;
    } else {
      ++found.missed;
      ++t;
    }
  }
  return found;
}

} // namespace chronodrome::test_support
