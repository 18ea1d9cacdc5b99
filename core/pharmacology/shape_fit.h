// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <vector>

#include "pharmacology/hill_fit.h"
#include "pharmacology/hill_problem.h"
#include "pharmacology/separable.h"
#include "pharmacology/wald.h"

namespace chronodrome::pharmacology {

/// The common course of the models whose limits come from standard errors: descent from each start, final
/// search, test for a response, scatter, covariance.
class ShapeFit {
public:
  ShapeFit(const Levels& levels, const FitOptions& options, SeparableProblem& problem,
           std::vector<std::size_t> free, CurveFit& fit);

  /// False if the fit ended as "no response" or without a minimum; then nothing more is to be filled.
  /// `one_component`: the Hill curve that the model becomes where its two components are one. A search
  /// without a minimum is "not separable" where the parameters are (condition number) or where the model is
  /// not significantly better than that curve.
  bool run(const std::vector<std::vector<double>>& starts,
           const std::optional<HillConstraints>& one_component = std::nullopt);

  [[nodiscard]] const SeparableMinimum& minimum() const { return minimum_; }
  /// Standard error of a function of coefficients (first) and free shape parameters; missing for exact data.
  [[nodiscard]] std::optional<double> error(const std::vector<double>& gradient) const;
  void set(const char* name, double value, const std::vector<double>& gradient);
  void set(const char* name, const Estimate& value);

private:
  [[nodiscard]] bool is_no_better_than(const HillConstraints& one_component) const;

  const Levels& levels_;
  const FitOptions& options_;
  SeparableProblem& problem_;
  std::vector<std::size_t> free_;
  CurveFit& fit_;
  SeparableMinimum minimum_;
  std::optional<Covariance> covariance_;
  double t_ = 0.0;
};

/// Ordered pairs of locations as starts (L1, ln nh, L2, ln nh), the best `most` by sum of squares.
std::vector<std::vector<double>> pair_starts(const Levels& levels, SeparableProblem& problem,
                                             const std::vector<double>& slopes, std::size_t most);

} // namespace chronodrome::pharmacology
