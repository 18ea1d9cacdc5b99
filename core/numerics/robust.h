// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <span>

namespace chronodrome::numerics {

/// Location, spread and correlation of a sample. All values must be finite. Sums run from the first value to
/// the last, so the same input gives the same bits. A statistic that the sample is too short for is NaN,
/// never a made-up number: each function says how many values it needs.

/// Arithmetic mean. NaN for an empty sample. Accuracy: second pass over the deviations, so a large offset
/// costs no digits.
double mean(std::span<const double> values);

/// Standard deviation with n - 1. NaN for fewer than two values.
double sd(std::span<const double> values);

/// Middle value, or the mean of the two middle ones. NaN for an empty sample.
double median(std::span<const double> values);

/// Factor that makes the median absolute deviation of normal values estimate their standard deviation:
/// 1 / (quantile 0.75 of the standard normal).
inline constexpr double kMadToSd = 1.482602218505602;

/// kMadToSd x median |x - median|. NaN for an empty sample, 0 for one value.
double mad_sd(std::span<const double> values);

/// Quantile of the sample, linear between order statistics at h = (n - 1) p + 1. NaN for an empty sample.
/// Requires: 0 <= p <= 1.
/// Source: definition 7 of Hyndman RJ, Fan Y (1996) Am Stat 50:361-365.
double quantile(std::span<const double> values, double p);

/// Correlation of each value with the next: sum (x[i] - m)(x[i+1] - m) / sum (x[i] - m)^2, the estimator of
/// Box GEP, Jenkins GM (1970) Time Series Analysis. NaN for fewer than two values; 0 where all are equal.
double lag1_autocorrelation(std::span<const double> values);

/// Number of independent values that carry as much about the mean as these n do: n (1 - rho) / (1 + rho),
/// where rho is the lag-1 autocorrelation clipped to [0, 0.95]: negative correlation is not allowed to make
/// the mean look better than n values. 0 for an empty sample, 1 for one value.
/// Accuracy: exact for a long first-order autoregression; an approximation otherwise.
/// Source: Bayley GV, Hammersley JM (1946) Suppl J R Stat Soc 8:184-197.
double effective_n(std::span<const double> values);

/// Standard error of the mean of consecutive, correlated values: sd / sqrt(effective_n). NaN for fewer than
/// two values.
double sem_of_correlated(std::span<const double> values);

} // namespace chronodrome::numerics
