// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <span>

#include "base/result.h"
#include "pharmacology/curve_fit.h"
#include "pharmacology/flags.h"
#include "pharmacology/model.h"

namespace chronodrome::pharmacology {

struct FitOptions {
  double confidence = 0.95; ///< of all intervals
  /// Hill coefficient held at this value instead of being fitted (hill only; hill_unit_slope holds it at 1).
  std::optional<double> fixed_nh;
  /// basal held at this value: only for a response that is zero by definition (hill, hill_unit_slope,
  /// biphasic). A wrong value ruins EC50 and slope.
  std::optional<double> fixed_basal;
  /// Level of the F test against "no response"; 0 switches it off (then every curve gets numbers).
  double response_level = 0.05;
  double lack_of_fit_level = 0.05;

  /// Errors: bad_usage (a level or confidence outside its range, a fixed slope that is not above 0).
  [[nodiscard]] Done check() const;
};

/// Fits one curve; needs no start values.
/// `points`: response at each bath concentration (mol/L, >= 0; 0 is the control) in any order, repeats
/// allowed, with relative weights 1/variance. Points without a finite response are left out and counted.
/// Returns the least-squares optimum wherever it is finite. What the data cannot give is missing, and a flag
/// of the closed list (flags.h) says why:
///  - fewer distinct concentrations than parameters + 1 (five for hill), a negative concentration or a weight
///    that is not above 0: `declined`, nothing estimated;
///  - all responses equal, or F test against a constant with P >= response_level: `no_response`, basal is the
///    weighted mean with its t interval, and `fit` describes the constant;
///  - otherwise parameters with intervals: profile likelihood for hill and hill_unit_slope (a side is open
///    exactly if the curve's limit model on that side stays below the threshold), t intervals from standard
///    errors for richards, biphasic and bell, exact t intervals for linear and constant.
/// Options that do not pass check() give a declined fit with the reason.
/// Accuracy: estimates within 1e-5 of their standard error, standard errors 1e-6 relative, profile limits
/// within 1e-4 of the standard error (tests/reference/pharmacology). Cost: hill about 1 ms for 10 points.
/// Source: profile limits, Bates DM, Watts DG (1988) Nonlinear Regression Analysis and Its Applications,
/// ch. 6.
CurveFit fit_curve(std::span<const CurvePoint> points, Model model, const FitOptions& options = {});

/// The fitted curve's response at a concentration; nothing if the fit has no finite parameters there.
std::optional<double> fitted_response(const CurveFit& fit, Molar concentration);

} // namespace chronodrome::pharmacology
