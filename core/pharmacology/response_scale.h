// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cmath>
#include <cstddef>
#include <span>
#include <vector>

#include "pharmacology/fit.h"

namespace chronodrome::pharmacology {

/// Responses whose squares would leave the range of double numbers are fitted as response / 2^exponent: a
/// power of two changes no digit. Exponent 0, and nothing is touched, while the largest response lies within
/// 1e-100 to 1e100.
class ResponseScale {
public:
  /// `largest`: largest absolute response, limit or fixed basal response.
  explicit ResponseScale(double largest);

  [[nodiscard]] bool is_needed() const { return exponent_ != 0; }
  [[nodiscard]] double down(double response) const { return std::ldexp(response, -exponent_); }
  [[nodiscard]] std::vector<CurvePoint> down(std::span<const CurvePoint> points) const;
  [[nodiscard]] FitOptions down(FitOptions options) const;

  /// Brings a fit of the scaled responses back to their unit. A number that has no double in that unit (the
  /// square of 1e300, say) is missing. `terms`: measured responses in the likelihood (for aicc).
  void restore(CurveFit& fit, Model model, std::size_t terms) const;

private:
  int exponent_ = 0;
};

/// Largest absolute response, with the fixed basal response if there is one.
double largest_response(std::span<const CurvePoint> points, const FitOptions& options);

} // namespace chronodrome::pharmacology
