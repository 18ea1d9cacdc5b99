// Chronodrome, GPL-3.0-or-later.
#include "numerics/roots.h"

#include <cmath>
#include <limits>
#include <utility>

namespace chronodrome::numerics {

namespace {

constexpr double kEpsilon = std::numeric_limits<double>::epsilon();
constexpr double kInfinity = std::numeric_limits<double>::infinity();
constexpr int kMostEvaluations = 400; // bisection alone halves any pair of doubles in fewer than 2100 / 5

/// Interpolated step from `best` with a fallback to bisection. `older` is the iterate before `best`, `other`
/// the end with the opposite sign; equal `older` and `other` leave only the secant.
std::pair<double, double> interpolate(double older, double f_older, double best, double f_best, double other,
                                      double f_other) {
  const double half = (other - best) / 2.0;
  const double s = f_best / f_older;
  double numerator = 2.0 * half * s;
  double denominator = 1.0 - s;
  if (older != other) {
    const double q = f_older / f_other;
    const double r = f_best / f_other;
    numerator = s * (2.0 * half * q * (q - r) - (best - older) * (r - 1.0));
    denominator = (q - 1.0) * (r - 1.0) * (s - 1.0);
  }
  if (numerator > 0.0) denominator = -denominator;
  return {std::abs(numerator), denominator};
}

} // namespace

Root bracketed_root(const std::function<double(double)>& f, double a, double b, double tolerance) {
  Root root;
  const auto call = [&](double x) {
    ++root.evaluations;
    return f(x);
  };
  double older = a, f_older = call(a);
  double best = b, f_best = call(b);
  double other = older, f_other = f_older;
  double step = best - older, step_before = step;
  while (root.evaluations < kMostEvaluations) {
    if (std::isnan(f_best) || std::isnan(f_other)) break;
    if (f_best != 0.0 && f_other != 0.0 && (f_best > 0.0) == (f_other > 0.0)) {
      if (root.evaluations == 2) break; // no sign change
      other = older, f_other = f_older;
      step = step_before = best - older;
    }
    if (std::abs(f_other) < std::abs(f_best)) {
      older = best, f_older = f_best;
      std::swap(best, other);
      std::swap(f_best, f_other);
      older = other, f_older = f_other;
    }
    const double close = 2.0 * kEpsilon * std::abs(best) + tolerance / 2.0;
    const double half = (other - best) / 2.0;
    if (std::abs(half) <= close || f_best == 0.0) {
      root.found = true;
      break;
    }
    if (std::abs(step_before) < close || std::abs(f_older) <= std::abs(f_best)) {
      step = step_before = half;
    } else {
      const auto [numerator, denominator] = interpolate(older, f_older, best, f_best, other, f_other);
      const bool inside = 2.0 * numerator < 3.0 * half * denominator - std::abs(close * denominator);
      if (inside && numerator < std::abs(step_before * denominator / 2.0)) {
        step_before = step;
        step = numerator / denominator;
      } else {
        step = step_before = half;
      }
    }
    older = best, f_older = f_best;
    best += std::abs(step) > close ? step : std::copysign(close, half);
    f_best = call(best);
  }
  root.x = best;
  root.value = f_best;
  return root;
}

Minimum minimise(const std::function<double(double)>& f, double a, double b, double tolerance) {
  Minimum minimum;
  const auto call = [&](double x) {
    ++minimum.evaluations;
    const double value = f(x);
    return std::isnan(value) ? kInfinity : value;
  };
  constexpr double kGolden = 0.3819660112501051; // (3 - sqrt 5) / 2
  double best = a + kGolden * (b - a), second = best, third = best;
  double f_best = call(best), f_second = f_best, f_third = f_best;
  double step = 0.0, step_before = 0.0;
  while (minimum.evaluations < kMostEvaluations) {
    const double middle = (a + b) / 2.0;
    const double close = std::sqrt(kEpsilon) * std::abs(best) / 4.0 + tolerance / 3.0;
    if (std::abs(best - middle) <= 2.0 * close - (b - a) / 2.0) break;
    bool golden = true;
    if (std::abs(step_before) > close) {
      const double r = (best - second) * (f_best - f_third);
      const double q0 = (best - third) * (f_best - f_second);
      double p = (best - third) * q0 - (best - second) * r;
      double q = 2.0 * (q0 - r);
      if (q > 0.0) p = -p;
      q = std::abs(q);
      const bool inside = p > q * (a - best) && p < q * (b - best);
      if (std::abs(p) < std::abs(q * step_before / 2.0) && inside) {
        step_before = step;
        step = p / q;
        const double next = best + step;
        if (next - a < 2.0 * close || b - next < 2.0 * close) step = std::copysign(close, middle - best);
        golden = false;
      }
    }
    if (golden) {
      step_before = (best < middle ? b : a) - best;
      step = kGolden * step_before;
    }
    const double next = best + (std::abs(step) >= close ? step : std::copysign(close, step));
    const double f_next = call(next);
    if (f_next <= f_best) {
      (next < best ? b : a) = best;
      third = second, f_third = f_second;
      second = best, f_second = f_best;
      best = next, f_best = f_next;
    } else {
      (next < best ? a : b) = next;
      if (f_next <= f_second || second == best) {
        third = second, f_third = f_second;
        second = next, f_second = f_next;
      } else if (f_next <= f_third || third == best || third == second) {
        third = next, f_third = f_next;
      }
    }
  }
  minimum.x = best;
  minimum.value = f_best;
  return minimum;
}

} // namespace chronodrome::numerics
