// Chronodrome, GPL-3.0-or-later.
#include "pharmacology/censored_fit.h"

#include <algorithm>
#include <cmath>
#include <vector>

#include "base/number_text.h"
#include "numerics/distributions.h"
#include "pharmacology/censored_likelihood.h"
#include "pharmacology/hill_fit.h"
#include "pharmacology/response_scale.h"
#include "pharmacology/shape.h"
#include "pharmacology/wald.h"

namespace chronodrome::pharmacology {

namespace {

constexpr double kFarOut = 3.0; // decades beyond the tested range: the likelihood has no finite maximum

class CensoredFitter {
public:
  CensoredFitter(std::span<const CurvePoint> measured, std::span<const CensoredPoint> censored,
                 const FitOptions& options, std::optional<double> fixed_nh, CurveFit& fit)
      : measured_(measured), censored_(censored), options_(options), fixed_nh_(fixed_nh), fit_(fit),
        likelihood_(measured, censored) {}

  void run() {
    std::vector<CurvePoint> all(measured_.begin(), measured_.end());
    for (const CensoredPoint& point : censored_) {
      all.push_back({point.concentration, point.limit, 1.0});
    }
    const int p = 4 - (fixed_nh_ ? 1 : 0) - (options_.fixed_basal ? 1 : 0);
    const std::size_t needed = static_cast<std::size_t>(p) + 1;
    levels_ = gather(all);
    if (censored_.empty()) return decline("no response is known only as a limit");
    if (measured_.size() < needed || levels_.size() < needed) {
      return decline(std::to_string(measured_.size()) + " measured responses at " +
                     std::to_string(levels_.size()) + " distinct concentrations for " + std::to_string(p) +
                     " parameters: at least " + std::to_string(needed) + " of each are needed");
    }
    find_free();
    const numerics::Vector from = start(all);
    maximum_ = maximise(likelihood_, from, free_);
    if (maximum_.parameters(4) < from(4) - 12.0) return decline("all measured responses lie on the curve");
    if (is_constant()) return;
    describe(p);
    write(p);
  }

private:
  void decline(const std::string& reason) { add_flag(fit_, flags::kDeclined, reason); }

  void find_free() {
    if (!options_.fixed_basal) free_.push_back(0);
    free_.insert(free_.end(), {1, 2});
    if (!fixed_nh_) free_.push_back(3);
    free_.push_back(4);
  }

  /// The least-squares curve through measured responses and limits alike, brought back into the tested range.
  numerics::Vector start(const std::vector<CurvePoint>& all) {
    FitOptions plain = options_;
    plain.fixed_nh = fixed_nh_;
    plain.response_level = 0.0;
    const CurveFit guess = fit_curve(all, Model::hill, plain);
    const auto value = [&](const char* name, double otherwise) {
      const Estimate* found = guess.find(name);
      return found && found->estimate ? *found->estimate : otherwise;
    };
    numerics::Vector from(CensoredLikelihood::kParameters);
    from(0) = options_.fixed_basal.value_or(value("basal", levels_.mean.front()));
    from(1) = value("emax", levels_.mean.back());
    from(2) = std::clamp(-value("pec50", -(levels_.lowest_log() + levels_.highest_log()) / 2.0),
                         levels_.lowest_log(), levels_.highest_log());
    from(3) = fixed_nh_ ? std::log(*fixed_nh_) : std::log(std::clamp(value("nh", 1.0), 0.3, 4.0));
    from(4) = 0.0;
    const double n = static_cast<double>(measured_.size());
    const double floor = 1e-6 * std::max(levels_.range(), 1e-12);
    from(4) = std::log(std::max(std::sqrt(likelihood_.rss(from) / n), floor));
    return from;
  }

