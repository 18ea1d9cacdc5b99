// Chronodrome, GPL-3.0-or-later.
#include "pharmacology/hill_fit.h"

#include <cmath>

#include "base/number_text.h"
#include "pharmacology/hill_problem.h"
#include "pharmacology/wald.h"

namespace chronodrome::pharmacology {

namespace {

constexpr double kLeastSlope = 0.2; // the search bounds: beyond them a slope is not believed
constexpr double kMostSlope = 10.0;

/// One estimate under work: the parameter it belongs to and what the profile needs.
struct Target {
  HillParameter parameter = HillParameter::log_slope;
  std::optional<double> estimate, se; ///< on the scale of the profile (log10 EC50, ln nh)
  double guess = 1.0;                 ///< where and how far to look for the interval without an estimate
  double step = 1.0;
  int direction = 1;
  double end_low = 0.0, end_high = 0.0; ///< sums of squares at the ends of the range
  std::optional<double> low, high;
  bool profiled = false;
};

class HillFitter {
public:
  HillFitter(const Levels& levels, const HillConstraints& held, const FitOptions& options, CurveFit& fit)
      : levels_(levels), held_(held), options_(options), fit_(fit), limits_(levels, held.nh, held.basal) {}

  void run() {
    optimum_ = find_hill_optimum(levels_, shape_, held_, limits_);
    const int p = held_.parameters();
    if (ends_as_no_response(levels_, options_, optimum_.rss, p, fit_)) return fill_fixed_slope();
    const bool scatter = describe_scatter(levels_, options_, optimum_.rss, p, fit_);
    fit_.converged = optimum_.kind != HillOptimum::Kind::finite || optimum_.summary.converged();
    fit_.iterations = optimum_.minimum.iterations;
    if (!fit_.converged) {
      fill_fixed_slope();
      add_flag(fit_, flags::kNotConverged,
               "the search ended after " + std::to_string(fit_.iterations) + " steps without a minimum");
      return;
    }
    take_estimates();
    if (scatter) {
      take_errors();
      take_profiles();
    }
    write();
    flag_slope();
    flag_range();
  }

private:
  Target& target(HillParameter parameter) { return targets_[static_cast<std::size_t>(parameter)]; }

  void begin(HillParameter parameter, double guess, double step, double end_low, double end_high) {
    Target fresh;
    fresh.parameter = parameter;
    fresh.guess = guess;
    fresh.step = step;
    fresh.end_low = end_low;
    fresh.end_high = end_high;
    target(parameter) = fresh;
  }

  void take_estimates() {
    const double first = levels_.mean.front(), last = levels_.mean.back(), range = levels_.range();
    begin(HillParameter::basal, first, range, limits_.basal(false), limits_.basal(true));
    begin(HillParameter::emax, last, range, limits_.emax(false), limits_.emax(true));
    begin(HillParameter::effect, last - first, range, limits_.effect(false), limits_.effect(true));
    begin(HillParameter::location, levels_.highest_log(), 0.5, limits_.location_down(),
          limits_.location_up());
    if (!held_.nh) begin(HillParameter::log_slope, 0.0, 0.5, limits_.slope_down(), limits_.slope_up());
    switch (optimum_.kind) {
    case HillOptimum::Kind::finite:
      return estimates_of_minimum();
    case HillOptimum::Kind::location_up:
      return estimates_of_power_law(limits_.power(0), HillParameter::basal, HillParameter::emax, 1);
    case HillOptimum::Kind::location_down:
      return estimates_of_power_law(limits_.inverse(0), HillParameter::emax, HillParameter::basal, -1);
    case HillOptimum::Kind::step:
      return estimates_of_step();
    case HillOptimum::Kind::line:
      target(HillParameter::log_slope).direction = -1;
      break;
    case HillOptimum::Kind::rest:
      target(HillParameter::basal).estimate = held_.basal ? *held_.basal : levels_.mean.front();
      target(HillParameter::emax).guess = levels_.mean_of(levels_.first_dose(), levels_.size());
      target(HillParameter::location).guess = levels_.lowest_log();
      target(HillParameter::location).direction = -1;
      target(HillParameter::log_slope).direction = -1;
      break;
    }
  }

  void estimates_of_minimum() {
    const SeparableMinimum& m = optimum_.minimum;
    const double basal = held_.basal ? *held_.basal : m.coefficients[0];
    const double emax = m.coefficients.back();
    target(HillParameter::basal).estimate = basal;
    target(HillParameter::emax).estimate = emax;
    target(HillParameter::effect).estimate = emax - basal;
    target(HillParameter::location).estimate = m.theta[0];
    target(HillParameter::log_slope).estimate = m.theta[1];
  }

