// Chronodrome, GPL-3.0-or-later.
//
// Symbols: x log10 concentration, L log10 EC50 = -pEC50, n = nh, g the Hill curve 1 / (1 + 10^(n (L - x))).
//   dg/dpEC50 = n ln(10) g (1 - g),  dg/dn = ln(10) (x - L) g (1 - g);  both 0 at the control.
// The delta method does not depend on how the parameters are written, so the published ones serve.
#include "pharmacology/band.h"

#include <cmath>
#include <limits>
#include <numbers>
#include <optional>
#include <string>

#include "numerics/distributions.h"
#include "pharmacology/fit.h"
#include "pharmacology/flags.h"
#include "pharmacology/shape.h"
#include "pharmacology/wald.h"

namespace chronodrome::pharmacology {

namespace {

constexpr double kLn10 = std::numbers::ln10;

/// The slope of the curve by one parameter, with the parameter's name to find out whether it was held fixed.
struct Slope {
  const char* parameter;
  double value;
};

struct HillSlopes {
  double value = 0.0, by_pec50 = 0.0, by_nh = 0.0;
};

class CurveSlopes {
public:
  explicit CurveSlopes(const CurveFit& fit) : fit_(fit) {}

  /// By every parameter of the model, at a concentration.
  [[nodiscard]] std::vector<Slope> at(Molar concentration) const {
    const double c = concentration.value();
    const double basal = of("basal"), effect = of("emax") - basal;
    if (fit_.model == "constant" || fit_.has_flag(flags::kNoResponse)) return {{"basal", 1.0}};
    if (fit_.model == "linear") return {{"basal", 1.0}, {"slope", c}};
    if (fit_.model == "bell") return bell(c);
    if (fit_.model == "biphasic") return biphasic(c, effect);
    if (fit_.model == "richards") return richards(c, effect);
    const HillSlopes g = hill(c, of("pec50"), of("nh"));
    return {{"basal", 1.0 - g.value},
            {"emax", g.value},
            {"pec50", effect * g.by_pec50},
            {"nh", effect * g.by_nh}};
  }

private:
  [[nodiscard]] double of(const char* name) const {
    const Estimate* found = fit_.find(name);
    return found && found->estimate ? *found->estimate : std::numeric_limits<double>::quiet_NaN();
  }

  static HillSlopes hill(double c, double pec50, double nh) {
    if (c == 0.0) return {};
    const double distance = kLn10 * (std::log10(c) + pec50);
    const double g = logistic(nh * distance), both = g * logistic(-nh * distance);
    return {g, nh * kLn10 * both, distance * both};
  }

  [[nodiscard]] std::vector<Slope> bell(double c) const {
    const HillSlopes first = hill(c, of("pec50_1"), of("nh_1"));
    const HillSlopes second = hill(c, of("pec50_2"), of("nh_2"));
    const double e1 = of("effect_1"), e2 = of("effect_2");
    return {{"basal", 1.0},
            {"effect_1", first.value},
            {"pec50_1", e1 * first.by_pec50},
            {"nh_1", e1 * first.by_nh},
            {"effect_2", second.value},
            {"pec50_2", e2 * second.by_pec50},
            {"nh_2", e2 * second.by_nh}};
  }

  [[nodiscard]] std::vector<Slope> biphasic(double c, double effect) const {
    const HillSlopes first = hill(c, of("pec50_1"), 1.0), second = hill(c, of("pec50_2"), 1.0);
    const double share = of("fraction_1");
    const double sum = share * first.value + (1.0 - share) * second.value;
    return {{"basal", 1.0 - sum},
            {"emax", sum},
            {"fraction_1", effect * (first.value - second.value)},
            {"pec50_1", effect * share * first.by_pec50},
            {"pec50_2", effect * (1.0 - share) * second.by_pec50}};
  }

  [[nodiscard]] std::vector<Slope> richards(double c, double effect) const {
    const double x = c == 0.0 ? -std::numeric_limits<double>::infinity() : std::log10(c);
    const double nh = of("nh"), s = of("asymmetry");
    const double theta[3] = {-of("pec50"), std::log(nh), std::log(s)};
    double h[2] = {}, slope[3] = {};
    RichardsShape().evaluate(theta, {&x, 1}, h, slope);
    return {{"basal", h[1]},
            {"emax", h[0]},
            {"pec50", -effect * slope[0]},
            {"nh", effect * slope[1] / nh},
            {"asymmetry", effect * slope[2] / s}};
  }

  const CurveFit& fit_;
};

/// Slopes by the parameters that were fitted; empty if one is not finite or has no value.
std::vector<double> free_slopes(const CurveFit& fit, const std::vector<Slope>& slopes) {
  std::vector<double> free;
  for (const Slope& one : slopes) {
    if (!std::isfinite(one.value)) return {};
    const Estimate* parameter = fit.find(one.parameter);
    if (!parameter || !parameter->estimate) return {};
    if (parameter->ci_method != "fixed") free.push_back(one.value);
  }
  return free;
}

numerics::Vector as_vector(const std::vector<double>& values) {
  return Eigen::Map<const numerics::Vector>(values.data(), static_cast<Eigen::Index>(values.size()));
}

bool can_have_band(const CurveFit& fit) {
  return fit.converged && fit.likelihood == "gaussian" && fit.residual_sd && *fit.residual_sd > 0.0 &&
         fit.df > 0 && !fit.has_flag(flags::kDeclined) && !fit.has_flag(flags::kExactFit);
}

/// Covariance of the fitted parameters from the derivatives at the points; nothing where there is none.
std::optional<Covariance> covariance_of(const CurveFit& fit, std::span<const CurvePoint> points) {
  const CurveSlopes slopes(fit);
  std::vector<std::vector<double>> rows;
  for (const CurvePoint& point : points) {
    if (!std::isfinite(point.response)) continue; // the fit left it out too
    rows.push_back(free_slopes(fit, slopes.at(point.concentration)));
    if (rows.back().empty()) return std::nullopt;
    for (double& slope : rows.back())
      slope *= std::sqrt(point.weight);
  }
  if (rows.size() != fit.n_points) return std::nullopt;
  numerics::Matrix jacobian(static_cast<Eigen::Index>(rows.size()),
                            static_cast<Eigen::Index>(rows.front().size()));
  for (std::size_t i = 0; i < rows.size(); ++i)
    jacobian.row(static_cast<Eigen::Index>(i)) = as_vector(rows[i]).transpose();
  Covariance covariance(jacobian, *fit.residual_sd);
  if (!(covariance.condition() <= kNotSeparable)) return std::nullopt;
  return covariance;
}

} // namespace

std::vector<BandLimits> confidence_band(const CurveFit& fit, std::span<const CurvePoint> points,
                                        std::span<const Molar> at, double confidence) {
  if (!can_have_band(fit) || points.empty() || !(confidence > 0.0 && confidence < 1.0)) return {};
  const std::optional<Covariance> covariance = covariance_of(fit, points);
  if (!covariance) return {};
  const double t = numerics::student_t_quantile(0.5 + confidence / 2.0, fit.df);
  const CurveSlopes slopes(fit);
  std::vector<BandLimits> band;
  for (const Molar concentration : at) {
    const std::optional<double> centre = fitted_response(fit, concentration);
    const std::vector<double> gradient = free_slopes(fit, slopes.at(concentration));
    if (!centre || gradient.empty()) return {};
    const std::optional<double> error = covariance->error_of(as_vector(gradient));
    if (!error || !std::isfinite(*error)) return {};
    band.push_back({*centre - t * *error, *centre + t * *error});
  }
  return band;
}

} // namespace chronodrome::pharmacology
