// Chronodrome, GPL-3.0-or-later.
#pragma once

#include "pharmacology/fit.h"
#include "pharmacology/levels.h"

namespace chronodrome::pharmacology {

/// The fits behind fit_curve(), one a family. Each gets a fit with model, likelihood and counts set, and
/// `levels` with at least one distinct concentration more than parameters; it fills the rest.
/// Requires: options.check() passes.
void fit_hill(const Levels& levels, Model model, const FitOptions& options, CurveFit& fit);
void fit_richards(const Levels& levels, const FitOptions& options, CurveFit& fit);
void fit_biphasic(const Levels& levels, const FitOptions& options, CurveFit& fit);
void fit_bell(const Levels& levels, const FitOptions& options, CurveFit& fit);
void fit_linear(const Levels& levels, const FitOptions& options, CurveFit& fit);
void fit_constant(const Levels& levels, const FitOptions& options, CurveFit& fit);

/// Turns a fit with `rss` and `parameters` set into "no response" if the F test against the constant says so;
/// true if it did. Sets response_p and trend_p.
bool ends_as_no_response(const Levels& levels, const FitOptions& options, double rss, int parameters,
                         CurveFit& fit);

/// Sets df, rss, residual_sd, aicc and, where concentrations repeat, lack_of_fit_p with its flag. True if
/// there is scatter to take errors from; otherwise the flag exact_fit is set.
bool describe_scatter(const Levels& levels, const FitOptions& options, double rss, int parameters,
                      CurveFit& fit);

/// A fit with all names of the model's parameters and derived numbers, and no values.
CurveFit empty_fit(Model model, const std::string& likelihood);

/// Adds a flag once, in any order.
void add_flag(CurveFit& fit, std::string_view flag, const std::string& reason);

/// Puts flags and their sentences in the order of the closed list and sets `reason`.
void sort_flags(CurveFit& fit);

/// Quantile of t for a two-sided interval.
double two_sided_t(const FitOptions& options, int df);

} // namespace chronodrome::pharmacology
