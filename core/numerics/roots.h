// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <functional>

namespace chronodrome::numerics {

struct Root {
  double x = 0.0;
  double value = 0.0; ///< f(x)
  int evaluations = 0;
  bool found = false; ///< false: no sign change between the ends, or f was not a number
};

/// A zero of `f` between `a` and `b`, where f(a) and f(b) have opposite signs (or one is 0), known to within
/// `tolerance` + 4 rounding errors of x. Inverse quadratic and secant steps, safeguarded by bisection: never
/// more than about the square of the evaluations that bisection needs, usually 5 to 10.
/// Requires: tolerance >= 0. Accuracy: f should be continuous; at a jump the jump's place is returned.
/// Source: Brent RP (1973) Algorithms for Minimization without Derivatives, chapter 4.
Root bracketed_root(const std::function<double(double)>& f, double a, double b, double tolerance);

struct Minimum {
  double x = 0.0;
  double value = 0.0;
  int evaluations = 0;
};

/// A local minimum of `f` between `a` and `b` (a < b), to within about `tolerance` in x: parabolic steps,
/// safeguarded by golden sections. Values that are not numbers count as larger than all others.
/// Accuracy: x is not known better than the square root of the rounding error of f allows (relative 1e-8).
/// Source: Brent (1973), chapter 5.
Minimum minimise(const std::function<double(double)>& f, double a, double b, double tolerance);

} // namespace chronodrome::numerics
