// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <vector>

#include "pharmacology/limit_models.h"
#include "pharmacology/profile.h"
#include "pharmacology/separable.h"

namespace chronodrome::pharmacology {

/// What is held in a Hill fit from the outset.
struct HillConstraints {
  std::optional<double> nh, basal;

  /// Parameters left to fit.
  [[nodiscard]] int parameters() const { return 4 - (nh ? 1 : 0) - (basal ? 1 : 0); }
  /// Indices of log10 EC50 and ln nh (if it is fitted) among the shape's parameters.
  [[nodiscard]] std::vector<std::size_t> free_shape() const;
};

/// The numbers a Hill profile can run over.
enum class HillParameter { basal, emax, effect, location, log_slope };

/// A Hill fit of `levels` as a separable problem: columns basal and emax, or emax alone if basal is fixed.
SeparableProblem hill_problem(const Levels& levels, const HillShape& shape, const HillConstraints& held);

/// Nodes of the start grid: log10 EC50 over the tested range and a decade (`reach`) beyond, and ln nh.
std::vector<double> location_nodes(const Levels& levels, double reach, double spacing);
std::vector<double> slope_nodes(const HillConstraints& held);

/// Where a Hill fit has its least sum of squares.
struct HillOptimum {
  enum class Kind {
    finite,        ///< at finite parameters
    location_up,   ///< as EC50 and |emax| grow without end: a power law
    location_down, ///< as EC50 falls to 0 and |basal| grows: an inverse power law (no control)
    step,          ///< as nh grows without end
    rest,          ///< control against one level for all doses
    line,          ///< as nh falls to 0 without a control: a straight line in log C
  };
  Kind kind = Kind::finite;
  SeparableMinimum minimum;              ///< the best at finite parameters
  numerics::LeastSquaresSummary summary; ///< of the final search
  double rss = 0.0;                      ///< the least, or its limit
};

/// Grid, descent from up to three of its minima and from beside the limit models, final search.
HillOptimum find_hill_optimum(const Levels& levels, const HillShape& shape, const HillConstraints& held,
                              const HillLimits& limits);

/// The Hill fit with one parameter held.
class ConstrainedHill final : public ConstrainedFit {
public:
  /// `start`: log10 EC50 and ln nh where the profile starts. `limits` must outlive the object.
  ConstrainedHill(const Levels& levels, const HillShape& shape, const HillConstraints& held,
                  const HillLimits& limits, HillParameter parameter, std::vector<double> start);

  double follow(double held) override;
  double search(double held) override;
  void keep() override { kept_ = theta_; }
  void restart() override { kept_ = home_; }
  /// The minimum found last becomes the one where profiles start.
  void settle() { home_ = kept_ = theta_; }

private:
  void hold(double value);

  [[nodiscard]] double with_limit(double rss, double held) const;

  const Levels& levels_;
  const HillLimits& limits_;
  HillConstraints held_;
  HillParameter parameter_;
  SeparableProblem problem_;
  std::vector<std::size_t> free_;
  std::vector<double> home_, kept_, theta_;
};

} // namespace chronodrome::pharmacology
