// Chronodrome, GPL-3.0-or-later.
//
// Symbols: r residuals, J their Jacobian, D the diagonal of column scales, delta the step, q = D delta the
// scaled step, J D^-1 = Q R = Q U S V', b = -U' Q' r, s the diagonal of S, lambda the damping:
//   q(lambda) = V diag(s / (s^2 + lambda)) b,   |q| falls as lambda grows; q(0) is the Gauss-Newton step.
#include "numerics/least_squares.h"

#include <algorithm>
#include <cmath>
#include <limits>

#include <Eigen/QR>
#include <Eigen/SVD>

namespace chronodrome::numerics {

namespace {

constexpr double kEpsilon = std::numeric_limits<double>::epsilon();
constexpr double kNegligible = 1e-13; // of the largest singular value: the direction is undetermined

constexpr double kAlmost = 1e-3; // an offset that rounding alone may keep from falling further

/// The linear model at one point.
struct Linearised {
  Vector s, b;
  Matrix v;
  double offset = 0.0;
  Eigen::Index rank = 0;
};

/// The point the solver stands on.
struct State {
  Vector parameters, residuals;
  Matrix jacobian;
  double rss = 0.0;
};

bool evaluate(const Residuals& residuals, const Vector& at, State& state, bool with_jacobian) {
  state.parameters = at;
  if (!residuals(at, state.residuals, with_jacobian ? &state.jacobian : nullptr)) return false;
  state.rss = state.residuals.squaredNorm();
  return std::isfinite(state.rss) && (!with_jacobian || state.jacobian.allFinite());
}

void grow_scales(Vector& scales, const Matrix& jacobian) {
  for (Eigen::Index j = 0; j < scales.size(); ++j)
    scales(j) = std::max(scales(j), jacobian.col(j).norm());
}

Vector safe(const Vector& scales) {
  return scales.unaryExpr([](double scale) { return scale > 0.0 ? scale : 1.0; });
}

/// The offset is taken on columns of unit length, so that a parameter whose column has died away is not
/// taken for a solved one.
Linearised linearise(const State& state, const Vector& scales) {
  const Eigen::Index p = scales.size();
  const Vector lengths = safe(state.jacobian.colwise().norm().transpose());
  const Eigen::HouseholderQR<Matrix> qr(state.jacobian * lengths.cwiseInverse().asDiagonal());
  const Vector rotated = qr.householderQ().adjoint() * state.residuals;
  const Matrix r = qr.matrixQR().topRows(p).template triangularView<Eigen::Upper>();
  const Vector rescale = lengths.cwiseQuotient(safe(scales));
  const Eigen::JacobiSVD<Matrix> svd(r * rescale.asDiagonal(), Eigen::ComputeFullU | Eigen::ComputeFullV);
  Linearised linear;
  linear.s = svd.singularValues();
  linear.v = svd.matrixV();
  linear.b = -(svd.matrixU().adjoint() * rotated.head(p));
  while (linear.rank < p && linear.s(linear.rank) > kNegligible * linear.s(0))
    ++linear.rank;
  const double outside = rotated.tail(rotated.size() - p).norm();
  linear.offset = outside > 0.0 ? rotated.head(p).norm() / outside : std::numeric_limits<double>::infinity();
  return linear;
}

Vector scaled_step(const Linearised& linear, double lambda) {
  Vector weighted = Vector::Zero(linear.s.size());
  for (Eigen::Index i = 0; i < linear.rank; ++i) {
    weighted(i) = linear.b(i) * linear.s(i) / (linear.s(i) * linear.s(i) + lambda);
  }
  return linear.v * weighted;
}

double step_length(const Linearised& linear, double lambda) {
  double sum = 0.0;
  for (Eigen::Index i = 0; i < linear.rank; ++i) {
    const double part = linear.b(i) * linear.s(i) / (linear.s(i) * linear.s(i) + lambda);
    sum += part * part;
  }
  return std::sqrt(sum);
}

/// The damping whose step is `radius` long, within a tenth; 0 if the Gauss-Newton step is shorter.
double damping_for(const Linearised& linear, double radius) {
  if (step_length(linear, 0.0) <= 1.1 * radius) return 0.0;
  double low = 0.0;
  double high = linear.b.norm() * linear.s(0) / radius; // |q| <= |b| s / lambda
  for (int i = 0; i < 100; ++i) {
    const double middle = low > 0.0 ? std::sqrt(low * high) : high * 1e-3;
    const double length = step_length(linear, middle);
    if (length > 1.1 * radius) {
      low = middle;
    } else if (length < 0.9 * radius) {
      high = middle;
    } else {
      return middle;
    }
  }
  return high;
}

/// The fall of the RSS that the linear model promises.
double promised_fall(const Linearised& linear, double lambda) {
  double sum = 0.0;
  for (Eigen::Index i = 0; i < linear.rank; ++i) {
    const double left = lambda / (linear.s(i) * linear.s(i) + lambda);
    sum += linear.b(i) * linear.b(i) * (1.0 - left * left);
  }
  return sum;
}

class Solver {
public:
  Solver(const Residuals& residuals, const LeastSquaresOptions& options, double scale)
      : residuals_(residuals), options_(options), scale_(scale), exact_rss_(options.exact_fraction * scale) {}