  /// `tied` is the asymptote that stays finite, `loose` the one that runs away.
  void estimates_of_power_law(const HillLimits::PowerLaw& law, HillParameter tied, HillParameter loose,
                              int location_direction) {
    target(tied).estimate = law.asymptote;
    Target& far = target(loose);
    far.direction = law.k < 0.0 ? -1 : 1;
    target(HillParameter::effect).direction = far.direction * location_direction;
    Target& location = target(HillParameter::location);
    location.guess = location_direction > 0 ? levels_.highest_log() : levels_.lowest_log();
    location.direction = location_direction;
    Target& slope = target(HillParameter::log_slope);
    if (law.nh) {
      slope.estimate = std::log(*law.nh);
    } else {
      slope.direction = law.end == HillLimits::End::zero ? -1 : 1;
    }
  }

  void estimates_of_step() {
    const HillLimits::Step& step = limits_.step();
    target(HillParameter::basal).estimate = step.basal;
    target(HillParameter::emax).estimate = step.emax;
    if (step.basal && step.emax) target(HillParameter::effect).estimate = *step.emax - *step.basal;
    target(HillParameter::location).guess = (step.log_low + step.log_high) / 2.0;
    target(HillParameter::log_slope).guess = std::log(kMostSlope);
  }

  void take_errors() {
    if (optimum_.kind != HillOptimum::Kind::finite) return;
    SeparableProblem problem = hill_problem(levels_, shape_, held_);
    const numerics::Matrix jacobian = problem.jacobian(optimum_.minimum, held_.free_shape());
    const Covariance covariance(jacobian, *fit_.residual_sd);
    if (std::isfinite(covariance.condition())) fit_.condition = covariance.condition();
    if (!(covariance.condition() <= kNotSeparable)) {
      add_flag(fit_, flags::kNotSeparable,
               "the parameters cannot be told apart from these points" +
                   (fit_.condition ? " (condition number " + number_text(*fit_.condition, 2) + ")" : ""));
    }
    Eigen::Index next = 0;
    if (!held_.basal) target(HillParameter::basal).se = covariance.error(next++);
    target(HillParameter::emax).se = covariance.error(next++);
    target(HillParameter::location).se = covariance.error(next++);
    if (!held_.nh) target(HillParameter::log_slope).se = covariance.error(next);
    target(HillParameter::effect).se =
        held_.basal ? target(HillParameter::emax).se : covariance.error_of_difference(1, 0);
  }

  void take_profiles() {
    const int df = fit_.df;
    const ProfileRule rule{optimum_.rss, static_cast<double>(df), two_sided_t(options_, df)};
    for (Target& one : targets_) {
      if (one.parameter == HillParameter::basal && held_.basal) continue;
      if (one.parameter == HillParameter::log_slope && held_.nh) continue;
      ConstrainedHill constrained(levels_, shape_, held_, limits_, one.parameter, optimum_.minimum.theta);
      double inside = one.estimate.value_or(one.guess);
      if (!one.estimate || optimum_.kind != HillOptimum::Kind::finite) {
        const auto found = find_inside(constrained, rule, inside, one.step, one.direction);
        if (!found) continue;
        inside = *found;
        constrained.settle();
      }
      const bool has_error = one.se && *one.se > 0.0 && std::isfinite(*one.se);
      const double step = has_error ? std::min(rule.t * *one.se, 4.0 * one.step) : one.step;
      one.profiled = true;
      one.low = profile_limit(constrained, rule, inside, step, -1, one.end_low);
      one.high = profile_limit(constrained, rule, inside, step, 1, one.end_high);
    }
    flag_plateaus();
  }

  void flag_plateaus() {
    const Target& location = target(HillParameter::location);
    const Target& emax = target(HillParameter::emax);
    const Target& basal = target(HillParameter::basal);
    if (!location.high || !emax.low || !emax.high) {
      add_flag(fit_, flags::kUpperPlateauOpen, "the plateau at high concentration was not reached" + reach());
    }
    if (!location.low || (!held_.basal && (!basal.low || !basal.high))) {
      add_flag(fit_, flags::kLowerPlateauOpen, "the plateau at low concentration was not reached");
    }
  }

  /// How far the curve got, as a part of the fitted effect.
  std::string reach() {
    if (optimum_.kind != HillOptimum::Kind::finite) return "";
    const double top = logistic(std::exp(optimum_.minimum.theta[1]) * std::log(10.0) *
                                (levels_.highest_log() - optimum_.minimum.theta[0]));
    return "; the largest fitted response is " + number_text(100.0 * top, 3) + " % of the fitted effect";
  }

