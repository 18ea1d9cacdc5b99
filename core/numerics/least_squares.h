// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <functional>
#include <optional>

#include <Eigen/Core>

#include "base/result.h"

namespace chronodrome::numerics {

using Vector = Eigen::VectorXd;
using Matrix = Eigen::MatrixXd;

/// The least-squares solution of design x coefficients = observed.
struct LinearFit {
  Vector coefficients;    ///< one a column; 0 for columns that the others already span
  Vector residuals;       ///< observed - design x coefficients
  double rss = -1.0;      ///< sum of squared residuals; -1: not solved
  int rank = 0;           ///< number of independent columns
  double condition = 0.0; ///< of the columns scaled to unit length; infinite below full rank
  Matrix inverse_normal;  ///< (design' design)^-1; times RSS / (n - p) the covariance. Empty below full rank

  [[nodiscard]] bool full_rank() const { return rss >= 0.0 && rank == coefficients.size(); }
};

/// Householder QR with column pivoting; a column counts as dependent if less than 1e-12 of its length stands
/// off the others. `design`: n x p, `observed`: n, both finite; multiply rows by the square root of their
/// weight for weighted least squares. A wrong shape (n < 1, p < 1, different n) leaves the fit not solved.
LinearFit solve_linear(const Matrix& design, const Vector& observed);

/// Residuals and derivatives of a problem in `p` parameters: fills `residuals` (n) and, if not null,
/// `jacobian` (n x p, d residual / d parameter). False, or any number that is not finite, means that the
/// model has no value there; the solver then turns back.
using Residuals = std::function<bool(const Vector& parameters, Vector& residuals, Matrix* jacobian)>;

struct LeastSquaresOptions {
  int most_iterations = 3000;    ///< accepted and rejected steps together
  double relative_offset = 1e-6; ///< see Termination::small_offset
  double first_radius = 1.0;     ///< first step at most this many times the scaled length of the start
  int polish_steps = 20;         ///< undamped Gauss-Newton steps after convergence, at most
  double exact_fraction = 1e-20; ///< see Termination::exact_data

  [[nodiscard]] Done check() const;
};

/// Why the solver stopped. r: residuals, Q: orthonormal basis of the Jacobian's columns.
enum class Termination {
  not_run,         ///< the default: nothing was solved
  small_offset,    ///< |Q'r| < relative_offset |r - QQ'r| (Bates & Watts 1981): converged
  small_step,      ///< undamped relative step < 1e-10 with a relative fall of the RSS < 1e-14; or an offset
                   ///< below 1e-3 where rounding hides any further fall: converged
  exact_data,      ///< RSS <= exact_fraction x sum of squares at zero model (`scale`): converged
  singular,        ///< stationary, but the data do not determine every parameter: not converged
  iteration_limit, ///< not converged; the best point so far is kept
  no_descent,      ///< no step, however short, made the RSS fall: not converged
  undefined_start, ///< the model has no value at the start
  too_few_data,    ///< fewer residuals than parameters
};

/// What the solver reached. A default-made summary is a failure.
struct LeastSquaresSummary {
  Termination termination = Termination::not_run;
  Vector parameters;
  Vector residuals;
  double rss = -1.0;
  int iterations = 0;
  int evaluations = 0;
  double offset = -1.0;   ///< |Q'r| / |r - QQ'r| at the end: the gradient measure
  double condition = 0.0; ///< of the Jacobian with columns scaled to unit length
  Matrix inverse_normal;  ///< (J'J)^-1 at the end; empty if singular

  [[nodiscard]] bool converged() const {
    return termination == Termination::small_offset || termination == Termination::small_step ||
           termination == Termination::exact_data;
  }
  /// Square roots of the diagonal of RSS / (n - p) (J'J)^-1. Empty without covariance or if n = p.
  [[nodiscard]] Vector standard_errors() const;
};

/// Nonlinear least squares: Levenberg-Marquardt within a trust region on parameters scaled by the largest
/// column norms met so far, steps by QR (never the normal equations) and the singular values of R; then
/// undamped Gauss-Newton steps as long as the offset falls and the RSS does not rise.
/// `scale`: sum of squares that counts as all of the data for Termination::exact_data (sum of y^2); where it
/// is missing, exact data end as small_step.
/// Requires: options.check() passes. Accuracy: the 16 NIST StRD sets of the tests, relative 1e-7 or better.
/// Source: Levenberg 1944; Marquardt 1963; Moré JJ (1978) Springer LNM 630:105-116 (scaling
/// and trust region); Bates DM, Watts DG (1981) Technometrics 23:179-183 (relative offset).
LeastSquaresSummary solve_nonlinear(const Residuals& residuals, const Vector& start,
                                    const LeastSquaresOptions& options = {},
                                    std::optional<double> scale = std::nullopt);

} // namespace chronodrome::numerics
