// Chronodrome, GPL-3.0-or-later.
#pragma once

namespace chronodrome::numerics {

/// Distribution functions. Small tails are computed directly, never as one minus the other side, so that
/// P = 1e-17 keeps its digits. An argument outside the domain (degrees of freedom <= 0, p outside [0, 1],
/// NaN) gives NaN; p = 0 or 1 gives an infinite quantile. Accuracy: relative 1e-10 or better where the tests
/// reach (P down to 1e-17). Safe to call from several threads. Source of the functions: Abramowitz M, Stegun
/// IA (1964) Handbook of Mathematical Functions, chapter 26.

double normal_cdf(double x);
double normal_upper_tail(double x);
double normal_quantile(double p);

/// ln P(X <= x) of the standard normal; finite down to x = -1e150, where P itself is 0 in a double.
double log_normal_cdf(double x);

/// density(x) / P(X <= x) of the standard normal: the slope of log_normal_cdf, about -x far below 0.
double normal_hazard_below(double x);

/// `df` > 0, not necessarily whole (Welch).
double student_t_cdf(double t, double df);
double student_t_upper_tail(double t, double df);
/// P(|T| >= |t|).
double student_t_two_sided(double t, double df);
double student_t_quantile(double p, double df);

/// P(F >= f).
double f_upper_tail(double f, double df1, double df2);
double f_quantile(double p, double df1, double df2);

/// P(chi-squared >= x).
double chi_squared_upper_tail(double x, double df);
double chi_squared_quantile(double p, double df);

} // namespace chronodrome::numerics
