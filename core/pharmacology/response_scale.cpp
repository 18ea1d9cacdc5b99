// Chronodrome, GPL-3.0-or-later.
#include "pharmacology/response_scale.h"

#include <algorithm>
#include <numbers>

namespace chronodrome::pharmacology {

namespace {

constexpr double kLeast = 1e-100, kMost = 1e100; // squares, and their sums, keep all digits within

/// Missing where the number has no double in the other unit.
void raise(std::optional<double>& value, int exponent) {
  if (!value) return;
  *value = std::ldexp(*value, exponent);
  if (!std::isfinite(*value)) value.reset();
}

/// A size of scatter: missing as well where it would become 0, which says that there is none.
void raise_scatter(std::optional<double>& value, int exponent) {
  const bool was_zero = value == 0.0;
  raise(value, exponent);
  if (value == 0.0 && !was_zero) value.reset();
}

/// True for numbers in the unit of the response, or in it per concentration.
bool follows_response(std::span<const ParameterMeaning> meanings, const std::string& name) {
  return std::any_of(meanings.begin(), meanings.end(), [&](const ParameterMeaning& one) {
    return one.name == name && one.unit.substr(0, 8) == "response";
  });
}

} // namespace

ResponseScale::ResponseScale(double largest) {
  if (largest > 0.0 && !(largest >= kLeast && largest <= kMost)) exponent_ = std::ilogb(largest);
}

std::vector<CurvePoint> ResponseScale::down(std::span<const CurvePoint> points) const {
  std::vector<CurvePoint> scaled(points.begin(), points.end());
  for (CurvePoint& point : scaled)
    point.response = down(point.response);
  return scaled;
}

FitOptions ResponseScale::down(FitOptions options) const {
  if (options.fixed_basal) *options.fixed_basal = down(*options.fixed_basal);
  return options;
}

void ResponseScale::restore(CurveFit& fit, Model model, std::size_t terms) const {
  if (!is_needed()) return;
  const auto restore_list = [&](std::vector<NamedEstimate>& list,
                                std::span<const ParameterMeaning> meanings) {
    for (NamedEstimate& one : list) {
      if (!follows_response(meanings, one.name)) continue;
      for (auto* value : {&one.value.estimate, &one.value.ci_low, &one.value.ci_high})
        raise(*value, exponent_);
      raise_scatter(one.value.se, exponent_);
    }
  };
  for (const ModelMeaning& meaning : model_meanings()) {
    if (meaning.model != model) continue;
    restore_list(fit.parameters, meaning.parameters);
    restore_list(fit.derived, meaning.derived);
  }
  raise_scatter(fit.residual_sd, exponent_);
  raise_scatter(fit.rss, 2 * exponent_);
  // Minus twice the log likelihood holds ln (scatter^2) once for each measured response.
  if (fit.aicc) *fit.aicc += 2.0 * static_cast<double>(terms) * exponent_ * std::numbers::ln2;
}

double largest_response(std::span<const CurvePoint> points, const FitOptions& options) {
  double largest = std::abs(options.fixed_basal.value_or(0.0));
  for (const CurvePoint& point : points)
    largest = std::max(largest, std::abs(point.response));
  return largest;
}

} // namespace chronodrome::pharmacology
