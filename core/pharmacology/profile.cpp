// Chronodrome, GPL-3.0-or-later.
#include "pharmacology/profile.h"

#include <algorithm>
#include <cmath>

#include "numerics/roots.h"

namespace chronodrome::pharmacology {

namespace {

// In units of t, so about as many standard errors: the accuracy promised for a limit.
constexpr double kCloseEnough = 1e-5;

/// The signed root of the excess sum of squares less t: nearly linear in the parameter, 0 at the limit.
double excess(double rss, const ProfileRule& rule) {
  return std::sqrt(std::max(rss - rule.least, 0.0) / rule.least * rule.df) - rule.t;
}

} // namespace

std::optional<double> profile_limit(ConstrainedFit& fit, const ProfileRule& rule, double inside, double step,
                                    int direction, double end) {
  if (!(end > rule.threshold())) return std::nullopt;
  bool thorough = false; // after a first surprise every point is searched for from the whole grid
  const auto at = [&](double held) {
    const double here = excess(thorough ? fit.search(held) : fit.follow(held), rule);
    if (here < 0.0) fit.keep();
    return here;
  };
  double in = inside, distance = step;
  fit.restart();
  for (int attempt = 0; attempt < 80; ++attempt) {
    const double out = inside + direction * distance;
    if (at(out) < 0.0) {
      in = out;
      distance *= 1.5;
      continue;
    }
    const numerics::Root root = numerics::bracketed_root(at, in, out, 1e-7 * distance);
    // Just beyond, no other minimum of the held fit may lie below the threshold: else the interval goes on.
    // Beyond and not at the limit, because a profile may jump there (a step across a tested concentration).
    const double beyond = root.x + direction * 2e-7 * distance;
    if (root.found && excess(fit.search(beyond), rule) > -kCloseEnough) return root.x;
    thorough = true;
    if (!root.found) continue;
    fit.keep();
    in = beyond;
    distance = 1.1 * std::abs(beyond - inside);
  }
  return std::nullopt;
}

std::optional<double> find_inside(ConstrainedFit& fit, const ProfileRule& rule, double from, double step,
                                  int direction) {
  double distance = 0.0;
  for (int attempt = 0; attempt < 40; ++attempt) {
    const double held = from + direction * distance;
    if (fit.search(held) < rule.threshold()) return held;
    distance = attempt == 0 ? step : 2.0 * distance;
  }
  return std::nullopt;
}

} // namespace chronodrome::pharmacology