  void write() {
    for (NamedEstimate& one : fit_.parameters) {
      if (one.name == "basal") one.value = plain(target(HillParameter::basal), held_.basal);
      if (one.name == "emax") one.value = plain(target(HillParameter::emax), std::nullopt);
      if (one.name == "pec50") one.value = negated(target(HillParameter::location));
      if (one.name == "nh") one.value = exponential(target(HillParameter::log_slope));
    }
    const Estimate* pec50 = fit_.find("pec50");
    for (NamedEstimate& one : fit_.derived) {
      if (one.name == "ec50_mol_per_l") one.value = antilog(*pec50);
      if (one.name == "effect_max") one.value = plain(target(HillParameter::effect), std::nullopt);
    }
    fill_fixed_slope();
  }

  void fill_fixed_slope() {
    if (!held_.nh) return;
    for (NamedEstimate& one : fit_.parameters) {
      if (one.name == "nh") one.value = {*held_.nh, {}, {}, {}, "fixed"};
    }
  }

  [[nodiscard]] std::string method(const Target& one) const { return one.profiled ? "profile" : ""; }

  [[nodiscard]] Estimate plain(const Target& one, std::optional<double> fixed) const {
    if (fixed) return {*fixed, {}, {}, {}, "fixed"};
    return {one.estimate, one.se, one.low, one.high, method(one)};
  }

  [[nodiscard]] Estimate negated(const Target& one) const {
    Estimate result{one.estimate, one.se, one.high, one.low, method(one)};
    for (std::optional<double>* value : {&result.estimate, &result.ci_low, &result.ci_high}) {
      if (*value) **value = -**value;
    }
    return result;
  }

  [[nodiscard]] Estimate exponential(const Target& one) const {
    Estimate result{one.estimate, one.se, one.low, one.high, method(one)};
    for (std::optional<double>* value : {&result.estimate, &result.ci_low, &result.ci_high}) {
      if (*value) **value = std::exp(**value);
    }
    if (result.se) *result.se *= *result.estimate; // error of nh from that of ln nh
    return result;
  }

  void flag_slope() {
    if (held_.nh) return;
    const auto estimate = target(HillParameter::log_slope).estimate;
    if (estimate && std::exp(*estimate) >= kLeastSlope && std::exp(*estimate) <= kMostSlope) {
      return flag_open_slope();
    }
    std::string where;
    if (optimum_.kind == HillOptimum::Kind::step) {
      const HillLimits::Step& step = limits_.step();
      const std::string low = number_text(std::pow(10.0, step.log_low), 3);
      const std::string high = number_text(std::pow(10.0, step.log_high), 3);
      where = low == high ? ": the response changes at " + high + " mol/L"
                          : ": the response changes between " + low + " and " + high + " mol/L";
    }
    add_flag(fit_, flags::kSlopeUndetermined, "the slope is not determined by these concentrations" + where);
  }

  /// An open plateau leaves the slope open as well and has said so; else the slope itself is what is open.
  void flag_open_slope() {
    const Target& slope = target(HillParameter::log_slope);
    if (!slope.profiled || (slope.low && slope.high)) return;
    if (fit_.has_flag(flags::kUpperPlateauOpen) || fit_.has_flag(flags::kLowerPlateauOpen)) return;
    const std::string side = slope.low ? "upper limit: steeper" : "lower limit: shallower";
    add_flag(fit_, flags::kSlopeUndetermined,
             "the slope has no " + side + " curves fit these points as well");
  }

  void flag_range() {
    const Target& location = target(HillParameter::location);
    for (const auto& value : {location.estimate, location.low, location.high}) {
      if (value && (*value < levels_.lowest_log() || *value > levels_.highest_log())) {
        add_flag(fit_, flags::kExtrapolated,
                 "the EC50 or one of its limits lies outside the concentrations tested");
      }
    }
  }

  const Levels& levels_;
  const HillConstraints held_;
  const FitOptions& options_;
  CurveFit& fit_;
  const HillLimits limits_;
  const HillShape shape_;
  HillOptimum optimum_;
  std::array<Target, 5> targets_;
};

} // namespace

void fit_hill(const Levels& levels, Model model, const FitOptions& options, CurveFit& fit) {
  HillConstraints held{options.fixed_nh, options.fixed_basal};
  if (model == Model::hill_unit_slope) held.nh = 1.0;
  HillFitter(levels, held, options, fit).run();
}

} // namespace chronodrome::pharmacology
