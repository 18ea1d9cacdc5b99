// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>

namespace chronodrome::pharmacology {

/// The least sum of squares when one parameter is held: a curve over that parameter.
class ConstrainedFit {
public:
  virtual ~ConstrainedFit() = default;
  /// From the minimum kept last.
  virtual double follow(double held) = 0;
  /// The same, and from the whole grid of starts.
  virtual double search(double held) = 0;
  /// The minimum found last is where follow() starts from now on. Only minima inside the interval are kept:
  /// far outside the curve may degenerate to where no descent finds back from.
  virtual void keep() = 0;
  /// Back to where the profile starts.
  virtual void restart() = 0;
};

/// What a profile is measured against.
struct ProfileRule {
  double least = 0.0; ///< the sum of squares of the fit, > 0
  double df = 0.0;    ///< points - parameters
  double t = 0.0;     ///< quantile of Student's t at (1 + confidence) / 2

  /// Values of the parameter whose sum of squares is below this are in the interval.
  [[nodiscard]] double threshold() const { return least * (1.0 + t * t / df); }
};

/// One limit of an interval. `inside`: a value within it; `step`: a first guess of the distance, > 0;
/// `direction`: +1 or -1; `end`: the sum of squares towards the end of the parameter's range on that side.
/// Nothing if the side is open.
/// Accuracy: 1e-7 of the distance from `inside`.
std::optional<double> profile_limit(ConstrainedFit& fit, const ProfileRule& rule, double inside, double step,
                                    int direction, double end);

/// A value within the interval, looked for from `from` in growing steps; nothing if none is met.
std::optional<double> find_inside(ConstrainedFit& fit, const ProfileRule& rule, double from, double step,
                                  int direction);

} // namespace chronodrome::pharmacology
