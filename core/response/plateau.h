// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <array>
#include <optional>

namespace chronodrome::response {

/// Whether a value has stopped moving, from its means over three equal windows one after another.
struct Plateau {
  double drift = 0.0; ///< last mean - the one before
  bool steady = false;
  /// Where it is heading and how far that is from the last mean, if it slows down as one exponential does.
  std::optional<double> asymptote, remaining;
};

/// Steady if |drift| <= tolerance. The asymptote is (m0 m2 - m1^2)/(m0 + m2 - 2 m1).
/// Requires: finite means; tolerance >= 0.
/// Accuracy: the asymptote is exact for means (or medians) of one exponential.
/// Source: Aitken AC (1926) Proc R Soc Edinb 46:289-305 (from memory).
Plateau assess_plateau(const std::array<double, 3>& means, double tolerance);

} // namespace chronodrome::response
