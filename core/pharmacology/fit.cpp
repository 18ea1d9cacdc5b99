// Chronodrome, GPL-3.0-or-later.
#include "pharmacology/fit.h"

#include <algorithm>
#include <cmath>
#include <numbers>
#include <vector>

#include "base/number_text.h"
#include "pharmacology/hill_fit.h"
#include "pharmacology/levels.h"
#include "pharmacology/response_scale.h"
#include "pharmacology/shape.h"

namespace chronodrome::pharmacology {

namespace {

bool takes_fixed_basal(Model model) {
  return model == Model::hill || model == Model::hill_unit_slope || model == Model::biphasic;
}

CurveFit declined(CurveFit fit, const std::string& reason) {
  add_flag(fit, flags::kDeclined, reason);
  return fit;
}

std::string count_text(std::size_t count, const std::string& of) {
  return std::to_string(count) + " " + of;
}

void run(const Levels& levels, Model model, const FitOptions& options, CurveFit& fit) {
  switch (model) {
  case Model::hill:
  case Model::hill_unit_slope:
    return fit_hill(levels, model, options, fit);
  case Model::richards:
    return fit_richards(levels, options, fit);
  case Model::biphasic:
    return fit_biphasic(levels, options, fit);
  case Model::bell:
    return fit_bell(levels, options, fit);
  case Model::linear:
    return fit_linear(levels, options, fit);
  case Model::constant:
    return fit_constant(levels, options, fit);
  }
}

} // namespace

Done FitOptions::check() const {
  const auto wrong = [](const std::string& what, const std::string& remedy) {
    return Error{ErrorCode::bad_usage, "", {}, what, remedy};
  };
  if (!(confidence > 0.0 && confidence < 1.0)) {
    return wrong("the confidence of the intervals is " + number_text(confidence), "set it between 0 and 1");
  }
  if (!(response_level >= 0.0 && response_level <= 1.0 && lack_of_fit_level >= 0.0 &&
        lack_of_fit_level <= 1.0)) {
    return wrong("a level of significance is outside 0 to 1", "set it between 0 and 1");
  }
  if (fixed_nh && !(*fixed_nh > 0.0 && std::isfinite(*fixed_nh))) {
    return wrong("the fixed Hill coefficient is " + number_text(*fixed_nh), "set it above 0");
  }
  if (fixed_basal && !std::isfinite(*fixed_basal)) {
    return wrong("the fixed basal response is not a number", "set a number");
  }
  return done();
}

CurveFit fit_curve(std::span<const CurvePoint> points, Model model, const FitOptions& options) {
  CurveFit fit = empty_fit(model, "gaussian");
  std::vector<CurvePoint> usable;
  for (const CurvePoint& point : points) {
    if (std::isfinite(point.response)) usable.push_back(point);
  }
  fit.n_points = usable.size();
  fit.n_dropped = points.size() - usable.size();
  const auto finish = [&](CurveFit result) {
    sort_flags(result);
    return result;
  };
  if (const Done checked = options.check(); !checked) return finish(declined(fit, checked.error().what));
  if (options.fixed_nh && model != Model::hill) {
    return finish(declined(fit, "only the model hill takes a fixed Hill coefficient"));
  }
  if (options.fixed_basal && !takes_fixed_basal(model)) {
    return finish(declined(fit, "the model " + fit.model + " takes no fixed basal response"));
  }
  for (const CurvePoint& point : usable) {
    if (!(point.concentration.value() >= 0.0) || !std::isfinite(point.concentration.value())) {
      return finish(declined(fit, "a concentration is negative or not a number"));
    }
    if (!(point.weight > 0.0) || !std::isfinite(point.weight)) {
      return finish(declined(fit, "a weight is not above 0"));
    }
  }
  const ResponseScale scale(largest_response(usable, options));
  const Levels levels = gather(scale.is_needed() ? scale.down(usable) : usable);
  const std::size_t fitted = static_cast<std::size_t>(parameter_count(model)) - (options.fixed_nh ? 1 : 0) -
                             (options.fixed_basal ? 1 : 0);
  const std::string have =
      count_text(levels.size(), levels.size() == 1 ? "distinct concentration" : "distinct concentrations");
  if (levels.size() < fitted + 1) {
    if (fitted > 2) add_flag(fit, flags::kFewPoints, have);
    return finish(declined(fit, have + " for " + count_text(fitted, "parameters") + ": at least " +
                                    std::to_string(fitted + 1) + " are needed"));
  }
  const std::size_t enough = fitted > 4 ? 10 : 6;
  if (fitted > 2 && levels.size() < enough) add_flag(fit, flags::kFewPoints, have);
  run(levels, model, scale.down(options), fit);
  scale.restore(fit, model, fit.n_points);
  return finish(fit);
}

std::optional<double> fitted_response(const CurveFit& fit, Molar concentration) {
  const auto value = [&](const char* name) -> std::optional<double> {
    const Estimate* found = fit.find(name);
    return found ? found->estimate : std::nullopt;
  };
  const auto hill = [&](std::optional<double> pec50, std::optional<double> nh) -> std::optional<double> {
    if (!pec50 || !nh) return std::nullopt;
    if (concentration.value() == 0.0) return 0.0;
    return logistic(*nh * std::numbers::ln10 * (std::log10(concentration.value()) + *pec50));
  };
  const std::optional<double> basal = value("basal"), emax = value("emax");
  if (!basal || !(concentration.value() >= 0.0)) return std::nullopt;
  if (fit.model == "constant" || fit.has_flag(flags::kNoResponse)) return *basal;
  if (fit.model == "linear") {
    const std::optional<double> slope = value("slope");
    return slope ? std::optional(*basal + *slope * concentration.value()) : std::nullopt;
  }
  if (fit.model == "bell") {
    const auto g1 = hill(value("pec50_1"), value("nh_1")), g2 = hill(value("pec50_2"), value("nh_2"));
    if (!g1 || !g2) return std::nullopt;
    return *basal + value("effect_1").value_or(0.0) * *g1 + value("effect_2").value_or(0.0) * *g2;
  }
  if (!emax) return std::nullopt;
  if (fit.model == "biphasic") {
    const auto g1 = hill(value("pec50_1"), 1.0), g2 = hill(value("pec50_2"), 1.0);
    const auto share = value("fraction_1");
    if (!g1 || !g2 || !share) return std::nullopt;
    return *basal + (*emax - *basal) * (*share * *g1 + (1.0 - *share) * *g2);
  }
  if (fit.model == "richards") {
    const auto pec50 = value("pec50"), nh = value("nh"), s = value("asymmetry");
    if (!pec50 || !nh || !s) return std::nullopt;
    const double x = concentration.value() == 0.0 ? -INFINITY : std::log10(concentration.value());
    const double theta[3] = {-*pec50, std::log(*nh), std::log(*s)};
    double h[2] = {}; // the function and its complement
    RichardsShape().evaluate(theta, {&x, 1}, h, nullptr);
    return *basal + (*emax - *basal) * h[0];
  }
  const auto g = hill(value("pec50"), value("nh"));
  return g ? std::optional(*basal + (*emax - *basal) * *g) : std::nullopt;
}

} // namespace chronodrome::pharmacology
