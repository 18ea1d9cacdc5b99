// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <span>
#include <vector>

#include "pharmacology/curve_fit.h"

namespace chronodrome::pharmacology {

/// Limits of the fitted response at one concentration.
struct BandLimits {
  double low = 0.0, high = 0.0;
};

/// Pointwise confidence band of a fitted curve: at each concentration alone, the curve's own response lies
/// within the limits with this confidence; not a band for new measurements, nor for the whole curve at once.
/// `points`: those that were given to fit_curve(), in any order. `at`: concentrations, 0 is the control.
/// Returns one pair a concentration, in the unit of the response; empty where there is none: a fit that was
/// declined, did not converge, has a parameter without a finite value, parameters that cannot be told apart,
/// no scatter (exact_fit), is of another likelihood, or is not of these points. A fit that ended as
/// `no_response` has the band of its mean.
/// Method: fitted response +- t(df) times the root of g' C g, with C = residual_sd^2 (J'WJ)^-1, g the
/// derivatives of the curve by its parameters and J those at the points (delta method). Parameters that were
/// held fixed have no error. Limits from standard errors are too narrow where a plateau was not reached: look
/// at the parameters' own intervals there.
/// Accuracy: 1e-6 of the half-width (tests/pharmacology/band_test.cpp). Cost: some microseconds a
/// concentration.
/// Source: Bates DM, Watts DG (1988) Nonlinear Regression Analysis and Its Applications, section 2.3.2.
std::vector<BandLimits> confidence_band(const CurveFit& fit, std::span<const CurvePoint> points,
                                        std::span<const Molar> at, double confidence = 0.95);

} // namespace chronodrome::pharmacology