  /// Likelihood ratio against basal and scatter alone.
  bool is_constant() {
    numerics::Vector flat = maximum_.parameters;
    std::vector<double> y;
    for (const CurvePoint& point : measured_)
      y.push_back(point.response);
    double mean = 0.0;
    for (const double one : y)
      mean += one / static_cast<double>(y.size());
    if (options_.fixed_basal) mean = *options_.fixed_basal;
    flat(0) = flat(1) = mean;
    flat(4) = std::log(std::max(std::sqrt(likelihood_.rss(flat) / static_cast<double>(y.size())),
                                1e-9 * std::max(levels_.range(), 1e-12)));
    // With emax = basal tied together the constant is the curve of log10 EC50 far above the range.
    flat(2) = levels_.highest_log() + 300.0;
    flat(3) = 0.0;
    std::vector<Eigen::Index> free{4};
    if (!options_.fixed_basal) free.insert(free.begin(), 0);
    const LikelihoodMaximum constant = maximise(likelihood_, flat, free);
    const double ratio = 2.0 * (constant.minus_log - maximum_.minus_log);
    const double df = static_cast<double>(free_.size() - free.size());
    fit_.response_p = numerics::chi_squared_upper_tail(ratio, df);
    if (!(options_.response_level > 0.0 && *fit_.response_p >= options_.response_level)) return false;
    add_flag(fit_, flags::kNoResponse,
             "no concentration-related response detected (likelihood ratio against a constant, P = " +
                 number_text(*fit_.response_p, 2) + ")");
    fit_.converged = constant.converged;
    maximum_ = constant;
    fit_.residual_sd = std::exp(constant.parameters(4));
    fit_.rss = likelihood_.rss(constant.parameters);
    const int df_constant = static_cast<int>(measured_.size()) - (options_.fixed_basal ? 0 : 1);
    fit_.df = df_constant;
    set("basal", options_.fixed_basal
                     ? Estimate{mean, {}, {}, {}, "fixed"}
                     : wald(constant.parameters(0), error(0), two_sided_t(options_, df_constant)));
    fill_fixed_slope();
    return true;
  }

  void describe(int p) {
    fit_.converged = maximum_.converged;
    fit_.iterations = maximum_.iterations;
    fit_.df = static_cast<int>(measured_.size()) - p;
    fit_.residual_sd = std::exp(maximum_.parameters(4));
    fit_.rss = likelihood_.rss(maximum_.parameters);
    const double n = static_cast<double>(fit_.n_points), k = p + 1.0;
    if (n > k + 1.0) {
      // With the constants of a normal likelihood left out as in the main fit's criterion.
      fit_.aicc = 2.0 * maximum_.minus_log - static_cast<double>(measured_.size()) + 2.0 * k +
                  2.0 * k * (k + 1.0) / (n - k - 1.0);
    }
  }

  /// Standard error of the parameter at this place of `free_` (or of a constant's).
  [[nodiscard]] std::optional<double> error(Eigen::Index place) const {
    if (maximum_.covariance.size() == 0) return std::nullopt;
    return std::sqrt(maximum_.covariance(place, place));
  }

  void write(int p) {
    const numerics::Vector& m = maximum_.parameters;
    const double t = two_sided_t(options_, static_cast<int>(measured_.size()) - p);
    const Eigen::Index b = options_.fixed_basal ? 0 : 1; // place of emax among the free ones
    set("basal", options_.fixed_basal ? Estimate{*options_.fixed_basal, {}, {}, {}, "fixed"}
                                      : wald(m(0), error(0), t));
    fill_fixed_slope();
    const bool above = m(2) > levels_.highest_log() + kFarOut, below = m(2) < levels_.lowest_log() - kFarOut;
    if (!maximum_.converged || above || below) return runs_away(above, below);
    set("emax", wald(m(1), error(b), t));
    if (!fixed_nh_) set("nh", wald_of_log(m(3), error(b + 2), t));
    set("effect_max", wald(m(1) - m(0), effect_error(b), t));
    if (heavily_censored()) {
      add_flag(fit_, flags::kHeavilyCensored,
               "more than a third of the responses between 20 and 80 % of the effect are only limits");
      return;
    }
    set("pec50", wald(-m(2), error(b + 1), t));
    set("ec50_mol_per_l", antilog(*fit_.find("pec50")));
    for (const auto& value :
         {fit_.find("pec50")->estimate, fit_.find("pec50")->ci_low, fit_.find("pec50")->ci_high}) {
      if (value && (-*value < levels_.lowest_log() || -*value > levels_.highest_log())) {
        add_flag(fit_, flags::kExtrapolated,
                 "the EC50 or one of its limits lies outside the concentrations tested");
      }
    }
  }

  void runs_away(bool above, bool below) {
    if (!above && !below) {
      add_flag(fit_, flags::kNotConverged,
               "the search ended after " + std::to_string(maximum_.iterations) + " steps without a maximum");
      return;
    }
    add_flag(fit_, above ? flags::kUpperPlateauOpen : flags::kLowerPlateauOpen,
             above
                 ? "the plateau at high concentration was not reached: the likelihood has no finite maximum"
                 : "the plateau at low concentration was not reached: the likelihood has no finite maximum");
  }

