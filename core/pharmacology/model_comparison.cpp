// Chronodrome, GPL-3.0-or-later.
#include "pharmacology/model_comparison.h"

#include <cmath>
#include <limits>

#include "numerics/distributions.h"

namespace chronodrome::pharmacology {

namespace {

FTest ratio_test(double numerator, int df1, double denominator, int df2) {
  FTest test{0.0, df1, df2, 1.0};
  if (!(numerator > 0.0)) return test;
  const double per_df2 = denominator / df2;
  test.f = per_df2 > 0.0 ? numerator / df1 / per_df2 : std::numeric_limits<double>::infinity();
  test.p = numerics::f_upper_tail(test.f, df1, df2);
  return test;
}

} // namespace

std::optional<FTest> nested_test(double rss0, int df0, double rss1, int df1) {
  if (df1 < 1 || df0 <= df1) return std::nullopt;
  return ratio_test(rss0 - rss1, df0 - df1, rss1, df1);
}

std::optional<FTest> lack_of_fit_test(double rss, int df, double pure_error, int pure_error_df) {
  if (pure_error_df < 1 || df <= pure_error_df) return std::nullopt;
  return ratio_test(rss - pure_error, df - pure_error_df, pure_error, pure_error_df);
}

std::optional<double> aicc(double rss, int n, int parameters) {
  const int k = parameters + 1;
  if (n <= k + 1 || !(rss > 0.0)) return std::nullopt;
  return n * std::log(rss / n) + 2.0 * k + 2.0 * k * (k + 1.0) / (n - k - 1.0);
}

} // namespace chronodrome::pharmacology
