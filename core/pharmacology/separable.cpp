// Chronodrome, GPL-3.0-or-later.
//
// Symbols: W weights, Phi columns, Q R = W^(1/2) Phi, c coefficients, r = (I - QQ') W^(1/2) (y - known),
// J = (I - QQ') W^(1/2) d(known + Phi c)/d theta with c held: the residual changes by -J d theta.
#include "pharmacology/separable.h"

#include <algorithm>
#include <cassert>
#include <cmath>
#include <limits>

namespace chronodrome::pharmacology {

namespace {

constexpr double kInfinity = std::numeric_limits<double>::infinity();
constexpr std::size_t kMostFree = 4;
using Small = std::array<double, kMostFree>;
using SmallMatrix = std::array<Small, kMostFree>;

double dot(const double* a, const double* b, std::size_t n) {
  double sum = 0.0;
  for (std::size_t i = 0; i < n; ++i)
    sum += a[i] * b[i];
  return sum;
}

void subtract(double* a, double factor, const double* b, std::size_t n) {
  for (std::size_t i = 0; i < n; ++i)
    a[i] -= factor * b[i];
}

/// (A + lambda diag A) step = g by Cholesky, leaving out parameters without any slope; false if the matrix is
/// not positive definite.
bool solve_damped(const SmallMatrix& a, const Small& g, std::size_t q, double lambda, Small& step) {
  SmallMatrix l{};
  for (std::size_t j = 0; j < q; ++j) {
    for (std::size_t k = 0; k <= j; ++k) {
      if (j == k && a[j][j] == 0.0) {
        l[j][j] = 1.0; // its row and column are 0: the step is 0
        continue;
      }
      double sum = a[j][k] * (j == k ? 1.0 + lambda : 1.0);
      for (std::size_t m = 0; m < k; ++m)
        sum -= l[j][m] * l[k][m];
      if (j == k) {
        if (!(sum > 1e-14 * a[j][j]) || !(sum > 0.0)) return false;
        l[j][j] = std::sqrt(sum);
      } else {
        l[j][k] = sum / l[k][k];
      }
    }
  }
  for (std::size_t j = 0; j < q; ++j) {
    double sum = g[j];
    for (std::size_t k = 0; k < j; ++k)
      sum -= l[j][k] * step[k];
    step[j] = sum / l[j][j];
  }
  for (std::size_t j = q; j-- > 0;) {
    double sum = step[j];
    for (std::size_t k = j + 1; k < q; ++k)
      sum -= l[k][j] * step[k];
    step[j] = sum / l[j][j];
  }
  return true;
}

} // namespace

SeparableProblem::SeparableProblem(const Levels& levels, const Shape& shape, std::vector<Column> columns,
                                   Column known)
    : levels_(levels), shape_(shape), columns_(std::move(columns)), known_(known), n_(levels.size()),
      root_weight_(n_), value_(2 * shape.functions() * n_),
      slope_(shape.functions() * shape.parameters() * n_), columns_values_(columns_.size() * n_),
      basis_(columns_.size() * n_), residual_(n_), jacobian_(shape.parameters() * n_) {
  assert(columns_.size() <= 3 && shape.parameters() <= kMostFree);
  for (std::size_t i = 0; i < n_; ++i)
    root_weight_[i] = std::sqrt(levels.weight[i]);
}

bool SeparableProblem::project(std::span<const double> theta, bool with_slopes) {
  shape_.evaluate(theta, levels_.log10_concentration, value_.data(), with_slopes ? slope_.data() : nullptr);
  const std::size_t functions = shape_.functions();
  const auto combined = [&](const Column& c, std::size_t i) {
    double sum = c.constant;
    for (std::size_t m = 0; m < functions; ++m) {
      sum += c.function[m] * value_[m * n_ + i] + c.complement[m] * value_[(functions + m) * n_ + i];
    }
    return sum;
  };
  for (std::size_t i = 0; i < n_; ++i) {
    residual_[i] = root_weight_[i] * (levels_.mean[i] - combined(known_, i));
  }
  std::array<double, 3> inner{};
  for (std::size_t c = 0; c < columns_.size(); ++c) {
    double* v = column(c);
    double* q = basis_.data() + c * n_;
    for (std::size_t i = 0; i < n_; ++i)
      q[i] = v[i] = root_weight_[i] * combined(columns_[c], i);
    const double length = std::sqrt(dot(v, v, n_));
    r_[c].fill(0.0);
    for (int pass = 0; pass < 2; ++pass) { // twice is enough: orthogonal to rounding
      for (std::size_t k = 0; k < c; ++k) {
        if (!independent_[k]) continue;
        const double* basis = basis_.data() + k * n_;
        const double part = dot(basis, q, n_);
        r_[k][c] = pass == 0 ? part : r_[k][c] + part;
        subtract(q, part, basis, n_);
      }
    }
    const double left = std::sqrt(dot(q, q, n_));
    independent_[c] = left > 1e-10 * length && left > 0.0;
    r_[c][c] = left;
    if (!independent_[c]) continue;
    for (std::size_t i = 0; i < n_; ++i)
      q[i] /= left;
    for (int pass = 0; pass < 2; ++pass) {
      const double part = dot(q, residual_.data(), n_);
      inner[c] += part;
      subtract(residual_.data(), part, q, n_);
    }
  }
  for (std::size_t c = columns_.size(); c-- > 0;) {
    coefficient_[c] = 0.0;
    if (!independent_[c]) continue;
    double sum = inner[c];
    for (std::size_t k = c + 1; k < columns_.size(); ++k)
      sum -= r_[c][k] * coefficient_[k];
    coefficient_[c] = sum / r_[c][c];
  }
  level_rss_ = dot(residual_.data(), residual_.data(), n_);
  return std::isfinite(level_rss_);
}

void SeparableProblem::slopes(std::span<const std::size_t> free, bool projected) {
  std::array<double, 2> factor{};
  for (std::size_t m = 0; m < shape_.functions(); ++m) {
    factor[m] = known_.function[m] - known_.complement[m];
    for (std::size_t c = 0; c < columns_.size(); ++c) {
      factor[m] += coefficient_[c] * (columns_[c].function[m] - columns_[c].complement[m]);
    }
  }
  for (std::size_t f = 0; f < free.size(); ++f) {
    double* j = jacobian_.data() + f * n_;
    for (std::size_t i = 0; i < n_; ++i) {
      double sum = 0.0;
      for (std::size_t m = 0; m < shape_.functions(); ++m) {
        sum += factor[m] * slope_[(m * shape_.parameters() + free[f]) * n_ + i];
      }
      j[i] = root_weight_[i] * sum;
    }
    if (!projected) continue;
    const double before = dot(j, j, n_);
    for (std::size_t c = 0; c < columns_.size(); ++c) {
      const double* q = basis_.data() + c * n_;
      if (independent_[c]) subtract(j, dot(q, j, n_), q, n_);
    }
    // What the coefficients can undo leaves only rounding, which must not be taken for a direction: the curve
    // is then its own limit (a power law, a step) and no longer depends on this parameter.
    if (dot(j, j, n_) < 1e-20 * before) std::fill(j, j + n_, 0.0);
  }
}

double SeparableProblem::rss(std::span<const double> theta) {
  return project(theta, false) ? level_rss_ + levels_.pure_error : kInfinity;
}

SeparableMinimum SeparableProblem::at(std::span<const double> theta) {
  SeparableMinimum minimum;
  minimum.rss = rss(theta);
  minimum.theta.assign(theta.begin(), theta.end());
  minimum.coefficients.assign(coefficient_.begin(),
                              coefficient_.begin() + static_cast<std::ptrdiff_t>(columns_.size()));
  return minimum;
}

SeparableMinimum SeparableProblem::descend(std::vector<double> start, std::span<const std::size_t> free) {
  const std::size_t q = free.size();
  std::vector<double> theta = std::move(start), trial;
  double lambda = 1e-4;
  int iteration = 0;
  for (; iteration < 400 && q > 0; ++iteration) {
    if (!project(theta, true)) break;
    slopes(free, true);
    const double here = level_rss_;
    SmallMatrix a{};
    Small g{}, step{};
    for (std::size_t j = 0; j < q; ++j) {
      const double* column_j = jacobian_.data() + j * n_;
      g[j] = dot(column_j, residual_.data(), n_);
      for (std::size_t k = 0; k <= j; ++k)
        a[j][k] = dot(column_j, jacobian_.data() + k * n_, n_);
    }
    const double enough = 1e-13 * (here + levels_.pure_error) + 1e-26 * levels_.sum_squares;
    bool moved = false, settled = false;
    for (int attempt = 0; attempt < 30 && !moved && !settled; ++attempt) {
      if (!solve_damped(a, g, q, lambda, step)) {
        settled = lambda > 1e8; // no direction is left
        lambda = std::max(10.0 * lambda, 1e-6);
        continue;
      }
      double promised = 0.0;
      for (std::size_t j = 0; j < q; ++j)
        promised += step[j] * g[j];
      settled = promised <= enough;
      // A longer step, in decades or in ln nh, leaves the region where the linear model means anything.
      double longest = 0.0;
      for (std::size_t j = 0; j < q; ++j)
        longest = std::max(longest, std::abs(step[j]));
      const double shorten = longest > 1.5 ? 1.5 / longest : 1.0;
      trial = theta;
      for (std::size_t j = 0; j < q; ++j)
        trial[free[j]] += shorten * step[j];
      if (project(trial, false) && level_rss_ < here) {
        moved = true;
        theta = trial;
        lambda = std::max(lambda / 10.0, 1e-12);
      } else {
        lambda = std::max(10.0 * lambda, 1e-6);
      }
    }
    if (settled || !moved) break;
  }
  SeparableMinimum minimum = at(theta);
  minimum.iterations = iteration;
  return minimum;
}

SeparableMinimum SeparableProblem::refine(std::vector<double> start, std::span<const std::size_t> free,
                                          numerics::LeastSquaresSummary& summary) {
  std::vector<double> theta = std::move(start);
  numerics::Vector from(static_cast<Eigen::Index>(free.size()));
  for (std::size_t j = 0; j < free.size(); ++j)
    from(static_cast<Eigen::Index>(j)) = theta[free[j]];
  const auto put = [&](const numerics::Vector& values) {
    for (std::size_t j = 0; j < free.size(); ++j)
      theta[free[j]] = values(static_cast<Eigen::Index>(j));
  };
  const numerics::Residuals residuals = [&](const numerics::Vector& values, numerics::Vector& r,
                                            numerics::Matrix* jacobian) {
    put(values);
    if (!project(theta, jacobian != nullptr)) return false;
    const auto rows = static_cast<Eigen::Index>(n_);
    r = Eigen::Map<const numerics::Vector>(residual_.data(), rows);
    if (!jacobian) return true;
    slopes(free, true);
    *jacobian = -Eigen::Map<const numerics::Matrix>(jacobian_.data(), rows, values.size());
    return true;
  };
  numerics::LeastSquaresOptions options;
  options.most_iterations = 200; // the start is already a minimum of the grid search
  summary = numerics::solve_nonlinear(residuals, from, options, levels_.sum_squares);
  put(summary.parameters);
  return at(theta);
}

numerics::Matrix SeparableProblem::jacobian(const SeparableMinimum& minimum,
                                            std::span<const std::size_t> free) {
  const auto rows = static_cast<Eigen::Index>(n_);
  const auto linear = static_cast<Eigen::Index>(columns_.size());
  numerics::Matrix result(rows, linear + static_cast<Eigen::Index>(free.size()));
  project(minimum.theta, true);
  std::copy(minimum.coefficients.begin(), minimum.coefficients.end(), coefficient_.begin());
  slopes(free, false);
  result.leftCols(linear) = Eigen::Map<const numerics::Matrix>(columns_values_.data(), rows, linear);
  result.rightCols(static_cast<Eigen::Index>(free.size())) =
      Eigen::Map<const numerics::Matrix>(jacobian_.data(), rows, static_cast<Eigen::Index>(free.size()));
  return result;
}

} // namespace chronodrome::pharmacology