  [[nodiscard]] std::optional<double> effect_error(Eigen::Index b) const {
    if (b == 0) return error(0);
    if (maximum_.covariance.size() == 0) return std::nullopt;
    const numerics::Matrix& c = maximum_.covariance;
    return std::sqrt(c(0, 0) + c(1, 1) - 2.0 * c(0, 1));
  }

  [[nodiscard]] bool heavily_censored() const {
    const numerics::Vector& m = maximum_.parameters;
    const auto is_middle = [&](Molar concentration) {
      if (concentration.value() == 0.0) return false;
      const double g = logistic(std::exp(m(3)) * std::log(10.0) * (std::log10(concentration.value()) - m(2)));
      return g >= 0.2 && g <= 0.8;
    };
    std::size_t middle = 0, limits = 0;
    for (const CurvePoint& point : measured_)
      middle += is_middle(point.concentration) ? 1U : 0U;
    for (const CensoredPoint& point : censored_)
      limits += is_middle(point.concentration) ? 1U : 0U;
    return 3 * limits > middle + limits;
  }

  void fill_fixed_slope() {
    if (fixed_nh_) set("nh", {*fixed_nh_, {}, {}, {}, "fixed"});
  }

  void set(const char* name, const Estimate& value) {
    for (auto* list : {&fit_.parameters, &fit_.derived}) {
      for (NamedEstimate& one : *list) {
        if (one.name == name) one.value = value;
      }
    }
  }

  std::span<const CurvePoint> measured_;
  std::span<const CensoredPoint> censored_;
  const FitOptions& options_;
  std::optional<double> fixed_nh_;
  CurveFit& fit_;
  CensoredLikelihood likelihood_;
  Levels levels_;
  std::vector<Eigen::Index> free_;
  LikelihoodMaximum maximum_;
};

bool all_usable(std::span<const CurvePoint> measured, std::span<const CensoredPoint> censored) {
  const auto is_concentration = [](Molar c) { return c.value() >= 0.0 && std::isfinite(c.value()); };
  for (const CurvePoint& point : measured) {
    if (!is_concentration(point.concentration) || !(point.weight > 0.0) || !std::isfinite(point.weight)) {
      return false;
    }
  }
  for (const CensoredPoint& point : censored) {
    if (!is_concentration(point.concentration) || !std::isfinite(point.limit)) return false;
  }
  return true;
}

} // namespace

CurveFit fit_censored(std::span<const CurvePoint> measured, std::span<const CensoredPoint> censored,
                      Model model, const FitOptions& options) {
  CurveFit fit = empty_fit(model, "censored");
  std::vector<CurvePoint> usable;
  for (const CurvePoint& point : measured) {
    if (std::isfinite(point.response)) usable.push_back(point);
  }
  fit.n_points = usable.size() + censored.size();
  fit.n_dropped = measured.size() - usable.size();
  const std::optional<double> fixed_nh = model == Model::hill_unit_slope ? 1.0 : options.fixed_nh;
  if (model != Model::hill && model != Model::hill_unit_slope) {
    add_flag(fit, flags::kDeclined, "limits are only fitted with the models hill and hill_unit_slope");
  } else if (const Done checked = options.check(); !checked) {
    add_flag(fit, flags::kDeclined, checked.error().what);
  } else if (!all_usable(usable, censored)) {
    add_flag(fit, flags::kDeclined, "a concentration, weight or limit cannot be used");
  } else {
    double largest = largest_response(usable, options);
    for (const CensoredPoint& point : censored)
      largest = std::max(largest, std::abs(point.limit));
    const ResponseScale scale(largest);
    std::vector<CensoredPoint> limits(censored.begin(), censored.end());
    for (CensoredPoint& point : limits)
      point.limit = scale.down(point.limit);
    const std::vector<CurvePoint> scaled = scale.down(usable);
    const FitOptions scaled_options = scale.down(options);
    CensoredFitter(scaled, limits, scaled_options, fixed_nh, fit).run();
    scale.restore(fit, model, usable.size());
  }
  sort_flags(fit);
  return fit;
}

} // namespace chronodrome::pharmacology
