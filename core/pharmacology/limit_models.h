// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>

#include "pharmacology/levels.h"

namespace chronodrome::pharmacology {

/// What a Hill curve becomes when one of its parameters goes to an end of its range. A profile is open on a
/// side exactly if the sum of squares of the curve's limit on that side is below the threshold: no search
/// that runs out of steps can say that.
///
/// "Anchored" means that basal is tied down, by a control at concentration 0 or because it is fixed;
/// otherwise basal is an asymptote towards low concentrations and can run away like emax.
///
///   log EC50 -> +infinity, |emax| -> infinity:  basal + k C^nh             (nh free, or fixed)
///   log EC50 -> -infinity:  anchored: control against the mean of all doses; else emax + k C^-nh
///   nh -> infinity:         a step; the level at the step's own concentration may lie in between
///   nh -> 0:                anchored: control against the mean of all doses; else a + b log C
class HillLimits {
public:
  HillLimits(const Levels& levels, std::optional<double> fixed_nh, std::optional<double> fixed_basal);

  [[nodiscard]] bool anchored() const { return anchored_; }

  /// Limit sums of squares, each with the scatter within the levels; infinite if the parameter cannot go
  /// there. `upwards`: towards +infinity.
  [[nodiscard]] double location_up() const { return power(0).rss; }
  [[nodiscard]] double location_down() const { return anchored_ ? rest() : inverse(0).rss; }
  [[nodiscard]] double emax(bool upwards) const { return power(upwards ? 1 : -1).rss; }
  [[nodiscard]] double basal(bool upwards) const;
  [[nodiscard]] double effect(bool upwards) const;
  [[nodiscard]] double slope_up() const { return step().rss; }
  [[nodiscard]] double slope_down() const;

  enum class End { none, zero, infinite };
  /// asymptote + k f(C), f = (C / highest)^nh or (lowest / C)^nh.
  struct PowerLaw {
    double rss = 0.0;
    double asymptote = 0.0; ///< basal for a power law, emax for an inverse one
    double k = 0.0;         ///< its sign is that of emax - basal for a power law, the opposite for an inverse
    std::optional<double> nh; ///< missing where the best one is no finite number above 0
    End end = End::none;      ///< which, then
  };
  /// `sign`: +1 or -1 asks for k of that sign (0 allowed), 0 for any.
  [[nodiscard]] PowerLaw power(int sign) const { return best_power(sign, false); }
  [[nodiscard]] PowerLaw inverse(int sign) const { return best_power(sign, true); }

  struct Step {
    double rss = 0.0;
    std::optional<double> basal, emax; ///< missing where no level lies on that side
    double log_low = 0.0;              ///< the EC50 lies between these log10 concentrations
    double log_high = 0.0;
  };
  [[nodiscard]] const Step& step() const { return step_; }

  /// The step at this log10 EC50, for a profile that holds it: what nh -> infinity becomes there.
  [[nodiscard]] double step_at(double log10_ec50) const;

  /// Control against the mean of all doses.
  [[nodiscard]] double rest() const { return rest_; }

private:
  [[nodiscard]] PowerLaw best_power(int sign, bool inverted) const;
  [[nodiscard]] PowerLaw fit_power(double nh, End end, int sign, bool inverted) const;
  [[nodiscard]] Step best_step() const;

  const Levels& levels_;
  std::optional<double> fixed_nh_, fixed_basal_;
  bool anchored_;
  double rest_;
  Step step_;
};

} // namespace chronodrome::pharmacology
