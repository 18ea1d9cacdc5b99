// Chronodrome, GPL-3.0-or-later.
//
// Symbols: m fitted response, s scatter, w weight, v = s / sqrt(w), r = y - m, u = (m - limit) / s for a
// lower limit and (limit - m) / s for an upper one; h = density(u) / P(u), whose slope is -h (h + u).
//   measured: ln v + r^2 / (2 v^2);  limits: -ln P(u).
#include "pharmacology/censored_likelihood.h"

#include <cmath>
#include <numbers>

#include <Eigen/Cholesky>

#include "numerics/distributions.h"
#include "pharmacology/shape.h"

namespace chronodrome::pharmacology {

namespace {

constexpr double kLn10 = std::numbers::ln10;
using Four = Eigen::Matrix<double, 4, 1>;
using FourByFour = Eigen::Matrix<double, 4, 4>;

/// The fitted response with its derivatives by basal, emax, log10 EC50 and ln nh.
struct Response {
  double value = 0.0;
  Four slope;
  FourByFour curvature;
};

Response response_at(double concentration, const numerics::Vector& p) {
  Response out;
  out.curvature.setZero();
  if (concentration == 0.0) {
    out.value = p(0);
    out.slope << 1.0, 0.0, 0.0, 0.0;
    return out;
  }
  const double steepness = std::exp(p(3)) * kLn10;
  const double z = steepness * (std::log10(concentration) - p(2));
  const double g = logistic(z), rest = logistic(-z), effect = p(1) - p(0);
  const double first = g * rest, second = first * (rest - g);
  const Eigen::Vector2d by(-steepness, z); // of z by log10 EC50 and ln nh
  Eigen::Matrix2d twice;
  twice << 0.0, -steepness, -steepness, z;
  const Eigen::Vector2d g_slope = first * by;
  const Eigen::Matrix2d g_curvature = second * by * by.transpose() + first * twice;
  out.value = p(0) * rest + p(1) * g;
  out.slope << rest, g, effect * g_slope;
  out.curvature.bottomRightCorner<2, 2>() = effect * g_curvature;
  out.curvature.block<1, 2>(0, 2) = -g_slope.transpose();
  out.curvature.block<1, 2>(1, 2) = g_slope.transpose();
  out.curvature.block<2, 1>(2, 0) = -g_slope;
  out.curvature.block<2, 1>(2, 1) = g_slope;
  return out;
}

/// A term's derivatives by the fitted response m and by t = ln s.
struct Term {
  double value = 0.0, m = 0.0, t = 0.0, mm = 0.0, mt = 0.0, tt = 0.0;
};

Term measured_term(double y, double weight, double m, double s) {
  const double v = s / std::sqrt(weight), a = (y - m) / v;
  return {std::log(v) + a * a / 2.0, -a / v, 1.0 - a * a, 1.0 / (v * v), 2.0 * a / v, 2.0 * a * a};
}

Term censored_term(const CensoredPoint& point, double m, double s) {
  const double sign = point.side == LimitSide::at_least ? 1.0 : -1.0;
  const double u = sign * (m - point.limit) / s;
  const double h = numerics::normal_hazard_below(u);
  const double bend = h * (h + u); // second derivative of -ln P by u
  // du/dm = sign / s, du/dt = -u, d2u/dm dt = -sign / s, d2u/dt2 = u.
  return {-numerics::log_normal_cdf(u), -h * sign / s,       h * u, bend / (s * s),
          (h - bend * u) * sign / s,    bend * u * u - h * u};
}

void add(const Term& term, const Response& response, numerics::Vector& gradient, numerics::Matrix& hessian) {
  gradient.head<4>() += term.m * response.slope;
  gradient(4) += term.t;
  hessian.topLeftCorner<4, 4>() +=
      term.mm * response.slope * response.slope.transpose() + term.m * response.curvature;
  hessian.block<4, 1>(0, 4) += term.mt * response.slope;
  hessian.block<1, 4>(4, 0) += term.mt * response.slope.transpose();
  hessian(4, 4) += term.tt;
}

} // namespace

double CensoredLikelihood::value(const numerics::Vector& at) const {
  const double s = std::exp(at(4));
  double sum = 0.0;
  for (const CurvePoint& point : measured_) {
    const double m = response_at(point.concentration.value(), at).value;
    sum += measured_term(point.response, point.weight, m, s).value;
  }
  for (const CensoredPoint& point : censored_) {
    sum += censored_term(point, response_at(point.concentration.value(), at).value, s).value;
  }
  return sum;
}

double CensoredLikelihood::derivatives(const numerics::Vector& at, numerics::Vector& gradient,
                                       numerics::Matrix& hessian) const {
  const double s = std::exp(at(4));
  gradient = numerics::Vector::Zero(kParameters);
  hessian = numerics::Matrix::Zero(kParameters, kParameters);
  double sum = 0.0;
  const auto take = [&](const Term& term, const Response& response) {
    sum += term.value;
    add(term, response, gradient, hessian);
  };
  for (const CurvePoint& point : measured_) {
    const Response response = response_at(point.concentration.value(), at);
    take(measured_term(point.response, point.weight, response.value, s), response);
  }
  for (const CensoredPoint& point : censored_) {
    const Response response = response_at(point.concentration.value(), at);
    take(censored_term(point, response.value, s), response);
  }
  return sum;
}

double CensoredLikelihood::rss(const numerics::Vector& at) const {
  double sum = 0.0;
  for (const CurvePoint& point : measured_) {
    const double off = point.response - response_at(point.concentration.value(), at).value;
    sum += point.weight * off * off;
  }
  return sum;
}

LikelihoodMaximum maximise(const CensoredLikelihood& likelihood, numerics::Vector start,
                           const std::vector<Eigen::Index>& free) {
  const auto q = static_cast<Eigen::Index>(free.size());
  LikelihoodMaximum found;
  found.parameters = std::move(start);
  numerics::Vector all_gradient, gradient(q);
  numerics::Matrix all_hessian, hessian(q, q);
  for (found.iterations = 0; found.iterations < 200; ++found.iterations) {
    found.minus_log = likelihood.derivatives(found.parameters, all_gradient, all_hessian);
    if (!std::isfinite(found.minus_log) || !all_hessian.allFinite()) return found;
    for (Eigen::Index i = 0; i < q; ++i) {
      gradient(i) = all_gradient(free[static_cast<std::size_t>(i)]);
      for (Eigen::Index j = 0; j < q; ++j) {
        hessian(i, j) = all_hessian(free[static_cast<std::size_t>(i)], free[static_cast<std::size_t>(j)]);
      }
    }
    const Eigen::LLT<numerics::Matrix> plain(hessian);
    const bool convex = plain.info() == Eigen::Success;
    if (convex && gradient.dot(plain.solve(gradient)) < 1e-18) {
      found.covariance = plain.solve(numerics::Matrix::Identity(q, q));
      found.converged = true;
      return found;
    }
    bool moved = false;
    double damping = convex ? 0.0 : 1e-3;
    for (int attempt = 0; attempt < 40 && !moved; ++attempt) {
      numerics::Matrix damped = hessian;
      damped.diagonal() += damping * hessian.diagonal().cwiseAbs().cwiseMax(1e-12);
      damping = std::max(10.0 * damping, 1e-6);
      const Eigen::LLT<numerics::Matrix> factor(damped);
      if (factor.info() != Eigen::Success) continue;
      numerics::Vector next = found.parameters;
      const numerics::Vector step = factor.solve(gradient);
      for (Eigen::Index i = 0; i < q; ++i)
        next(free[static_cast<std::size_t>(i)]) -= step(i);
      const double value = likelihood.value(next);
      if (!std::isfinite(value) || value > found.minus_log) continue;
      moved = (next - found.parameters).norm() > 0.0;
      found.parameters = next;
    }
    if (!moved) {
      // Rounding hides the rest of the fall: as good as it gets if the undamped promise is negligible.
      found.converged = convex && gradient.dot(plain.solve(gradient)) < 1e-10;
      if (convex) found.covariance = plain.solve(numerics::Matrix::Identity(q, q));
      return found;
    }
  }
  return found;
}

} // namespace chronodrome::pharmacology