  LeastSquaresSummary solve(const Vector& start) {
    summary_.parameters = start;
    if (!evaluate_at(start, state_, true)) return stop(Termination::undefined_start);
    if (state_.residuals.size() < start.size()) return stop(Termination::too_few_data);
    scales_ = Vector::Zero(start.size());
    grow_scales(scales_, state_.jacobian);
    radius_ = options_.first_radius * safe(scales_).cwiseProduct(start).norm();
    if (!(radius_ > 0.0)) radius_ = options_.first_radius;
    Termination why = Termination::iteration_limit;
    while (summary_.iterations < options_.most_iterations && !iterate(why)) {
    }
    const bool exact = why == Termination::exact_data;
    if (exact || why == Termination::small_offset || why == Termination::small_step) polish(exact);
    return stop(why);
  }

private:
  bool evaluate_at(const Vector& at, State& state, bool with_jacobian) {
    ++summary_.evaluations;
    return evaluate(residuals_, at, state, with_jacobian);
  }

  /// One accepted step, or the reason to stop.
  bool iterate(Termination& why) {
    if (state_.rss <= exact_rss_) return why = Termination::exact_data, true;
    const Linearised linear = linearise(state_, scales_);
    if (linear.offset < options_.relative_offset) return why = Termination::small_offset, true;
    while (summary_.iterations < options_.most_iterations) {
      ++summary_.iterations;
      const double lambda = damping_for(linear, radius_);
      const Vector q = scaled_step(linear, lambda);
      const Vector next = state_.parameters + q.cwiseQuotient(safe(scales_));
      const bool has_value = evaluate_at(next, trial_, false);
      const double fall = has_value ? state_.rss - trial_.rss : -1.0;
      const double gain = has_value ? fall / promised_fall(linear, lambda) : -1.0;
      const double length = q.norm();
      if (!(gain > 0.25)) {
        radius_ = length / (has_value ? 4.0 : 10.0);
      } else if (gain > 0.75) {
        radius_ = std::max(radius_, 2.0 * length);
      }
      if (fall > 0.0) {
        if (!evaluate_at(next, trial_, true)) continue;
        const double fraction = fall / state_.rss;
        std::swap(state_, trial_);
        const bool settled = lambda == 0.0 && relative(length) < 1e-10 && fraction < 1e-14;
        if (settled && linear.rank == q.size()) return why = Termination::small_step, true;
        grow_scales(scales_, state_.jacobian);
        return false;
      }
      if (relative(length) < 4.0 * kEpsilon) {
        // No step makes the RSS fall any more. At a minimum that rounding hides, the undamped step is tiny.
        const bool hidden = linear.rank == q.size() && relative(step_length(linear, 0.0)) < 1e-8;
        return why = hidden ? Termination::small_step : Termination::no_descent, true;
      }
      if (linear.rank == q.size() && linear.offset < kAlmost && promised_fall(linear, lambda) < noise()) {
        return why = Termination::small_step, true; // what is left to gain cannot be seen
      }
    }
    return false;
  }

