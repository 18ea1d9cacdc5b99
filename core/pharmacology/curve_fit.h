// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "base/quantity.h"

namespace chronodrome::pharmacology {

/// One response at one bath concentration (0: the control).
struct CurvePoint {
  Molar concentration;
  double response = 0.0;
  double weight = 1.0; ///< relative 1/variance, known before the fit; > 0
};

/// A number with its 95 % interval; a bound that the data do not give is missing.
struct Estimate {
  std::optional<double> estimate, se, ci_low, ci_high;
  std::string ci_method; ///< "profile", "wald", "fixed" (not estimated) or empty (no interval)
};

struct NamedEstimate {
  std::string name;
  Estimate value;
};

/// The result of fitting one curve (contract section 6). A default-made fit is not usable.
struct CurveFit {
  std::string model;
  std::string likelihood; ///< "gaussian" or "censored"
  std::size_t n_points = 0;
  std::vector<NamedEstimate> parameters; ///< in the model's documented order
  std::vector<NamedEstimate> derived;    ///< ec50_mol_per_l, effect_max
  std::optional<double> residual_sd, rss, aicc;
  int df = 0;
  bool converged = false;
  std::vector<std::string> flags;   ///< of the closed list
  std::string reason;               ///< one sentence for the first flag, if any
  std::vector<std::string> reasons; ///< one sentence for each flag, in the same order

  std::optional<double> response_p;    ///< P of the F test against "no response" (model_comparison.h)
  std::optional<double> trend_p;       ///< P of the linear trend of the response on the rank of concentration
  std::optional<double> lack_of_fit_p; ///< where concentrations are repeated
  std::optional<double> condition;     ///< of the derivatives with columns scaled to unit length
  int iterations = 0;                  ///< accepted steps from the best start
  std::size_t n_dropped = 0;           ///< points without a finite response, left out

  /// The parameter or derived number of that name, or null.
  [[nodiscard]] const Estimate* find(const std::string& name) const;
  [[nodiscard]] bool has_flag(std::string_view flag) const;
};

} // namespace chronodrome::pharmacology
