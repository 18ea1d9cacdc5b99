// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>

namespace chronodrome::pharmacology {

/// A ratio of mean squares and its upper tail probability.
struct FTest {
  double f = 0.0;
  int df1 = 0;
  int df2 = 0;
  double p = 1.0;
};

/// Is the larger model better than the one nested in it, on the same points and weights? F = ((rss0 - rss1) /
/// (df0 - df1)) / (rss1 / df1). With rss1 = 0 and rss0 > 0: P = 0. Nothing unless df0 > df1 > 0.
std::optional<FTest> nested_test(double rss0, int df0, double rss1, int df1);

/// Does the curve miss the means of repeated additions? `rss`, `df` of the fit; pure error: scatter within
/// equal concentrations. Nothing without repeats or without more levels than parameters. Repeated readings of
/// one addition are not repeats in this sense.
std::optional<FTest> lack_of_fit_test(double rss, int df, double pure_error, int pure_error_df);

/// n ln(rss/n) + 2 K + 2 K (K + 1) / (n - K - 1) with K = parameters + 1 (the scatter counts). Only
/// differences between models of the same points mean anything. Nothing if n <= K + 1 or rss is 0.
/// Source: Hurvich CM, Tsai CL (1989) Biometrika 76:297-307.
std::optional<double> aicc(double rss, int n, int parameters);

} // namespace chronodrome::pharmacology