  /// How much a sum of squares of residuals errs that were each rounded like the data.
  [[nodiscard]] double noise() const {
    return 8.0 * kEpsilon * std::sqrt(std::max(scale_, state_.rss) * state_.rss);
  }

  /// A scaled step against the scaled parameters.
  [[nodiscard]] double relative(double length) const {
    return length / std::max(safe(scales_).cwiseProduct(state_.parameters).norm(), 1e-300);
  }

  void polish(bool exact) {
    double offset = linearise(state_, scales_).offset;
    for (int i = 0; i < options_.polish_steps; ++i) {
      const Linearised linear = linearise(state_, scales_);
      const Vector next = state_.parameters + scaled_step(linear, 0.0).cwiseQuotient(safe(scales_));
      if (!evaluate_at(next, trial_, true)) return;
      const double next_offset = linearise(trial_, scales_).offset;
      // Here the RSS is within offset^2 of its minimum, a relative 1e-12, which is below what a sum of
      // squares of rounded residuals can show; the offset still tells better from worse. With exact data it
      // is the other way round: the offset is rounding over rounding.
      const bool better =
          exact ? trial_.rss < state_.rss : next_offset < offset && trial_.rss <= state_.rss * (1.0 + 1e-12);
      if (!better) return;
      offset = next_offset;
      std::swap(state_, trial_);
    }
  }

  LeastSquaresSummary stop(Termination why) {
    summary_.termination = why;
    if (why == Termination::undefined_start || why == Termination::too_few_data) return summary_;
    summary_.parameters = state_.parameters;
    summary_.residuals = state_.residuals;
    summary_.rss = state_.rss;
    Vector lengths = state_.jacobian.colwise().norm();
    const Linearised linear = linearise(state_, lengths);
    const Eigen::Index p = lengths.size();
    summary_.offset = linear.offset;
    if (linear.rank < p || !(lengths.minCoeff() > 0.0)) {
      summary_.condition = std::numeric_limits<double>::infinity();
      if (summary_.converged()) summary_.termination = Termination::singular;
      return summary_;
    }
    summary_.condition = linear.s(0) / linear.s(p - 1);
    const Matrix half =
        lengths.cwiseInverse().asDiagonal() * (linear.v * linear.s.cwiseInverse().asDiagonal());
    summary_.inverse_normal = half * half.transpose();
    return summary_;
  }

  const Residuals& residuals_;
  const LeastSquaresOptions& options_;
  double scale_; ///< sum of squares of the data, 0 if not known
  double exact_rss_;
  LeastSquaresSummary summary_;
  State state_, trial_;
  Vector scales_;
  double radius_ = 0.0;
};

} // namespace

Done LeastSquaresOptions::check() const {
  if (most_iterations >= 1 && relative_offset > 0.0 && first_radius > 0.0 && polish_steps >= 0 &&
      exact_fraction >= 0.0) {
    return done();
  }
  return Error{ErrorCode::bad_usage,
               "",
               {},
               "the least-squares options hold a limit that is zero or negative",
               "use the defaults, or limits above zero"};
}

Vector LeastSquaresSummary::standard_errors() const {
  const Eigen::Index freedom = residuals.size() - parameters.size();
  if (inverse_normal.size() == 0 || freedom < 1) return {};
  return (inverse_normal.diagonal() * (rss / static_cast<double>(freedom))).cwiseSqrt();
}

LeastSquaresSummary solve_nonlinear(const Residuals& residuals, const Vector& start,
                                    const LeastSquaresOptions& options, std::optional<double> scale) {
  return Solver(residuals, options, scale.value_or(0.0)).solve(start);
}

} // namespace chronodrome::numerics
