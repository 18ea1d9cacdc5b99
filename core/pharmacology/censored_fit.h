// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <span>

#include "pharmacology/fit.h"

namespace chronodrome::pharmacology {

/// What a response that could not be measured is known to be.
enum class LimitSide {
  at_least, ///< the true response is `limit` or more: a delay under complete block
  at_most,  ///< the true response is `limit` or less: a rate under arrest
};

struct CensoredPoint {
  Molar concentration;
  double limit = 0.0;
  LimitSide side = LimitSide::at_least;
};

/// Fits one curve to measured responses and to responses known only as limits: maximum likelihood with normal
/// errors of one size. `likelihood` is "censored".
/// `model`: hill or hill_unit_slope; other models are declined. Estimates have standard errors from the
/// observed information and t limits with (measured points - parameters) degrees of freedom (ci_method
/// "wald"; those of nh are taken on ln nh, so that they stay above 0): read them together with the main fit,
/// whose profile says whether a plateau was reached at all. `fit`: residual_sd is the likelihood's own (not
/// corrected for degrees of freedom), rss that of the measured points, aicc from the likelihood. Declined:
/// fewer measured points than parameters + 1, fewer distinct concentrations (limits count) than parameters +
/// 1, all measured responses on the curve, no censored point. `no_response`: likelihood ratio against a
/// constant with P >= response_level. `heavily_censored`: more than a third of the points whose fitted
/// response lies between 20 and 80 % of the effect are limits; pec50 is then missing. Where the likelihood
/// has no finite maximum the plateau's flag is set and pec50, emax and nh are missing. Accuracy: within 1e-4
/// of the standard error. Source: likelihood of limited responses, Tobin J (1958) Econometrica 26:24-36.
CurveFit fit_censored(std::span<const CurvePoint> measured, std::span<const CensoredPoint> censored,
                      Model model, const FitOptions& options = {});

} // namespace chronodrome::pharmacology
